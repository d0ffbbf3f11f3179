/// Velocity triangle at the blade inlet: absolute jet, blade speed, relative flow.
///   w_u = c cos(alpha) - u,  w_x = c sin(alpha),  angles from the plane of rotation.
/// SI units, angles in degrees. Source: any steam-turbine text; common practice.
#pragma once

namespace falcate::post {

struct VelocityTriangle {
  double blade_speed = 0.0;         ///< u, m/s
  double jet_velocity = 0.0;        ///< c1, m/s
  double jet_angle_deg = 0.0;       ///< alpha1
  double relative_velocity = 0.0;   ///< w1, m/s
  double relative_angle_deg = 0.0;  ///< beta1
};

VelocityTriangle inlet_triangle(double jet_velocity, double jet_angle_deg, double blade_speed);

}  // namespace falcate::post
