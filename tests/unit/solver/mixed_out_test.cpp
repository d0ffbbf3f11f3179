// Conservation of mass, momentum and energy; the roots are joined by a normal shock.
#include "solver/mixed_out.h"

#include <gtest/gtest.h>

#include <cmath>

namespace falcate::solver {
namespace {

constexpr double gamma = 1.4;

State<double> flux_of(const State<double>& q) {
  return physical_flux(q, mesh::Point(1.0, 0.0), gamma);
}

TEST(MixedOutStream, HasTheFluxesThatItIsMadeFrom) {
  const State<double> one = flux_of({1.0, 0.8, 0.7, 0.8}), other = flux_of({0.9, 0.7, 0.6, 0.78});
  State<double> mean{};
  for (std::size_t k = 0; k < 4; ++k) mean[k] = 0.7 * one[k] + 0.3 * other[k];
  for (const Branch branch : {Branch::subsonic, Branch::supersonic}) {
    const State<double> q = mixed_out_state(mean, gamma, branch);
    const State<double> back = flux_of(q);
    for (std::size_t k = 0; k < 4; ++k) EXPECT_NEAR(back[k], mean[k], 1e-14 * std::abs(mean[k]));
    EXPECT_EQ(q[velocity_x] > speed_of_sound(q, gamma), branch == Branch::supersonic);
  }
}

// NACA Report 1135 (1953), table II: behind a normal shock at Mach 2 p rises 4.5, rho 8/3 times.
TEST(MixedOutStream, RootsAreJoinedByANormalShock) {
  const State<double> fast = {1.4, 2.0, 0.3, 1.0};
  const State<double> slow = mixed_out_state(flux_of(fast), gamma, Branch::subsonic);
  EXPECT_NEAR(slow[pressure], 4.5, 1e-13);
  EXPECT_NEAR(slow[density] / 1.4, 8.0 / 3.0, 1e-13);
  EXPECT_NEAR(slow[velocity_y], 0.3, 1e-15);
  const State<double> same = mixed_out_state(flux_of(fast), gamma, Branch::supersonic);
  EXPECT_NEAR(same[velocity_x], 2.0, 1e-13);
}

// A stream that is uniform changes with its own pressure one to one, and no other of its figures.
TEST(MixedOutStream, CarriesExactDerivatives) {
  const State<Dual<1>> q = {Dual<1>(1.1), Dual<1>(0.5), Dual<1>(-0.8), Dual<1>::seeded(0.9, 0)};
  const auto mixed =
      mixed_out_state(physical_flux(q, mesh::Point(1.0, 0.0), gamma), gamma, Branch::subsonic);
  EXPECT_NEAR(mixed[pressure].value, 0.9, 1e-14);
  EXPECT_NEAR(mixed[pressure].derivative[0], 1.0, 1e-13);
  for (const std::size_t k : {density, velocity_x, velocity_y})
    EXPECT_NEAR(mixed[k].derivative[0], 0.0, 1e-13) << k;
}

// Close to rest the velocity keeps its digits: (F_x/m) is 10^8 times larger than it.
TEST(MixedOutStream, KeepsItsDigitsAtLowSpeed) {
  const State<double> still = {1.0, 1e-4, 1e-5, 1.0};
  EXPECT_NEAR(mixed_out_state(flux_of(still), gamma, Branch::subsonic)[velocity_x], 1e-4, 1e-18);
}

// Less momentum than any uniform stream of this mass and energy has: the sonic velocity
// b/a = (gamma/(gamma+1)) F_x/m, and a finite slope.
TEST(MixedOutStream, BeyondTheSonicStreamStaysFinite) {
  const State<Dual<1>> flux = {Dual<1>(1.0), Dual<1>::seeded(1.0, 0), Dual<1>(0.0), Dual<1>(3.5)};
  ASSERT_LT(mixed_out_equation(flux, gamma).discriminant().value, 0.0);
  const auto q = mixed_out_state(flux, gamma, Branch::subsonic);
  EXPECT_NEAR(q[velocity_x].value, 1.4 / 2.4, 1e-7);
  EXPECT_NEAR(q[velocity_x].derivative[0], 1.4 / 2.4, 1e-7);
}

}  // namespace
}  // namespace falcate::solver
