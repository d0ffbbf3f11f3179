#include "cases/operating_points.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <numbers>

namespace falcate::cases {
namespace {

double degrees(double radians) { return radians * 180.0 / std::numbers::pi; }

std::vector<double> blade_speeds(const Case& input, double jet_velocity) {
  const double radius = input.mean_diameter / 2.0;
  std::vector<double> speeds;
  if (input.speed) speeds.push_back(*input.speed * radius);
  for (const double speed : input.speeds) speeds.push_back(speed * radius);
  for (const double ratio : input.speed_ratios) speeds.push_back(ratio * jet_velocity);
  std::sort(speeds.begin(), speeds.end());
  return speeds;
}

OperatingPoint wheel_point(const Case& input, const post::NozzleFlow& jet, double blade_speed) {
  OperatingPoint point;
  const double radius = input.mean_diameter / 2.0;
  point.blade_speed = blade_speed;
  point.speed = blade_speed / radius;
  point.speed_ratio = blade_speed / jet.jet_velocity;
  point.triangle = post::inlet_triangle(jet.jet_velocity, degrees(input.nozzle_angle), blade_speed);
  const post::RelativeInlet inlet = post::relative_inlet(input.gas, jet, *point.triangle);
  point.inlet = inlet.condition;
  point.inlet_mach = inlet.mach;
  point.exit_pressure = jet.jet_pressure;
  point.duty = post::WheelDuty{blade_speed, radius, degrees(input.nozzle_angle), jet};
  return point;
}

OperatingPoint rig_point(const Case& input) {
  OperatingPoint point;
  point.inlet = {input.stream_total_pressure, input.stream_total_temperature, input.stream_angle,
                 input.stream_mach};
  point.inlet_mach = input.stream_mach.value_or(0.0);
  point.exit_pressure = input.stream_exit_pressure;
  return point;
}

}  // namespace

post::NozzleFlow nozzle_flow_of(const Case& input) {
  assert(input.kind == CaseKind::wheel);
  post::Nozzle nozzle;
  nozzle.throat_diameter = input.throat_diameter;
  nozzle.exit_diameter = input.nozzle_exit_diameter;
  nozzle.count = input.nozzle_count;
  nozzle.angle_deg = degrees(input.nozzle_angle);
  nozzle.velocity_coefficient = input.velocity_coefficient;
  nozzle.discharge_coefficient = input.discharge_coefficient;
  return post::nozzle_flow(input.gas, {input.supply_pressure, input.supply_temperature}, nozzle,
                           input.exhaust_pressure);
}

std::vector<OperatingPoint> operating_points(const Case& input) {
  std::vector<OperatingPoint> points;
  if (input.kind == CaseKind::rig) {
    points.push_back(rig_point(input));
  } else {
    const post::NozzleFlow jet = nozzle_flow_of(input);
    for (const double speed : blade_speeds(input, jet.jet_velocity))
      points.push_back(wheel_point(input, jet, speed));
  }
  for (std::size_t i = 0; i < points.size(); ++i) points[i].id = fmt::format("point-{:02}", i + 1);
  return points;
}

const OperatingPoint& design_point(const Case& input, const std::vector<OperatingPoint>& points) {
  assert(!points.empty());
  const double best = std::cos(input.nozzle_angle) / 2.0;
  return *std::min_element(points.begin(), points.end(),
                           [best](const OperatingPoint& a, const OperatingPoint& b) {
                             return std::abs(a.speed_ratio - best) < std::abs(b.speed_ratio - best);
                           });
}

}  // namespace falcate::cases
