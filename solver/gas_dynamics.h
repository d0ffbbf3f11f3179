/// One-dimensional gas dynamics of a calorically perfect gas.
/// `gamma` is the heat capacity ratio; subscript 0 at rest, * sonic, 1 and 2 before and after a
/// normal shock. Ratios are dimensionless, angles rad, everything else SI.
/// Source: Ames Research Staff, NACA Report 1135 (1953). Domains are asserted.
#pragma once
#include <cmath>

#include "solver/gas.h"

namespace falcate::solver {

double heat_capacity(const Gas& gas);                       ///< c_p, J/(kg K)
double speed_of_sound(const Gas& gas, double temperature);  ///< m/s

/// T/T0 from the square of the Mach number, a value or a dual number.
template <class T>
T temperature_ratio_from_square(const T& mach_squared, double gamma) {
  return 1.0 / (1.0 + 0.5 * (gamma - 1.0) * mach_squared);
}
double temperature_ratio(double mach, double gamma);                   ///< T/T0
double pressure_ratio(double mach, double gamma);                      ///< p/p0
double density_ratio(double mach, double gamma);                       ///< rho/rho0
double mach_from_pressure_ratio(double pressure_ratio, double gamma);  ///< p/p0 in (0, 1]
double critical_pressure_ratio(double gamma);                          ///< p*/p0

enum class Branch { subsonic, supersonic };
double area_ratio(double mach, double gamma);  ///< A/A*
double mach_from_area_ratio(double area_ratio, double gamma, Branch branch);

/// The isentropic stream whose density and pressure at rest are 1 (any number type).
template <class T>
struct UnitStream {
  T density, speed, pressure;
};
template <class T>
UnitStream<T> unit_stream(const T& mach_squared, double gamma) {
  using std::pow;
  using std::sqrt;
  const T temperature = temperature_ratio_from_square(mach_squared, gamma);
  const T density = pow(temperature, 1.0 / (gamma - 1.0));
  return {density, sqrt(T(gamma * mach_squared * temperature)), density * temperature};
}

struct NormalShock {
  double mach = 1.0;                  ///< M2
  double pressure_ratio = 1.0;        ///< p2/p1
  double density_ratio = 1.0;         ///< rho2/rho1
  double temperature_ratio = 1.0;     ///< T2/T1
  double total_pressure_ratio = 1.0;  ///< p02/p01
};
NormalShock normal_shock(double mach, double gamma);  ///< M1 >= 1

/// m sqrt(R T0) / (A p0) of a choked throat; 0.684731 for gamma 1.4.
double choked_flow_constant(double gamma);
/// Mass flow per area of the isentropic stream from rest at p0, T0 to the static pressure p, kg/(s
/// m2).
double mass_flux(const Gas& gas, double total_pressure, double total_temperature, double pressure);
/// Isentropic velocity from rest at T0 to p/p0, m/s.
double isentropic_velocity(const Gas& gas, double total_temperature, double pressure_ratio);
/// Least throat/inlet area ratio that lets a supersonic passage start: a normal shock stands ahead.
/// Source: Kantrowitz & Donaldson, NACA ACR L5D20 (1945).
double starting_area_ratio(double mach, double gamma);

}  // namespace falcate::solver
