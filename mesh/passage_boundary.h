/// The boundary of the fluid between a blade (below) and its neighbour one pitch up, as exact
/// curves, counter-clockwise: lower blade's convex side, lower periodic line downstream, outlet,
/// upper periodic line, upper blade's concave side, upper periodic line upstream, inlet, lower
/// periodic line.
///
/// The periodic lines leave the blade where its edge faces the flow (the corner of a sharp edge,
/// the middle of a blunt one) along the given angle and relax to the axial direction over a fifth
/// of the width, which keeps the corners of the mesh at inlet and outlet square. Units: metres,
/// radians from the plane of rotation.
#pragma once
#include <functional>
#include <optional>
#include <vector>

#include "mesh/blade_outline.h"
#include "mesh/passage_mesh.h"

namespace falcate::mesh {

/// A curve of the boundary, free of kinks, run through from parameter `from` to `to`.
struct BoundaryCurve {
  std::optional<PatchKind> kind;  ///< none: periodic
  std::function<Point(double)> point;
  double from, to;
};

/// The outline as one closed curve, clockwise from the leading edge along the convex side.
class ClosedOutline {
 public:
  explicit ClosedOutline(const BladeOutline& outline);
  double length() const { return length_; }
  double suction_length() const { return suction_.length; }
  Point point(double u) const;       ///< u in metres, any number of times round
  double curvature(double u) const;  ///< unsigned
  Point tangent(double u) const;
  const std::vector<double>& kinks() const { return kinks_; }  ///< within 0..length

 private:
  BladeSide suction_, pressure_;
  double length_;
  std::vector<double> kinks_;
};

struct PassageBoundary {
  std::vector<BoundaryCurve> curves;
  std::size_t lower_downstream, upper_downstream, upper_upstream, lower_upstream;  ///< in curves
  double inlet_x, outlet_x;
};

PassageBoundary passage_boundary(const ClosedOutline& outline, double pitch, double width,
                                 double inlet_angle, double exit_angle, double upstream,
                                 double downstream);

}  // namespace falcate::mesh
