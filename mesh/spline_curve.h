/// A cubic spline through points of the plane, parametrised by arc length.
///
/// C2 in a parameter that is the arc length of the spline itself but for the last correction (chord
/// lengths first, then improved), which keeps uneven point spacing from showing. Ends are
/// not-a-knot, as in C. de Boor, A Practical Guide to Splines (Springer, 1978); a closed curve is
/// smooth across its seam. Two points make a line. Units: metres. Neighbouring points must differ
/// (assert).
#pragma once
#include <vector>

#include "mesh/curve_piece.h"

namespace falcate::mesh {

class SplineCurve {
 public:
  /// `closed`: the last point is joined to the first, which is not repeated.
  explicit SplineCurve(std::vector<Point> points, bool closed = false);

  double length() const { return lengths_.back(); }
  const std::vector<double>& knot_lengths() const {
    return lengths_;
  }  ///< arc length at each point
  Point point(double s) const { return value(parameter(s), 0); }
  double curvature(double s) const;  ///< unsigned
  Point tangent(double s) const { return value(parameter(s), 1).normalized(); }

 private:
  Point value(double u, int derivative) const;
  double parameter(double s) const;
  double arc(double from, double to) const;
  void fit();
  void measure();

  std::vector<Point> points_, second_;   // knots and second derivatives there
  std::vector<double> knots_, lengths_;  // parameter and arc length at the knots
};

/// The part of a curve from `from` to `to`, backwards where `to` is the lesser.
CurvePiece spline_piece(const SplineCurve& curve, double from, double to);

}  // namespace falcate::mesh
