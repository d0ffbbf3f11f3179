/// One-dimensional gas dynamics of a calorically perfect gas.
/// `gamma` is the heat capacity ratio; subscript 0 at rest, * sonic, 1 and 2 before and after a
/// normal shock. Ratios are dimensionless, angles rad, everything else SI.
/// Source: Ames Research Staff, NACA Report 1135 (1953). Domains are asserted.
#pragma once
#include "solver/gas.h"

namespace falcate::post {

double heat_capacity(const solver::Gas& gas);                       ///< c_p, J/(kg K)
double speed_of_sound(const solver::Gas& gas, double temperature);  ///< m/s

double temperature_ratio(double mach, double gamma);                   ///< T/T0
double pressure_ratio(double mach, double gamma);                      ///< p/p0
double density_ratio(double mach, double gamma);                       ///< rho/rho0
double mach_from_pressure_ratio(double pressure_ratio, double gamma);  ///< p/p0 in (0, 1]
double critical_pressure_ratio(double gamma);                          ///< p*/p0

enum class Branch { subsonic, supersonic };
double area_ratio(double mach, double gamma);  ///< A/A*
double mach_from_area_ratio(double area_ratio, double gamma, Branch branch);

double prandtl_meyer_angle(double mach, double gamma);  ///< nu, M >= 1
double mach_from_prandtl_meyer_angle(double angle, double gamma);
double mach_angle(double mach);  ///< asin(1/M), M >= 1

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
double mass_flux(const solver::Gas& gas, double total_pressure, double total_temperature,
                 double pressure);
/// Isentropic velocity from rest at T0 to p/p0, m/s.
double isentropic_velocity(const solver::Gas& gas, double total_temperature, double pressure_ratio);
/// Least throat/inlet area ratio that lets a supersonic passage start: a normal shock stands ahead.
/// Source: Kantrowitz & Donaldson, NACA ACR L5D20 (1945).
double starting_area_ratio(double mach, double gamma);

}  // namespace falcate::post
