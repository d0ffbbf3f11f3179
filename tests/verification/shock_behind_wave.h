// What an oblique shock makes of a stream, gamma 1.4, and the weak shock that turns it by an angle.
// NACA Report 1135 (1953), eqs. 128-132 and 138; angles in radians.
#pragma once
#include <cmath>
#include <numbers>

namespace falcate::verification {

struct BehindShock {
  double turning, pressure_ratio, density_ratio, mach;
};

/// Behind a shock of wave angle `wave`.
inline BehindShock behind_shock(double mach, double wave) {
  constexpr double gamma = 1.4;
  const double mn2 = std::pow(mach * std::sin(wave), 2);
  const double density = (gamma + 1.0) * mn2 / ((gamma - 1.0) * mn2 + 2.0);
  const double pressure = 1.0 + 2.0 * gamma / (gamma + 1.0) * (mn2 - 1.0);
  const double turning = wave - std::atan(std::tan(wave) / density);
  const double normal = std::sqrt((1.0 + 0.2 * mn2) / (gamma * mn2 - 0.2));
  return {turning, pressure, density, normal / std::sin(wave - turning)};
}

/// The weak shock that turns the stream by `turning`.
inline double wave_angle(double mach, double turning) {
  double low = std::asin(1.0 / mach), high = low + turning + std::numbers::pi / 18.0;
  for (int i = 0; i < 60; ++i) {
    const double middle = 0.5 * (low + high);
    (behind_shock(mach, middle).turning < turning ? low : high) = middle;
  }
  return low;
}

}  // namespace falcate::verification
