/// Prandtl-Meyer angle and its inverse on Mach number squared, radians.
///   nu = sqrt((g+1)/(g-1)) atan sqrt((g-1)/(g+1) (M^2-1)) - atan sqrt(M^2-1)
/// Zero at and below Mach 1. Source: Ames Research Staff, NACA Report 1135 (1953), eq. 171c.
#pragma once
#include <algorithm>
#include <cmath>

#include "solver/dual.h"

namespace falcate::solver {

template <class T>
T prandtl_meyer(const T& mach_squared, double gamma) {
  using std::atan;
  using std::sqrt;
  if (value_of(mach_squared) <= 1.0 + 1e-9) return T(0.0);
  const double k = std::sqrt((gamma + 1.0) / (gamma - 1.0));
  const T root = sqrt(mach_squared - 1.0);
  return k * atan(root / k) - atan(root);
}

/// Inverse by Newton's method on sqrt(M^2 - 1); `nu` > 0 and below the limit of a vacuum.
template <class T>
T mach_squared_from_prandtl_meyer(const T& nu, double gamma) {
  const double k = std::sqrt((gamma + 1.0) / (gamma - 1.0));
  const double limit = 0.5 * 3.14159265358979323846 * (k - 1.0);
  const double target = std::min(value_of(nu), 0.999 * limit);
  // d nu / d r = r^2 (k^2 - 1) / ((k^2 + r^2)(1 + r^2)); near zero nu = r^3 (1 - 1/k^2)/3.
  const auto slope = [&](double r) {
    return r * r * (k * k - 1.0) / ((k * k + r * r) * (1.0 + r * r));
  };
  double r = std::cbrt(3.0 * target / (1.0 - 1.0 / (k * k)));
  for (int step = 0; step < 60; ++step) {
    const double error = k * std::atan(r / k) - std::atan(r) - target;
    const double change = error / slope(r);
    r = std::max(0.5 * r, r - change);
    if (std::abs(change) <= 1e-15 * r) break;
  }
  const T root = T(r) + (nu - target) / slope(r);
  return 1.0 + root * root;
}

}  // namespace falcate::solver
