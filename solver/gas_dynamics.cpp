#include "solver/gas_dynamics.h"

#include <cassert>
#include <cmath>

namespace falcate::solver {
namespace {

/// Root of a function that changes sign between the ends, to the last bit.
template <class Function>
double bisect(const Function& f, double low, double high) {
  const bool rising = f(high) > 0.0;
  for (int i = 0; i < 200; ++i) {
    const double middle = 0.5 * (low + high);
    if (middle <= low || middle >= high) break;
    ((f(middle) > 0.0) == rising ? high : low) = middle;
  }
  return 0.5 * (low + high);
}

}  // namespace

double heat_capacity(const Gas& gas) {
  const double g = gas.heat_capacity_ratio;
  return g / (g - 1.0) * gas.gas_constant;
}

double speed_of_sound(const Gas& gas, double temperature) {
  assert(temperature > 0.0);
  return std::sqrt(gas.heat_capacity_ratio * gas.gas_constant * temperature);
}

double temperature_ratio(double mach, double gamma) {
  return temperature_ratio_from_square(mach * mach, gamma);
}

double pressure_ratio(double mach, double gamma) {
  return std::pow(temperature_ratio(mach, gamma), gamma / (gamma - 1.0));
}

double density_ratio(double mach, double gamma) {
  return std::pow(temperature_ratio(mach, gamma), 1.0 / (gamma - 1.0));
}

double mach_from_pressure_ratio(double pressure_ratio, double gamma) {
  assert(pressure_ratio > 0.0 && pressure_ratio <= 1.0);
  // expm1 and log1p keep the digits where the flow is nearly at rest.
  const double exponent = (gamma - 1.0) / gamma;
  return std::sqrt(2.0 / (gamma - 1.0) * std::expm1(-exponent * std::log(pressure_ratio)));
}

double critical_pressure_ratio(double gamma) { return pressure_ratio(1.0, gamma); }

double area_ratio(double mach, double gamma) {
  assert(mach > 0.0);
  const double base = 2.0 / (gamma + 1.0) / temperature_ratio(mach, gamma);
  return std::pow(base, 0.5 * (gamma + 1.0) / (gamma - 1.0)) / mach;
}

double mach_from_area_ratio(double area, double gamma, Branch branch) {
  assert(area >= 1.0);
  if (area == 1.0) return 1.0;
  if (branch == Branch::subsonic)
    return bisect([&](double m) { return area_ratio(m, gamma) - area; }, 1e-3 / area, 1.0);
  // In 1/M the supersonic branch lies between 0 and 1.
  const double least = 1e-6;
  assert(area < area_ratio(1.0 / least, gamma));
  return 1.0 / bisect([&](double s) { return area_ratio(1.0 / s, gamma) - area; }, least, 1.0);
}

NormalShock normal_shock(double mach, double gamma) {
  assert(mach >= 1.0);
  const double m2 = mach * mach;
  NormalShock shock;
  shock.mach = std::sqrt((1.0 + 0.5 * (gamma - 1.0) * m2) / (gamma * m2 - 0.5 * (gamma - 1.0)));
  shock.pressure_ratio = 1.0 + 2.0 * gamma / (gamma + 1.0) * (m2 - 1.0);
  shock.density_ratio = (gamma + 1.0) * m2 / ((gamma - 1.0) * m2 + 2.0);
  shock.temperature_ratio = shock.pressure_ratio / shock.density_ratio;
  shock.total_pressure_ratio =
      shock.pressure_ratio * pressure_ratio(mach, gamma) / pressure_ratio(shock.mach, gamma);
  return shock;
}

double choked_flow_constant(double gamma) {
  return std::sqrt(gamma) * std::pow(2.0 / (gamma + 1.0), 0.5 * (gamma + 1.0) / (gamma - 1.0));
}

double mass_flux(const Gas& gas, double total_pressure, double total_temperature, double pressure) {
  assert(total_pressure > 0.0 && total_temperature > 0.0);
  const double g = gas.heat_capacity_ratio;
  const double mach = mach_from_pressure_ratio(pressure / total_pressure, g);
  const double temperature = total_temperature * temperature_ratio(mach, g);
  return pressure / (gas.gas_constant * temperature) * mach * speed_of_sound(gas, temperature);
}

double isentropic_velocity(const Gas& gas, double total_temperature, double pressure_ratio) {
  const double g = gas.heat_capacity_ratio;
  const double mach = mach_from_pressure_ratio(pressure_ratio, g);
  return mach * speed_of_sound(gas, total_temperature * temperature_ratio(mach, g));
}

double starting_area_ratio(double mach, double gamma) {
  return 1.0 / (area_ratio(mach, gamma) * normal_shock(mach, gamma).total_pressure_ratio);
}

}  // namespace falcate::solver
