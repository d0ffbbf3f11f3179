#include "post/speed_line.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <vector>

namespace falcate::post {
namespace {

// Frictionless-jet impulse stage: eta = 2 r (cos a1 - r)(1 + K), K = k cos b2/cos b1 fixed
// (Stodola, Steam and Gas Turbines; any steam-turbine text). Torque is linear in speed: stall and
// runaway are exact, the best speed ratio is cos(a1)/2.
constexpr double jet = 430.0, radius = 0.023, flow = 0.004, k = 0.85;
const double cosine = std::cos(20.0 * std::numbers::pi / 180.0);

double rpm(double ratio) { return ratio * jet / radius * 30.0 / std::numbers::pi; }

PointResult stage(double ratio) {
  PointResult p;
  p.wheel = true;
  p.speed_ratio = ratio;
  p.speed_rpm = rpm(ratio);
  p.blade_speed_m_s = ratio * jet;
  p.figures.blade_efficiency = 2.0 * ratio * (cosine - ratio) * (1.0 + k);
  p.figures.wheel_efficiency = 0.9 * p.figures.blade_efficiency;
  p.figures.torque_n_m = flow * jet * (cosine - ratio) * (1.0 + k) * radius;
  p.figures.power_w = p.figures.torque_n_m / radius * p.blade_speed_m_s;
  p.numerical_error.torque_n_m = 1e-4;
  p.numerical_error.blade_efficiency = 0.01;
  return p;
}

std::vector<PointResult> stages(const std::vector<double>& ratios) {
  std::vector<PointResult> points;
  for (double ratio : ratios) points.push_back(stage(ratio));
  return points;
}

const double stall = flow * jet * cosine * (1.0 + k) * radius;

TEST(SpeedLine, BestSpeedOfTheImpulseStage) {
  const SpeedLine line = make_speed_line(stages({0.1, 0.25, 0.4, 0.55, 0.7}));
  ASSERT_TRUE(line.best_speed_rpm && line.best_blade_efficiency);
  EXPECT_NEAR(*line.best_speed_rpm, rpm(0.5 * cosine), 1e-6 * rpm(0.5));
  EXPECT_NEAR(*line.best_blade_efficiency, 0.816796, 5e-7);  // cos^2(20 deg)/2 (1 + 0.85)
  EXPECT_NEAR(*line.best_wheel_speed_rpm, *line.best_speed_rpm, 1e-6 * rpm(0.5));
  EXPECT_NEAR(*line.best_wheel_efficiency, 0.9 * *line.best_blade_efficiency, 1e-12);
  EXPECT_FALSE(line.best_at_end);
}

TEST(SpeedLine, TheWheelAtRestIsAPointOfTheLine) {
  const SpeedLine line = make_speed_line(stages({0.45, 0.8}));
  EXPECT_NEAR(*line.best_speed_rpm, rpm(0.5 * cosine), 1e-6 * rpm(0.5));
  EXPECT_FALSE(line.best_at_end);
}

TEST(SpeedLine, BestAtTheEndIsSaid) {
  const SpeedLine line = make_speed_line(stages({0.1, 0.2, 0.3}));
  EXPECT_TRUE(line.best_at_end);
  EXPECT_EQ(*line.best_speed_rpm, rpm(0.3));
  EXPECT_EQ(*line.best_blade_efficiency, stage(0.3).figures.blade_efficiency);
}

TEST(SpeedLine, StallAndRunawayExtrapolated) {
  for (const auto& ratios : {std::vector<double>{0.1, 0.2, 0.3}, std::vector<double>{0.2, 0.4}}) {
    const SpeedLine line = make_speed_line(stages(ratios));
    ASSERT_TRUE(line.stall_torque_n_m && line.runaway_speed_rpm);
    EXPECT_NEAR(*line.stall_torque_n_m, stall, 1e-10 * stall);
    EXPECT_TRUE(line.stall_extrapolated);
    EXPECT_NEAR(*line.runaway_speed_rpm, rpm(cosine), 1e-8 * rpm(cosine));
    EXPECT_TRUE(line.runaway_extrapolated);
  }
}

TEST(SpeedLine, StallAndRunawayComputed) {
  const SpeedLine line = make_speed_line(stages({0.0, 0.3, 0.6, 0.9, 1.0}));
  EXPECT_EQ(*line.stall_torque_n_m, stage(0.0).figures.torque_n_m);
  EXPECT_FALSE(line.stall_extrapolated);
  EXPECT_NEAR(*line.runaway_speed_rpm, rpm(cosine), 1e-8 * rpm(cosine));
  EXPECT_FALSE(line.runaway_extrapolated);
}

// A curved torque line: the parabola finds the stall torque of T = 3 - 2 n - n^2 (n in 1000 rpm).
TEST(SpeedLine, CurvedTorqueAtStall) {
  std::vector<PointResult> points = stages({0.1, 0.2, 0.3});
  for (std::size_t i = 0; i < 3; ++i) {
    const double n = 0.1 * static_cast<double>(i + 1);
    points[i].speed_rpm = 1000.0 * n;
    points[i].figures.torque_n_m = 3.0 - 2.0 * n - n * n;
  }
  EXPECT_NEAR(*make_speed_line(points).stall_torque_n_m, 3.0, 1e-12);
}

TEST(SpeedLine, WhatCannotBeToldIsLeftOut) {
  EXPECT_FALSE(make_speed_line({}).best_speed_rpm);
  const SpeedLine one = make_speed_line(stages({0.3}));
  EXPECT_TRUE(one.best_at_end);
  EXPECT_FALSE(one.stall_torque_n_m);
  EXPECT_FALSE(one.runaway_speed_rpm);
  // Far from rest and close together: no reach back to the stall torque nor out to runaway.
  const SpeedLine narrow = make_speed_line(stages({0.50, 0.51}));
  EXPECT_FALSE(narrow.stall_torque_n_m);
  std::vector<PointResult> flat = stages({0.1, 0.2});
  flat[1].figures.torque_n_m = flat[0].figures.torque_n_m;
  EXPECT_FALSE(make_speed_line(flat).runaway_speed_rpm);
  flat[1].figures.torque_n_m *= 0.99;
  EXPECT_FALSE(make_speed_line(flat).runaway_speed_rpm);
}

TEST(SpeedLine, SortsAndLeavesOutFailedPoints) {
  std::vector<PointResult> points = stages({0.4, 0.2, 0.3, 0.2});
  points[2].failure = "did not converge";
  points.emplace_back();  // a rig point
  const SpeedLine line = make_speed_line(points);
  EXPECT_EQ(line.speed_ratio, (std::vector<double>{0.2, 0.4}));
  EXPECT_EQ(line.torque_n_m[0], stage(0.2).figures.torque_n_m);
  EXPECT_EQ(line.torque_error_n_m[1], 1e-4);
  EXPECT_EQ(line.blade_efficiency_error[1], 0.01);
  EXPECT_EQ(line.power_w.size(), 2u);
}

TEST(SpeedLine, AWheelThatNeverPullsHasNoBestSpeed) {
  const SpeedLine line = make_speed_line(stages({1.0, 1.1}));
  EXPECT_FALSE(line.best_speed_rpm);
  EXPECT_FALSE(line.runaway_speed_rpm);
}

}  // namespace
}  // namespace falcate::post
