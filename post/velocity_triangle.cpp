#include "post/velocity_triangle.h"

#include <cassert>
#include <cmath>
#include <numbers>

namespace falcate::post {

VelocityTriangle inlet_triangle(double jet_velocity, double jet_angle_deg, double blade_speed) {
  assert(jet_velocity >= 0.0);
  const double radians = std::numbers::pi / 180.0;
  const double tangential = jet_velocity * std::cos(jet_angle_deg * radians) - blade_speed;
  const double axial = jet_velocity * std::sin(jet_angle_deg * radians);
  VelocityTriangle triangle;
  triangle.blade_speed = blade_speed;
  triangle.jet_velocity = jet_velocity;
  triangle.jet_angle_deg = jet_angle_deg;
  triangle.relative_velocity = std::hypot(tangential, axial);
  triangle.relative_angle_deg = std::atan2(axial, tangential) / radians;
  return triangle;
}

}  // namespace falcate::post
