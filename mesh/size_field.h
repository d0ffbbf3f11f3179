/// Wanted edge length over the passage, periodic in y, on a grid; bilinear between its points.
///
/// Small at edges and where walls curve, the base size between the blades, growing away from them
/// up- and downstream; its gradient is limited, so that neighbouring cells are of like size.
/// Units: metres.
#pragma once
#include <vector>

#include "mesh/passage_boundary.h"

namespace falcate::mesh {

struct SizeField {
  double x0 = 0.0, dx = 1.0, dy = 1.0, pitch = 1.0;
  int nx = 0, ny = 0;          ///< ny points a pitch, from y = 0
  std::vector<double> values;  ///< [ix * ny + iy]
  double at(double x, double y) const;
};

/// A place on the wall and its radius of curvature, 0 at a sharp edge.
struct WallSample {
  Point at;
  double radius;  ///< of curvature, m
};
std::vector<WallSample> wall_samples(const ClosedOutline& outline);

/// What the sizes are made from.
struct SizeRules {
  double base;  ///< edge length between the blades
  double gap;   ///< least distance between neighbours: four edges across it
  double pitch, width;
  double inlet_x, outlet_x;
  double gradient = 0.2;
  double curvature_share = 0.15;  ///< edge length / radius of curvature of the wall
};

SizeField make_size_field(const std::vector<WallSample>& walls, const SizeRules& rules);

/// For each grid point whether it lies in the fluid, given the blade as a polygon.
std::vector<char> fluid_mask(const SizeField& field, const std::vector<Point>& blade_polygon);

/// Cells of an all-quadrilateral mesh that follows the field: integral of dA/h^2 over the fluid.
double estimated_cells(const SizeField& field, const std::vector<char>& fluid);

}  // namespace falcate::mesh
