#include "post/mixed_out.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace falcate::post {
namespace {

constexpr double degree = std::numbers::pi / 180.0;
using solver::Branch;

const solver::Gas air;

/// Fluxes in +x of a uniform stream over a width.
solver::BoundaryFlux flux(const solver::Primitive& s, double width) {
  const double g = air.heat_capacity_ratio;
  const double enthalpy = g / (g - 1.0) * s.pressure / s.density + 0.5 * (s.u * s.u + s.v * s.v);
  const double mass = s.density * s.u * width;
  return {mass, mass * s.u + s.pressure * width, mass * s.v, mass * enthalpy};
}

solver::BoundaryFlux operator+(const solver::BoundaryFlux& a, const solver::BoundaryFlux& b) {
  return {a.mass + b.mass, a.momentum_x + b.momentum_x, a.momentum_y + b.momentum_y,
          a.energy + b.energy};
}

solver::Primitive stream(double mach, double angle_deg, double pressure, double temperature) {
  const double w = mach * std::sqrt(air.heat_capacity_ratio * air.gas_constant * temperature);
  return {pressure / (air.gas_constant * temperature), w * std::sin(angle_deg * degree),
          w * std::cos(angle_deg * degree), pressure};
}

TEST(MixedOut, UniformStreamIsItsOwn) {
  for (double mach : {1e-4, 0.1, 0.5, 0.9, 1.5, 2.5}) {
    for (double angle : {25.0, 90.0, 155.0}) {
      const solver::Primitive s = stream(mach, angle, 1e5, 250.0);
      const bool fast = mach * std::sin(angle * degree) > 1.0;
      const solver::Primitive mixed =
          mixed_out(air, flux(s, 0.012), 0.012, fast ? Branch::supersonic : Branch::subsonic);
      EXPECT_NEAR(mixed.u, s.u, 1e-9 * s.u) << mach << ' ' << angle;
      EXPECT_NEAR(mixed.v, s.v, 1e-9 * std::abs(s.v) + 1e-12) << mach << ' ' << angle;
      EXPECT_NEAR(mixed.pressure, s.pressure, 1e-9 * s.pressure) << mach << ' ' << angle;
      EXPECT_NEAR(mixed.density, s.density, 1e-9 * s.density) << mach << ' ' << angle;
    }
  }
}

// Both roots of the same fluxes are the two sides of a normal shock (Rankine-Hugoniot).
TEST(MixedOut, RootsAreJoinedByANormalShock) {
  const solver::Primitive s = stream(2.0, 90.0, 1e5, 250.0);
  const solver::Primitive mixed = mixed_out(air, flux(s, 1.0), 1.0, Branch::subsonic);
  EXPECT_NEAR(mixed.pressure / 1e5, 4.5, 1e-12);
  EXPECT_NEAR(mixed.density / s.density, 8.0 / 3.0, 1e-12);
}

// Wake check: M = 0.8 at 60 degrees from the axial direction, 10 % of the pitch at half speed with
// the same pressure and total enthalpy. Reference values recomputed from the control volume.
TEST(MixedOut, WakeCheck) {
  const solver::Primitive free = stream(0.8, 30.0, 1e5, 300.0);
  solver::Primitive wake = free;
  wake.u *= 0.5;
  wake.v *= 0.5;
  const double speed2 = free.u * free.u + free.v * free.v;
  const double temperature = 300.0 + 0.5 * 0.75 * speed2 / heat_capacity(air);
  wake.density = wake.pressure / (air.gas_constant * temperature);
  const solver::Primitive mixed =
      mixed_out(air, flux(free, 0.9) + flux(wake, 0.1), 1.0, Branch::subsonic);
  const StreamState state = stream_state(air, mixed);
  const double p01 = stream_state(air, free).total_pressure_pa;
  EXPECT_NEAR(90.0 - state.angle_deg, 60.7313, 5e-5);
  EXPECT_NEAR(state.mach, 0.77203, 5e-6);
  EXPECT_NEAR(state.pressure_pa / p01, 0.659990, 5e-7);
  EXPECT_NEAR(state.total_pressure_pa / p01, 0.978861, 5e-7);
  const double p02 = state.total_pressure_pa, p2 = state.pressure_pa;
  EXPECT_NEAR((p01 - p02) / (p02 - p2), 0.066293, 5e-6);
  EXPECT_NEAR((p01 - p02) / (p01 - p2), 0.062171, 5e-6);
}

TEST(MixedOut, KeepsAllFluxes) {
  const solver::BoundaryFlux uneven =
      flux(stream(1.4, 30.0, 0.9e5, 260.0), 0.007) + flux(stream(0.6, 50.0, 1.2e5, 310.0), 0.005);
  const solver::BoundaryFlux even = flux(mixed_out(air, uneven, 0.012, Branch::subsonic), 0.012);
  EXPECT_NEAR(even.mass / uneven.mass, 1.0, 1e-13);
  EXPECT_NEAR(even.momentum_x / uneven.momentum_x, 1.0, 1e-13);
  EXPECT_NEAR(even.momentum_y / uneven.momentum_y, 1.0, 1e-13);
  EXPECT_NEAR(even.energy / uneven.energy, 1.0, 1e-13);
}

// Mixing never gains total pressure (second law).
TEST(MixedOut, LosesTotalPressure) {
  const solver::Primitive one = stream(0.9, 40.0, 1e5, 300.0),
                          other = stream(0.3, 40.0, 1e5, 300.0);
  const StreamState mixed =
      stream_state(air, mixed_out(air, flux(one, 0.5) + flux(other, 0.5), 1.0, Branch::subsonic));
  EXPECT_LT(mixed.total_pressure_pa, stream_state(air, one).total_pressure_pa);
}

TEST(MixedOut, RefusesWhatNoStreamCarries) {
  try {
    mixed_out(air, {-0.25, 1e3, 0.0, -1e4}, 0.01, Branch::subsonic);
    FAIL();
  } catch (const MixedOutError& error) {
    EXPECT_STREQ(error.what(),
                 "no flow in the through-flow direction: -0.25 kg/(s m) pass the plane");
  }
  EXPECT_THAT(
      [] {
        mixed_out(air, {1.0, 1e-3, 0.0, 3e5}, 0.01, Branch::subsonic);
      },
      testing::ThrowsMessage<MixedOutError>(
          "no uniform stream carries the mass, momentum and energy of this plane"));
}

TEST(StreamState, OfAKnownStream) {
  const StreamState state = stream_state(air, stream(2.0, 155.0, 1e5, 200.0));
  EXPECT_NEAR(state.angle_deg, 155.0, 1e-12);
  EXPECT_NEAR(state.mach, 2.0, 1e-14);
  EXPECT_NEAR(state.total_pressure_pa, 1e5 / 0.127805, 5.0);       // NACA Report 1135
  EXPECT_NEAR(state.total_temperature_k, 200.0 / 0.555556, 1e-3);  // NACA Report 1135
}

}  // namespace
}  // namespace falcate::post
