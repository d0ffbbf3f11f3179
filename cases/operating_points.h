/// The points a case asks for: its speeds with the velocity triangle and the relative inlet state
/// of each. An impulse wheel takes and leaves the gas at exhaust pressure: the jet's static
/// pressure, kept through the change of frame, is also the mixed-out pressure behind the blades.
/// SI units, angles in radians from the plane of rotation unless the name says degrees.
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "cases/case.h"
#include "post/nozzle.h"
#include "post/passage_figures.h"
#include "post/velocity_triangle.h"
#include "solver/flow_problem.h"

namespace falcate::cases {

struct OperatingPoint {
  std::string id;            ///< "point-01": rising speed
  double speed = 0.0;        ///< rad/s
  double blade_speed = 0.0;  ///< m/s
  double speed_ratio = 0.0;  ///< u/c1
  solver::InletCondition inlet;
  double exit_pressure = 0.0;                      ///< Pa
  double inlet_mach = 0.0;                         ///< relative; 0 where a rig case leaves it open
  std::optional<post::VelocityTriangle> triangle;  ///< wheel
  std::optional<post::WheelDuty> duty;             ///< wheel
};

/// Flow through the nozzles of a wheel case.
post::NozzleFlow nozzle_flow_of(const Case& input);

/// All speeds of the case, rising. `jet` is nozzle_flow_of(input); unused for a rig.
std::vector<OperatingPoint> operating_points(const Case& input);

/// The point the blade is shaped for: the one with u/c1 closest to cos(alpha1)/2, the best speed
/// ratio of a frictionless impulse stage (common practice).
const OperatingPoint& design_point(const Case& input, const std::vector<OperatingPoint>& points);

}  // namespace falcate::cases
