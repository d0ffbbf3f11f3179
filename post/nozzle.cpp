#include "post/nozzle.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <numbers>

#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

using solver::Branch, solver::choked_flow_constant, solver::critical_pressure_ratio;
using solver::mach_from_area_ratio, solver::mach_from_pressure_ratio, solver::normal_shock;
using solver::pressure_ratio, solver::temperature_ratio;

constexpr double design_tolerance = 0.01;

double circle(double diameter) { return 0.25 * std::numbers::pi * diameter * diameter; }

/// State in the exit plane and regime, by the back pressures that separate the regimes.
struct ExitPlane {
  NozzleRegime regime;
  double mach, pressure_ratio;  ///< p_e/p0
  double design_pressure_ratio;
};

/// Mach number behind a shock inside: mass through the choked throat leaves at pressure p_e.
double mach_behind_shock(double area, double pressure_ratio, double gamma) {
  const double k = choked_flow_constant(gamma) / (pressure_ratio * area);
  return std::sqrt((std::sqrt(1.0 + 2.0 * (gamma - 1.0) * k * k / gamma) - 1.0) / (gamma - 1.0));
}

ExitPlane convergent_exit(double back, double gamma) {
  const double critical = critical_pressure_ratio(gamma);
  if (back > critical)
    return {NozzleRegime::subsonic, mach_from_pressure_ratio(back, gamma), back, critical};
  return {NozzleRegime::choked, 1.0, critical, critical};
}

ExitPlane divergent_exit(double back, double area, double gamma) {
  const double choking = pressure_ratio(mach_from_area_ratio(area, gamma, Branch::subsonic), gamma);
  const double mach = mach_from_area_ratio(area, gamma, Branch::supersonic);
  const double design = pressure_ratio(mach, gamma);
  const double shock_at_exit = design * normal_shock(mach, gamma).pressure_ratio;
  if (back > choking)
    return {NozzleRegime::subsonic, mach_from_pressure_ratio(back, gamma), back, design};
  if (back > shock_at_exit)
    return {NozzleRegime::shock_inside, mach_behind_shock(area, back, gamma), back, design};
  NozzleRegime regime = NozzleRegime::design;
  if (back > design * (1.0 + design_tolerance)) regime = NozzleRegime::overexpanded;
  if (back < design * (1.0 - design_tolerance)) regime = NozzleRegime::underexpanded;
  return {regime, mach, design, design};
}

/// V + (p_e - p) A_e/m of the loss-free flow.
double momentum_velocity(const solver::Gas& gas, const Supply& supply, const ExitPlane& exit,
                         double exhaust_pressure) {
  const double g = gas.heat_capacity_ratio;
  const double temperature = supply.temperature * temperature_ratio(exit.mach, g);
  const double velocity = exit.mach * speed_of_sound(gas, temperature);
  const double pressure = exit.pressure_ratio * supply.pressure;
  const double flux = pressure / (gas.gas_constant * temperature) * velocity;
  return velocity + (pressure - exhaust_pressure) / flux;
}

NozzleFlow still_gas(const solver::Gas& gas, const Supply& supply, double exhaust_pressure) {
  NozzleFlow flow;
  flow.supply_to_exhaust = supply.pressure / exhaust_pressure;
  flow.exit_pressure = flow.jet_pressure = exhaust_pressure;
  flow.jet_temperature = supply.temperature;
  flow.jet_density = exhaust_pressure / (gas.gas_constant * supply.temperature);
  return flow;
}

void set_jet(NozzleFlow& flow, const solver::Gas& gas, const Supply& supply, const Nozzle& nozzle) {
  const bool shocks =
      flow.regime == NozzleRegime::shock_inside || flow.regime == NozzleRegime::overexpanded;
  flow.jet_velocity =
      nozzle.velocity_coefficient * (shocks ? flow.momentum_velocity : flow.spouting_velocity);
  flow.jet_temperature =
      supply.temperature - 0.5 * flow.jet_velocity * flow.jet_velocity / heat_capacity(gas);
  flow.jet_density = flow.jet_pressure / (gas.gas_constant * flow.jet_temperature);
  flow.jet_mach = flow.jet_velocity / speed_of_sound(gas, flow.jet_temperature);
}

}  // namespace

