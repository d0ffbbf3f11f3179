/// The exact pieces a blade side is chained from: lines, arcs, parts of splines.
/// Each is parametrised by its arc length from 0 to `length` (metres).
#pragma once
#include <functional>
#include <vector>

#include "mesh/blade_outline.h"

namespace falcate::mesh {

struct CurvePiece {
  double length = 0.0;
  std::function<Point(double)> point;
  std::function<double(double)> curvature;  ///< unsigned, 1/m
};

CurvePiece line_piece(const Point& from, const Point& to);

/// Arc from one polar angle to another (rad, counter-clockwise where `to` is the greater).
CurvePiece arc_piece(const Point& centre, double radius, double from, double to);

/// The pieces end to end; pieces of no length are left out, joints become `corners`.
BladeSide chain(const std::vector<CurvePiece>& pieces);

}  // namespace falcate::mesh
