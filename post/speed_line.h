/// Efficiency and torque against speed: best speed, stall torque, runaway speed with honest limits.
#pragma once
#include <optional>
#include <vector>

#include "post/point_result.h"

namespace falcate::post {

struct SpeedLine {
  std::vector<double> speed_rpm, speed_ratio, blade_efficiency, blade_efficiency_error,
      wheel_efficiency, wheel_efficiency_error, torque_n_m, torque_error_n_m,
      power_w;  ///< points that stand, rising speed
  std::optional<double> best_speed_rpm,
      best_blade_efficiency;  ///< maximum of a smooth curve through the points
  std::optional<double> best_wheel_speed_rpm, best_wheel_efficiency;  ///< differs where flow spills
  bool best_at_end = false;                ///< the best lies at the end of the list: extend it
  std::optional<double> stall_torque_n_m;  ///< at zero speed; extrapolated where not computed
  bool stall_extrapolated = true;
  std::optional<double> runaway_speed_rpm;  ///< torque passes zero; extrapolated where not computed
  bool runaway_extrapolated = true;
};

/// Best speed: top of the parabola through the best point and its neighbours, the wheel at rest
/// being a point of every line. Stall torque and runaway speed are extrapolated only within the
/// reach of the points; where they cannot be told they are left out. Points of equal speed count
/// once.
SpeedLine make_speed_line(const std::vector<PointResult>& points);

}  // namespace falcate::post
