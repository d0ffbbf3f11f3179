#include "post/velocity_triangle.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace falcate::post {
namespace {

// Worked examples of impulse-turbine texts: c1, angle 20 degrees, u = 300 m/s; recomputed to the
// digits shown from the triangle by hand.
TEST(VelocityTriangle, WorkedExamples) {
  const VelocityTriangle first = inlet_triangle(900.0, 20.0, 300.0);
  EXPECT_NEAR(first.relative_velocity, 626.55, 0.005);
  EXPECT_NEAR(first.relative_angle_deg, 29.43, 0.005);
  const VelocityTriangle second = inlet_triangle(700.0, 20.0, 300.0);
  EXPECT_NEAR(second.relative_velocity, 430.50, 0.005);
  EXPECT_NEAR(second.relative_angle_deg, 33.79, 0.005);
  const VelocityTriangle third = inlet_triangle(600.0, 25.0, 200.0);
  EXPECT_NEAR(third.relative_velocity, 427.18, 0.005);
}

TEST(VelocityTriangle, AtRestTheRelativeFlowIsTheJet) {
  const VelocityTriangle t = inlet_triangle(430.0, 20.0, 0.0);
  EXPECT_NEAR(t.relative_velocity, 430.0, 1e-11);
  EXPECT_NEAR(t.relative_angle_deg, 20.0, 1e-13);
}

// A wheel running ahead of the jet meets it from the front: the angle passes 90 degrees.
TEST(VelocityTriangle, FasterThanTheJet) {
  const VelocityTriangle t = inlet_triangle(100.0, 60.0, 50.0);
  EXPECT_NEAR(t.relative_angle_deg, 90.0, 1e-12);
  EXPECT_GT(inlet_triangle(100.0, 60.0, 80.0).relative_angle_deg, 90.0);
}

// Frictionless symmetric stage, eta = 2 r (cos a - r)(1 + k cos b2/cos b1): the triangle gives the
// same through F u/(c1^2/2). Stodola, Steam and Gas Turbines; example values recomputed.
TEST(VelocityTriangle, DiagramEfficiencyOfTheTextbookExample) {
  const double k = 0.7, u = 300.0, c1 = 900.0;
  const VelocityTriangle t = inlet_triangle(c1, 20.0, u);
  const double b1 = t.relative_angle_deg * std::numbers::pi / 180.0;
  const double force = t.relative_velocity * std::cos(b1) * (1.0 + k);
  EXPECT_NEAR(force, 927.7, 0.05);
  EXPECT_NEAR(force * u / (0.5 * c1 * c1), 0.68721, 5e-6);
  const double r = u / c1, a = 20.0 * std::numbers::pi / 180.0;
  EXPECT_NEAR(force * u / (0.5 * c1 * c1), 2.0 * r * (std::cos(a) - r) * (1.0 + k), 1e-12);
}

}  // namespace
}  // namespace falcate::post
