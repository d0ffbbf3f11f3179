#include "cases/wheel_safety.h"

#include <algorithm>
#include <cassert>
#include <numbers>

#include "cases/operating_points.h"

namespace falcate::cases {
namespace {

/// The material of the case: by name, of the user's own, or none.
std::optional<post::Material> material_of(const Case& input) {
  if (const post::Material* named = post::find_material(input.material)) return *named;
  if (!input.density || !input.allowable_stress) return std::nullopt;
  post::Material own{};
  own.name = "own";
  own.title = "material of the case file";
  own.density = *input.density;
  own.poisson_ratio = 0.3;
  own.allowable_stress = *input.allowable_stress;
  own.strength = *input.allowable_stress;
  own.highest_temperature = 1e4;  // not known, so that no caution hangs on it
  own.source = "case file";
  return own;
}

}  // namespace

std::vector<post::SafetyRow> wheel_safety(const Case& input, std::optional<double> runaway_rpm) {
  assert(input.kind == CaseKind::wheel);
  const std::optional<post::Material> material = material_of(input);
  const auto points = operating_points(input);
  const post::NozzleFlow jet = nozzle_flow_of(input);
  const double per_minute = 30.0 / std::numbers::pi;
  post::SafetyInput safety;
  safety.material = material ? &*material : nullptr;
  safety.ringed = input.rim == "ringed";
  safety.outer_radius = 0.5 * (input.mean_diameter + input.blade_height) +
                        (safety.ringed ? input.ring_thickness : 0.0);
  safety.bore_radius = 0.5 * input.bore_diameter;
  safety.running_speed_rpm = points.back().speed * per_minute;
  const double bound = post::runaway_bound_rpm(
      jet.jet_velocity, input.nozzle_angle * 180.0 / std::numbers::pi, input.mean_diameter / 2.0);
  safety.runaway_speed_rpm = runaway_rpm ? std::min(*runaway_rpm, bound) : bound;
  safety.runaway_is_bound = !runaway_rpm;
  safety.supply_pressure = input.supply_pressure;
  safety.atmospheric_pressure = input.atmospheric_pressure;
  safety.supply_temperature = input.supply_temperature;
  safety.jet_temperature = jet.jet_temperature;
  safety.jet_velocity = jet.jet_velocity;
  return post::safety_rows(safety);
}

}  // namespace falcate::cases
