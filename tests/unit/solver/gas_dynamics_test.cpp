#include "solver/gas_dynamics.h"

#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <numbers>
#include <sstream>
#include <string>
#include <utility>
#include <vector>

#include "solver/dual.h"
#include "solver/prandtl_meyer.h"

namespace falcate::solver {
namespace {

constexpr double degree = std::numbers::pi / 180.0;

/// Rows of numbers of a table in the data folder; comments and the heading are left out.
std::vector<std::vector<double>> table(const std::string& name) {
  std::ifstream file(std::string(FALCATE_SOURCE_DIR) + "/tests/unit/solver/data/" + name);
  EXPECT_TRUE(file) << name;
  std::vector<std::vector<double>> rows;
  bool heading = true;
  for (std::string line; std::getline(file, line);) {
    if (line.empty() || line[0] == '#') continue;
    if (std::exchange(heading, false)) continue;
    std::istringstream fields(line);
    rows.emplace_back();
    for (std::string field; std::getline(fields, field, ',');)
      rows.back().push_back(std::stod(field));
  }
  return rows;
}

#define EXPECT_RELATIVE(value, expected, tolerance) \
  EXPECT_NEAR(value, expected, (tolerance)*std::abs(expected)) << "Mach " << mach

// tests/unit/solver/data/gasdynamics_checks.csv (source in its first line), eight digits.
TEST(GasDynamics, TableOfCheckValues) {
  const auto rows = table("gasdynamics_checks.csv");
  ASSERT_EQ(rows.size(), 12u);
  const double g = 1.4, digits = 5.1e-8;  // half a unit of the eighth digit
  for (const auto& r : rows) {
    const double mach = r.at(0);
    EXPECT_RELATIVE(pressure_ratio(mach, g), r[1], digits);
    EXPECT_RELATIVE(density_ratio(mach, g), r[2], digits);
    EXPECT_RELATIVE(temperature_ratio(mach, g), r[3], digits);
    EXPECT_RELATIVE(area_ratio(mach, g), r[4], digits);
    if (mach < 1.0) continue;
    EXPECT_NEAR(prandtl_meyer(mach * mach, g) / degree, r[5], 1e-6);
    const NormalShock shock = normal_shock(mach, g);
    EXPECT_RELATIVE(shock.mach, r[7], digits);
    EXPECT_RELATIVE(shock.pressure_ratio, r[8], digits);
    EXPECT_RELATIVE(shock.density_ratio, r[9], digits);
    EXPECT_RELATIVE(shock.temperature_ratio, r[10], digits);
    EXPECT_RELATIVE(shock.total_pressure_ratio, r[11], digits);
  }
}

TEST(GasDynamics, InversesReturnTheMachNumber) {
  for (double g : {1.289, 1.4, 1.667}) {
    for (double mach : {0.05, 0.3, 0.8, 1.0, 1.2, 1.7, 2.5, 4.0}) {
      EXPECT_RELATIVE(mach_from_pressure_ratio(pressure_ratio(mach, g), g), mach, 1e-12);
      const Branch branch = mach < 1.0 ? Branch::subsonic : Branch::supersonic;
      EXPECT_RELATIVE(mach_from_area_ratio(area_ratio(mach, g), g, branch), mach, 1e-7);
    }
  }
}

// Weak sound: p/p0 close to 1 must not lose its digits; M^2 = 2 (1 - p/p0)/gamma to first order.
TEST(GasDynamics, NearlyStillGasKeepsItsDigits) {
  const double small = std::ldexp(1.0, -40);
  EXPECT_NEAR(mach_from_pressure_ratio(1.0 - small, 1.4) / std::sqrt(2.0 * small / 1.4), 1.0,
              1e-11);
  EXPECT_EQ(mach_from_pressure_ratio(1.0, 1.4), 0.0);
}

// NACA Report 1135 (1953) table for gamma 1.4; constants of choked flow from its equations.
TEST(GasDynamics, ChokedFlow) {
  EXPECT_NEAR(choked_flow_constant(1.4), 0.684731, 5e-7);
  EXPECT_NEAR(choked_flow_constant(1.3), 0.667262, 5e-7);
  EXPECT_NEAR(choked_flow_constant(1.667), 0.726232, 5e-7);
  EXPECT_NEAR(critical_pressure_ratio(1.4), 0.528282, 5e-7);
  EXPECT_NEAR(critical_pressure_ratio(1.3), 0.545728, 5e-7);
  EXPECT_NEAR(critical_pressure_ratio(1.667), 0.487092, 5e-7);
}

TEST(GasDynamics, MassFluxPeaksAtTheSonicThroat) {
  const Gas air;
  const double p0 = 8e5, t0 = 293.15, sonic = p0 * critical_pressure_ratio(1.4);
  const double choked = choked_flow_constant(1.4) * p0 / std::sqrt(air.gas_constant * t0);
  EXPECT_NEAR(mass_flux(air, p0, t0, sonic) / choked, 1.0, 1e-12);
  EXPECT_LT(mass_flux(air, p0, t0, 1.05 * sonic), choked);
  EXPECT_LT(mass_flux(air, p0, t0, 0.95 * sonic), choked);
  // Isentropic flow over choked flow at p/p0 = 0.6, 0.7, 0.8, 0.9: isentropic relations,
  // recomputed.
  const double expected[] = {0.9886, 0.9322, 0.8188, 0.6171};
  for (int i = 0; i < 4; ++i)
    EXPECT_NEAR(mass_flux(air, p0, t0, (0.6 + 0.1 * i) * p0) / choked, expected[i], 5e-5);
}

// Energy: V = sqrt(2 cp T0 (1 - (p/p0)^((g-1)/g))). 5 bar absolute to atmosphere: Mach 1.7.
TEST(GasDynamics, SpoutingVelocity) {
  const Gas air;
  const double ratio = 1.01325 / 5.0;
  const double expected = std::sqrt(2.0 * 1004.675 * 293.15 * (1.0 - std::pow(ratio, 0.4 / 1.4)));
  EXPECT_NEAR(isentropic_velocity(air, 293.15, ratio), expected, 1e-9 * expected);
  EXPECT_NEAR(mach_from_pressure_ratio(ratio, 1.4), 1.7, 0.002);
}

// tests/unit/solver/data/kantrowitz_limits.csv (source in its first line), six decimals.
TEST(GasDynamics, StartingLimit) {
  const auto rows = table("kantrowitz_limits.csv");
  ASSERT_GT(rows.size(), 8u);
  for (const auto& r : rows) {
    const double mach = r.at(0);
    EXPECT_NEAR(starting_area_ratio(mach, 1.4), r[1], 1e-6) << mach;
    EXPECT_NEAR(1.0 / area_ratio(mach, 1.4), r[2], 1e-6) << mach;
    EXPECT_NEAR(starting_area_ratio(mach, 1.3), r[3], 1e-6) << mach;
    EXPECT_NEAR(1.0 / area_ratio(mach, 1.3), r[4], 1e-6) << mach;
  }
}

}  // namespace
}  // namespace falcate::solver
