#include "cases/derived_state.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "cases/flow_remarks.h"
#include "cases/wheel_safety.h"
#include "post/gas_properties.h"
#include "solver/gas_dynamics.h"

namespace falcate::cases {
namespace {

constexpr double pi = std::numbers::pi;

double degrees(double radians) { return radians * 180.0 / pi; }
double rpm(double speed) { return speed * 30.0 / pi; }
std::string mm(double metres) { return fmt::format("{:.3f} mm", metres * 1e3); }
std::string bar(double pascal) { return fmt::format("{:.4f} bar(a)", pascal / 1e5); }
std::string celsius(double kelvin) { return fmt::format("{:.1f} degC", kelvin - 273.15); }
std::string metres_per_second(double v) { return fmt::format("{:.1f} m/s", v); }

double viscosity_of(const Case& input, double temperature) {
  if (input.viscosity) return *input.viscosity;
  const post::NamedGas* gas = post::find_gas(input.gas_name);
  return gas ? post::viscosity(*gas, temperature) : 0.0;
}

std::string gas_text(const Case& input) {
  const post::NamedGas* gas = post::find_gas(input.gas_name);
  return fmt::format("{}, heat capacity ratio {:.4g}, gas constant {:.5g} J/(kg K)",
                     gas ? gas->title : "gas of the case file", input.gas.heat_capacity_ratio,
                     input.gas.gas_constant);
}

/// Volume the flow takes up at 1.01325 bar(a) and 0 degC (DIN 1343), litres a minute.
double normal_litres_per_minute(const Case& input, double mass_flow) {
  const double density = 101325.0 / (input.gas.gas_constant * 273.15);
  return mass_flow / density * 6e4;
}

DerivedGroup jet_group(const Case& input, const post::NozzleFlow& jet) {
  DerivedGroup group{"Supply, nozzle and jet", {}};
  const double power = 0.5 * jet.mass_flow * jet.spouting_velocity * jet.spouting_velocity;
  group.rows = {
      {"Gas", gas_text(input)},
      {"Supply",
       fmt::format("{}, {}", bar(input.supply_pressure), celsius(input.supply_temperature))},
      {"Exhaust", bar(input.exhaust_pressure)},
      {"Supply over exhaust pressure", fmt::format("{:.3f}", jet.supply_to_exhaust)},
      {"Nozzle made for a ratio of", fmt::format("{:.3f}", jet.design_supply_to_exhaust)},
      {"Nozzle", post::regime_words(jet.regime)},
      {"Nozzle choked", jet.choked ? "yes" : "no"},
      {"Spouting velocity", metres_per_second(jet.spouting_velocity)},
      {"Jet velocity c1", metres_per_second(jet.jet_velocity)},
      {"Jet Mach number", fmt::format("{:.3f}", jet.jet_mach)},
      {"Jet temperature", celsius(jet.jet_temperature)},
      {"Gas flow", fmt::format("{:.3f} g/s ({:.0f} normal litres/min)", jet.mass_flow * 1e3,
                               normal_litres_per_minute(input, jet.mass_flow))},
      {"Power in the gas",
       fmt::format("{:.1f} W (gas flow x spouting velocity squared / 2)", power)}};
  return group;
}

DerivedGroup stream_group(const Case& input) {
  DerivedGroup group{"Stream", {}};
  const double ratio = input.stream_exit_pressure / input.stream_total_pressure;
  group.rows = {
      {"Gas", gas_text(input)},
      {"Total pressure", bar(input.stream_total_pressure)},
      {"Total temperature", celsius(input.stream_total_temperature)},
      {"Angle", fmt::format("{:.2f} deg", degrees(input.stream_angle))},
      {"Exit pressure", bar(input.stream_exit_pressure)},
      {"Isentropic exit Mach number",
       fmt::format("{:.3f}",
                   solver::mach_from_pressure_ratio(ratio, input.gas.heat_capacity_ratio))},
      {"Isentropic exit velocity", metres_per_second(solver::isentropic_velocity(
                                       input.gas, input.stream_total_temperature, ratio))}};
  if (input.stream_mach)
    group.rows.emplace_back("Inlet Mach number", fmt::format("{:.3f}", *input.stream_mach));
  return group;
}

DerivedGroup row_group(const Case& input, const BladeRow& row) {
  DerivedGroup group{"Blade row", {}};
  group.rows = {{"Shape", input.shape},
                {"Pitch", mm(row.pitch)},
                {"Width (axial)", mm(row.width)},
                {"Solidity (width over pitch)", fmt::format("{:.3f}", row.width / row.pitch)},
                {"Blade inlet angle", fmt::format("{:.2f} deg", degrees(row.inlet_angle))},
                {"Blade exit angle", fmt::format("{:.2f} deg", degrees(row.exit_angle))},
                {"Throat of the passage", mm(row.throat)},
                {"Throat over inlet stream width",
                 fmt::format("{:.3f}", throat_ratio(row, row.inlet_angle))}};
  if (input.kind == CaseKind::wheel) {
    const double arc =
        input.nozzle_count * input.nozzle_exit_diameter / std::sin(input.nozzle_angle);
    group.rows.emplace_back("Blades under the jets",
                            fmt::format("{:.1f} of {}", arc / row.pitch, input.blade_count));
    group.rows.emplace_back("Admission", fmt::format("{:.1f} % of the circumference",
                                                     100.0 * arc / (pi * input.mean_diameter)));
  }
  return group;
}

std::vector<std::string> speed_row(const Case& input, const BladeRow& row,
                                   const OperatingPoint& point) {
  const double reynolds = passage_reynolds_number(input, row, point);
  return {point.id,
          fmt::format("{:.0f}", rpm(point.speed)),
          fmt::format("{:.1f}", point.blade_speed),
          fmt::format("{:.3f}", point.speed_ratio),
          fmt::format("{:.1f}", point.triangle->relative_velocity),
          fmt::format("{:.2f}", point.triangle->relative_angle_deg),
          fmt::format("{:.3f}", point.inlet_mach),
          fmt::format("{:.3f}", point.inlet_mach * std::sin(point.inlet.angle)),
          reynolds > 0.0 ? fmt::format("{:.2g}", reynolds) : "-"};
}

/// A jet wider than the blades are high misses them.
void jet_cautions(const Case& input, const post::NozzleFlow& jet, DerivedState& state) {
  if (input.nozzle_exit_diameter > input.blade_height)
    state.cautions.push_back(fmt::format(
        "Nozzle: its exit bore of {} is more than the blade height of {}, so that part of the jet "
        "misses the blades.",
        mm(input.nozzle_exit_diameter), mm(input.blade_height)));
  if (jet.regime == post::NozzleRegime::shock_inside)
    state.cautions.push_back(
        "Nozzle: a shock stands in its divergent part, and the jet is slower than computed here; "
        "make the exit narrower.");
  if (input.rim == "open")
    state.cautions.push_back(
        "Open rim: gas that spills over the tips is not counted in this version; the figures are "
        "those of a closed passage, which an open wheel does not reach.");
  if (input.friction)
    state.cautions.push_back(
        "Friction: asked for, but not counted in this version; efficiency and speed are those of "
        "a frictionless passage.");
}

/// Kantrowitz limit: a passage narrower than it holds a shock ahead of it and spills.
void starting_caution(const Case& input, const BladeRow& row,
                      const std::vector<OperatingPoint>& points, DerivedState& state) {
  for (const OperatingPoint& point : points) {
    if (point.inlet_mach <= 1.0) continue;
    const double area = throat_ratio(row, point.inlet.angle);
    const double limit =
        solver::starting_area_ratio(point.inlet_mach, input.gas.heat_capacity_ratio);
    if (area >= limit) continue;
    state.cautions.push_back(fmt::format(
        "{}: throat over inlet stream width is {:.3f}, below the starting limit of {:.3f} at Mach "
        "{:.2f}; {}; a shock may stand ahead of the blades and gas spill past them.",
        points.size() == 1 ? "Passage" : "Passage at " + point.id, area, limit, point.inlet_mach,
        starting_words(area, input.gas.heat_capacity_ratio)));
  }
}

DerivedGroup safety_group(const std::vector<post::SafetyRow>& rows, DerivedState& state) {
  DerivedGroup group{"Strength and safety", {}};
  for (const post::SafetyRow& row : rows) {
    group.rows.emplace_back(row.quantity, row.value);
    if (!row.caution.empty())
      state.cautions.push_back(fmt::format("{}: {}", row.quantity, row.caution));
  }
  return group;
}

std::string speed_table(const DerivedState& state) {
  std::vector<std::size_t> widths;
  for (std::size_t i = 0; i < state.speed_heading.size(); ++i) {
    std::size_t width = state.speed_heading[i].size();
    for (const auto& row : state.speed_rows) width = std::max(width, row[i].size());
    widths.push_back(width);
  }
  const auto line = [&](const std::vector<std::string>& cells) {
    std::string text;
    for (std::size_t i = 0; i < cells.size(); ++i)
      text += fmt::format("  {:>{}}", cells[i], widths[i]);
    return text + "\n";
  };
  std::string text = "\nVelocity triangles\n" + line(state.speed_heading);
  for (const auto& row : state.speed_rows) text += line(row);
  return text;
}

}  // namespace

double passage_reynolds_number(const Case& input, const BladeRow& row,
                               const OperatingPoint& point) {
  if (!point.duty) return 0.0;
  const post::NozzleFlow& jet = point.duty->jet;
  const double viscosity = viscosity_of(input, jet.jet_temperature);
  if (viscosity <= 0.0) return 0.0;
  return jet.jet_density * point.triangle->relative_velocity * row.throat / viscosity;
}

DerivedState derived_state(const Case& input, const BladeRow& row,
                           const std::vector<OperatingPoint>& points) {
  DerivedState state;
  if (input.kind == CaseKind::rig) {
    state.groups = {stream_group(input), row_group(input, row)};
    if (input.friction)
      state.cautions.push_back("Friction: asked for, but not counted in this version.");
    starting_caution(input, row, points, state);
    return state;
  }
  const post::NozzleFlow jet = nozzle_flow_of(input);
  state.groups = {jet_group(input, jet), row_group(input, row)};
  state.speed_heading = {"point",     "rpm",     "u m/s",      "u/c1",    "w1 m/s",
                         "angle deg", "Mach w1", "axial Mach", "Reynolds"};
  for (const OperatingPoint& point : points)
    state.speed_rows.push_back(speed_row(input, row, point));
  jet_cautions(input, jet, state);
  starting_caution(input, row, points, state);
  state.groups.push_back(safety_group(wheel_safety(input), state));
  return state;
}

std::string derived_text(const Case& input, const DerivedState& state) {
  std::size_t width = 0;
  for (const DerivedGroup& group : state.groups)
    for (const auto& row : group.rows) width = std::max(width, row.first.size());
  std::string text = fmt::format("{}\n({})\n", input.title, input.file);
  for (std::size_t i = 0; i < state.groups.size(); ++i) {
    text += fmt::format("\n{}\n", state.groups[i].title);
    for (const auto& row : state.groups[i].rows)
      text += fmt::format("  {:<{}}  {}\n", row.first, width, row.second);
    if (i == 1 && !state.speed_rows.empty()) text += speed_table(state);
  }
  if (!state.cautions.empty()) text += "\nCautions\n";
  for (const std::string& caution : state.cautions) text += fmt::format("  - {}\n", caution);
  return text;
}

}  // namespace falcate::cases
