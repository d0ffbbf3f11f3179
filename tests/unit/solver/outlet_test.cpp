// The outflow plane under vortices and shocks: what keeps it from breaking.
#include "solver/outlet.h"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

namespace falcate::solver {
namespace {

constexpr double gamma = 1.4;

double total_enthalpy(const State<double>& q) {
  return gamma / (gamma - 1.0) * q[pressure] / q[density] +
         0.5 * (q[velocity_x] * q[velocity_x] + q[velocity_y] * q[velocity_y]);
}

// Energy equation and NACA Report 1135 (1953), eq. 44: the gas that comes back in was at rest, but
// for its tangential velocity, at the pressure of the plane and the supply's total enthalpy
// (gamma/(gamma-1) in units where total density and pressure are 1).
TEST(OutletBackflow, BringsTheTotalPressureOfThePlaneAndTheSuppliesEnthalpy) {
  const State<double> cell{0.7, -0.2, 0.3, 0.6};
  const State<double> in = outlet_detail::let_out(cell, 0.62, gamma);
  ASSERT_LT(in[velocity_x], 0.0);
  EXPECT_NEAR(total_enthalpy(in), gamma / (gamma - 1.0), 1e-14);
  const double a2 = gamma * in[pressure] / in[density];
  const double still = gamma / (gamma - 1.0) - 0.5 * in[velocity_y] * in[velocity_y];
  const double ratio =
      1.0 + 0.5 * in[velocity_x] * in[velocity_x] / (still - 0.5 * in[velocity_x] * in[velocity_x]);
  EXPECT_NEAR(in[pressure] * std::pow(ratio, gamma / (gamma - 1.0)), 0.62, 1e-14);
  EXPECT_LE(in[velocity_x] * in[velocity_x], a2);
}

TEST(OutletBackflow, IsAtMostSonic) {
  const State<double> nearly_empty{1e-3, -0.5, 0.0, 2e-4};
  const State<double> in = outlet_detail::let_out(nearly_empty, 0.5, gamma);
  const double mach = -in[velocity_x] / std::sqrt(gamma * in[pressure] / in[density]);
  EXPECT_NEAR(mach, 1.0, 1e-12);
  EXPECT_NEAR(in[pressure] / 0.5, std::pow(2.0 / (gamma + 1.0), gamma / (gamma - 1.0)), 1e-12);
}

TEST(OutletWaves, AreKeptWhileSmallAndHeldWhileLarge) {
  EXPECT_NEAR(outlet_detail::with_wave(0.5, 0.005), 0.505, 1e-9);
  for (const double half : {0.1, 0.5, 2.0, 1e3}) {
    EXPECT_LT(outlet_detail::with_wave(0.5, half), 0.5 * 1.6 + 1e-12);
    EXPECT_GT(outlet_detail::with_wave(0.5, -half), 0.5 * 0.4 - 1e-12);
  }
}

TEST(OutletWaves, CoefficientsAreExactAwayFromSonicAndHeldNearIt) {
  OutletStream s;
  s.u = 0.4;
  s.v = -0.7;
  s.mach_squared = s.u * s.u + s.v * s.v;
  const auto exact = outlet_detail::exact_coefficients(s),
             used = outlet_detail::wave_coefficients(s);
  EXPECT_EQ(exact.local2, used.local2);
  EXPECT_EQ(exact.hilbert3, used.hilbert3);
  s.u = 0.999;
  s.v = 0.01;
  s.mach_squared = s.u * s.u + s.v * s.v;
  EXPECT_GT(outlet_detail::exact_coefficients(s).hilbert2, 20.0);
  const auto held = outlet_detail::wave_coefficients(s);
  EXPECT_NEAR(std::hypot(held.local2, held.hilbert2), 3.0, 1e-12);
}

}  // namespace
}  // namespace falcate::solver
