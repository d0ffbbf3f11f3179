// Limiter and positive step against their closed forms and limits.
#include "solver/reconstruction.h"

#include <gtest/gtest.h>

#include <cmath>
#include <random>

namespace falcate::solver {
namespace {

TEST(LimitedDifference, KeepsLinearFields) {
  for (const double d : {-3.0, -1e-6, 1e-9, 0.2, 5.0})
    for (const double e : {1e-30, 1e-6, 1.0, 1e6})
      EXPECT_NEAR(limited_difference(d, d, e), d, 4e-16 * std::abs(d)) << "e " << e;
}

TEST(LimitedDifference, IsOddAndVanishesWithItsDifferences) {
  for (const double e : {1e-6, 1.0}) {
    EXPECT_EQ(limited_difference(0.0, 0.0, e), 0.0);
    for (const double d1 : {0.3, 2.0})
      for (const double d2 : {-1.0, 0.1, 4.0})
        EXPECT_DOUBLE_EQ(limited_difference(-d1, -d2, e), -limited_difference(d1, d2, e));
  }
}

// Far below the threshold: (2 d1 + d2)/3. On q = x^2 over even cells (averages) that makes the face
// value exact: third order.
TEST(LimitedDifference, IsThirdOrderInSmoothFlow) {
  EXPECT_NEAR(limited_difference(0.3, 0.1, 1e12), 0.7 / 3.0, 1e-12);
  const auto average = [](double x) { return x * x + 1.0 / 12.0; };  // over x - 1/2 to x + 1/2
  const double x = 3.0, d1 = average(x + 1.0) - average(x), d2 = average(x) - average(x - 1.0);
  EXPECT_NEAR(average(x) + 0.5 * limited_difference(d1, d2, 1e15), (x + 0.5) * (x + 0.5), 1e-12);
}

// Far above the threshold: (2 d1^2 d2 + d2^2 d1)/(2 d1^2 - d1 d2 + 2 d2^2). The smaller difference
// rules and an extremum is flattened.
TEST(LimitedDifference, FollowsTheSmallerDifferenceAtJumps) {
  const double e = 1e-20;
  EXPECT_NEAR(limited_difference(1.0, 1e-6, e), 1e-6, 1e-10);
  EXPECT_NEAR(limited_difference(1e-6, 1.0, e), 0.5e-6, 1e-10);
  EXPECT_NEAR(limited_difference(2.0, 1.0, e), 10.0 / 8.0, 1e-14);
  EXPECT_NEAR(limited_difference(1.0, 2.0, e), 8.0 / 8.0, 1e-14);
}

// The face value q + f/2 stays between the two cells for differences of one sign (0 <= f <= 2 d1),
// and past an extremum, where f = d1 r (r - 2)/(2 + r + 2 r^2) with r = -d2/d1, |f| is at most the
// smaller difference.
TEST(LimitedDifference, IsBounded) {
  std::mt19937 dice(3);
  std::uniform_real_distribution<double> exponent(-6.0, 6.0);
  for (int i = 0; i < 20000; ++i) {
    const double d1 = std::pow(10.0, exponent(dice)), d2 = std::pow(10.0, exponent(dice));
    const double f = limited_difference(d1, d2, 1e-30);
    ASSERT_GE(f, 0.0);
    ASSERT_LE(f, 2.0 * d1 * (1.0 + 1e-12));
    ASSERT_LE(std::abs(limited_difference(d1, -d2, 1e-30)), std::min(d1, d2) * (1.0 + 1e-12));
  }
}

TEST(PositiveStep, IsPlainUntilHalfIsLost) {
  EXPECT_EQ(positive_step(2.0, 5.0), 7.0);
  EXPECT_EQ(positive_step(2.0, -0.9), 1.1);
}

TEST(PositiveStep, ContinuesWithItsSlopeAtHalf) {
  using D = Dual<2>;
  const double q = 2.0, at = -0.5 * q, h = 1e-9;
  const auto before = positive_step(D::seeded(q, 0), D::seeded(at + h, 1));
  const auto after = positive_step(D::seeded(q, 0), D::seeded(at - h, 1));
  EXPECT_NEAR(before.value, after.value, 3e-9);
  EXPECT_NEAR(before.derivative[0], after.derivative[0], 1e-8);
  EXPECT_NEAR(before.derivative[1], after.derivative[1], 1e-8);
  EXPECT_NEAR(after.derivative[1], 1.0, 1e-8);
}

TEST(PositiveStep, NeverReachesZeroAndNeverTurnsBack) {
  double last = 2.0;
  for (double step = -0.01; step > -50.0; step *= 1.2) {
    const double q = positive_step(1.0, step);
    EXPECT_GT(q, 0.0);
    EXPECT_LT(q, last);
    last = q;
  }
}

}  // namespace
}  // namespace falcate::solver
