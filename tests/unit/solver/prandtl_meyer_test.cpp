// Ames Research Staff, NACA Report 1135 (1953), table II (gamma 1.4), digits recomputed.
#include "solver/prandtl_meyer.h"

#include <gtest/gtest.h>

#include <numbers>

namespace falcate::solver {
namespace {

constexpr double degree = std::numbers::pi / 180.0;

TEST(PrandtlMeyer, ValuesOfTheTable) {
  const double rows[][2] = {
      {1.2, 3.558233}, {1.5, 11.905209}, {2.0, 26.379761}, {2.5, 39.123564}, {3.0, 49.757347}};
  for (const auto& [mach, angle] : rows) {
    EXPECT_NEAR(prandtl_meyer(mach * mach, 1.4) / degree, angle, 6e-7) << mach;
    EXPECT_NEAR(std::sqrt(mach_squared_from_prandtl_meyer(angle * degree, 1.4)), mach, 1e-7);
  }
}

TEST(PrandtlMeyer, ComesBackFromItsInverse) {
  for (const double gamma : {1.1, 1.3, 1.4, 5.0 / 3.0})
    for (const double mach : {1.001, 1.05, 1.5, 3.0, 7.0}) {
      const double nu = prandtl_meyer(mach * mach, gamma);
      EXPECT_NEAR(mach_squared_from_prandtl_meyer(nu, gamma) / (mach * mach), 1.0, 1e-12)
          << "gamma " << gamma << " Mach " << mach;
    }
}

// d nu / d(M^2) = sqrt(M^2 - 1) / (2 M^2 (1 + (gamma-1)/2 M^2)), NACA 1135 eq. 171 differentiated.
TEST(PrandtlMeyer, HasItsDerivativeBothWays) {
  for (const double mach : {1.02, 1.4, 2.0, 4.0}) {
    const double m2 = mach * mach;
    const double slope = std::sqrt(m2 - 1.0) / (2.0 * m2 * (1.0 + 0.2 * m2));
    const auto nu = prandtl_meyer(Dual<1>::seeded(m2, 0), 1.4);
    EXPECT_NEAR(nu.derivative[0], slope, 1e-12) << mach;
    const auto back = mach_squared_from_prandtl_meyer(Dual<1>::seeded(nu.value, 0), 1.4);
    EXPECT_NEAR(back.derivative[0] * slope, 1.0, 1e-9) << mach;
  }
}

TEST(PrandtlMeyer, IsZeroUpToMachOne) {
  EXPECT_EQ(prandtl_meyer(0.25, 1.4), 0.0);
  EXPECT_EQ(prandtl_meyer(1.0, 1.4), 0.0);
  EXPECT_EQ(prandtl_meyer(Dual<1>::seeded(1.0, 0), 1.4).derivative[0], 0.0);
}

// Beyond the turn that empties the gas, 130.45 deg at gamma 1.4 (NACA 1135), the target is held at
// 0.999 of it.
TEST(PrandtlMeyer, InverseStaysFiniteBeyondTheVacuum) {
  const double limit = 90.0 * (std::sqrt(6.0) - 1.0) * degree;
  EXPECT_NEAR(limit / degree, 130.45, 0.01);
  const double m2 = mach_squared_from_prandtl_meyer(0.999 * limit, 1.4);
  EXPECT_NEAR(prandtl_meyer(m2, 1.4), 0.999 * limit, 1e-12);
}

}  // namespace
}  // namespace falcate::solver