const char* regime_words(NozzleRegime regime) {
  switch (regime) {
    case NozzleRegime::no_flow:
      return "no flow: the exhaust pressure is not below the supply pressure";
    case NozzleRegime::subsonic:
      return "subsonic: not choked, the flow depends on the exhaust pressure";
    case NozzleRegime::choked:
      return "choked: sonic at the exit of a convergent nozzle, the jet expands further outside";
    case NozzleRegime::shock_inside:
      return "overexpanded: a shock stands inside the divergent part and the jet leaves subsonic";
    case NozzleRegime::overexpanded:
      return "overexpanded: the jet leaves below exhaust pressure, shocks outside";
    case NozzleRegime::design:
      return "at its design pressure ratio: the jet leaves at exhaust pressure";
    case NozzleRegime::underexpanded:
      return "underexpanded: the jet leaves above exhaust pressure and expands further outside";
  }
  return "";
}

NozzleFlow nozzle_flow(const solver::Gas& gas, const Supply& supply, const Nozzle& nozzle,
                       double exhaust_pressure) {
  assert(supply.pressure > 0.0 && supply.temperature > 0.0 && exhaust_pressure > 0.0);
  assert(nozzle.throat_diameter > 0.0 && nozzle.exit_diameter >= nozzle.throat_diameter);
  const double g = gas.heat_capacity_ratio;
  const double area = circle(nozzle.exit_diameter) / circle(nozzle.throat_diameter);
  const double back = exhaust_pressure / supply.pressure;
  NozzleFlow flow = still_gas(gas, supply, exhaust_pressure);
  const bool convergent = area < 1.0 + 1e-9;
  const ExitPlane exit = convergent ? convergent_exit(std::min(back, 1.0), g)
                                    : divergent_exit(std::min(back, 1.0), area, g);
  flow.design_supply_to_exhaust = 1.0 / exit.design_pressure_ratio;
  if (back >= 1.0) return flow;
  flow.regime = exit.regime;
  flow.choked = exit.regime != NozzleRegime::subsonic;
  flow.exit_mach = exit.mach;
  flow.exit_pressure = exit.pressure_ratio * supply.pressure;
  flow.spouting_velocity = isentropic_velocity(gas, supply.temperature, back);
  flow.momentum_velocity = momentum_velocity(gas, supply, exit, exhaust_pressure);
  set_jet(flow, gas, supply, nozzle);
  const double throat_flux =
      flow.choked ? choked_flow_constant(g) * supply.pressure /
                        std::sqrt(gas.gas_constant * supply.temperature)
                  : area * mass_flux(gas, supply.pressure, supply.temperature, exhaust_pressure);
  flow.mass_flow =
      nozzle.discharge_coefficient * nozzle.count * circle(nozzle.throat_diameter) * throat_flux;
  return flow;
}

RelativeInlet relative_inlet(const solver::Gas& gas, const NozzleFlow& jet,
                             const VelocityTriangle& triangle) {
  const double g = gas.heat_capacity_ratio;
  const double angle = triangle.relative_angle_deg * std::numbers::pi / 180.0;
  RelativeInlet inlet;
  inlet.mach = triangle.relative_velocity / speed_of_sound(gas, jet.jet_temperature);
  inlet.axial_mach = inlet.mach * std::sin(angle);
  inlet.condition.total_pressure = jet.jet_pressure / pressure_ratio(inlet.mach, g);
  inlet.condition.total_temperature = jet.jet_temperature / temperature_ratio(inlet.mach, g);
  inlet.condition.angle = angle;
  inlet.condition.mach = inlet.mach;
  return inlet;
}

}  // namespace falcate::post
