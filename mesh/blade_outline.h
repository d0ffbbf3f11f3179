/// The closed outline of one blade: suction and pressure side, each from leading to trailing edge.
///
/// The blade is an arch that bulges to +y: the suction (convex) side lies on top, the pressure
/// (concave) side below. Leading edge towards -x (inflow), trailing edge towards +x; x runs from 0
/// to `width()`. Both sides start at the leading-edge nose and end at the trailing-edge nose (the
/// points of least and greatest x on a rounded edge, the corner on a sharp or cusped one, the
/// middle of the cut on a blunt one). A side is a chain of exact pieces (line, arc, spline);
/// `point(s)` is on the true curve. Units: metres, radians from the plane of rotation (y axis):
/// direction = (sin a, cos a).
#pragma once
#include <functional>
#include <stdexcept>
#include <string>
#include <vector>

#include "mesh/point.h"

namespace falcate::mesh {

/// A blade that cannot be: the message says what is wrong and what to change.
class ShapeError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// One side, parametrised by arc length from the leading to the trailing edge.
struct BladeSide {
  double length = 0.0;                      ///< m
  std::function<Point(double)> point;       ///< arc length 0..length -> point
  std::function<double(double)> curvature;  ///< unsigned, 1/m, at arc length
  std::vector<double> corners;  ///< arc lengths of kinks and curvature jumps, ends not included
};

class BladeOutline {
 public:
  BladeOutline(BladeSide suction, BladeSide pressure);
  const BladeSide& suction() const { return suction_; }
  const BladeSide& pressure() const { return pressure_; }
  double width() const { return width_; }  ///< axial chord, m
  /// Closed polygon for drawing: counter-clockwise, `per_side` points a side, dense where curved.
  std::vector<Point> polygon(int per_side = 200) const;

 private:
  BladeSide suction_, pressure_;
  double width_ = 0.0;
};

}  // namespace falcate::mesh
