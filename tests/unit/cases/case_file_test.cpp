#include "cases/case_file.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "cases/blade_row.h"
#include "cases/operating_points.h"
#include "cases/sha256.h"
#include "tests/unit/cases/case_text.h"

namespace falcate::cases {
namespace {

constexpr double pi = std::numbers::pi;

Case read_text(const std::string& text) {
  const ScratchFolder folder;
  return read_case(folder.write("wheel-a.toml", text));
}

TEST(CaseFile, GivesEveryValueInSiUnits) {
  const Case input = read_text(joined(wheel_lines()));
  EXPECT_EQ(input.kind, CaseKind::wheel);
  EXPECT_EQ(input.title, "Test wheel");
  EXPECT_NEAR(input.supply_pressure, 6e5 + 101325.0, 1e-6);
  EXPECT_NEAR(input.supply_temperature, 293.15, 1e-9);
  EXPECT_NEAR(input.exhaust_pressure, 101300.0, 1e-6);
  EXPECT_NEAR(input.throat_diameter, 0.0016, 1e-15);
  EXPECT_EQ(input.nozzle_count, 2);
  EXPECT_NEAR(input.nozzle_angle, pi / 9.0, 1e-12);
  EXPECT_EQ(input.blade_count, 34);
  EXPECT_NEAR(*input.speed, 1500.0 * pi, 1e-9);
  EXPECT_EQ(input.cells, 8000);
  EXPECT_EQ(input.sha256, sha256(joined(wheel_lines())));
}

TEST(CaseFile, FillsInDefaults) {
  const Case input = read_text(
      "[supply]\npressure = \"3 bar(g)\"\n[nozzle]\nthroat_diameter = \"1.6 mm\"\n"
      "[wheel]\nmean_diameter = \"46 mm\"\nblade_count = 34\nblade_height = \"3 mm\"\n"
      "blade_width = \"6 mm\"\nspeed = \"45000 rpm\"\n[blade]\nshape = \"channel\"\n");
  EXPECT_EQ(input.title, "wheel-a");
  EXPECT_EQ(input.gas_name, "air");
  EXPECT_DOUBLE_EQ(input.gas.heat_capacity_ratio, 1.4);
  EXPECT_NEAR(input.supply_temperature, 293.15, 1e-9);
  EXPECT_DOUBLE_EQ(input.exhaust_pressure, 101325.0);
  EXPECT_DOUBLE_EQ(input.nozzle_exit_diameter, input.throat_diameter);
  EXPECT_EQ(input.nozzle_count, 1);
  EXPECT_NEAR(input.nozzle_angle, pi / 9.0, 1e-12);
  EXPECT_DOUBLE_EQ(input.velocity_coefficient, 0.95);
  EXPECT_DOUBLE_EQ(input.discharge_coefficient, 0.90);
  EXPECT_EQ(input.rim, "ringed");
  EXPECT_EQ(input.cells, 8000);
  EXPECT_FALSE(input.friction);
  EXPECT_EQ(input.passages, 3);
}

TEST(CaseFile, AddsGaugePressureToTheAtmosphereOfTheSite) {
  auto lines = wheel_lines();
  lines.push_back("[site]");
  lines.push_back("atmospheric_pressure = \"900 hPa\"");
  EXPECT_NEAR(read_text(joined(lines)).supply_pressure, 6e5 + 9e4, 1e-6);
}

TEST(CaseFile, TakesAGasOfTheUsersOwn) {
  auto lines = wheel_lines();
  lines[2] = "heat_capacity_ratio = 1.3\ngas_constant = \"188.9 J/(kg K)\"";
  const Case input = read_text(joined(lines));
  EXPECT_DOUBLE_EQ(input.gas.heat_capacity_ratio, 1.3);
  EXPECT_DOUBLE_EQ(input.gas.gas_constant, 188.9);
  EXPECT_EQ(input.gas_name, "");
}

TEST(CaseFile, ReadsARowAlone) {
  auto lines = rig_lines();
  lines.insert(lines.begin() + 5, "mach = 0.5");
  const Case input = read_text(joined(lines));
  EXPECT_EQ(input.kind, CaseKind::rig);
  EXPECT_DOUBLE_EQ(input.stream_total_pressure, 1.5e5);
  EXPECT_DOUBLE_EQ(*input.stream_mach, 0.5);
  EXPECT_NEAR(blade_inlet_angle(input), 25.0 * pi / 180.0, 1e-12);
  EXPECT_NEAR(blade_exit_angle(input), 155.0 * pi / 180.0, 1e-12);
  ASSERT_EQ(operating_points(input).size(), 1U);
  EXPECT_DOUBLE_EQ(operating_points(input)[0].exit_pressure, 1e5);
}

TEST(CaseFile, DigestCoversTheOutline) {
  const ScratchFolder folder;
  auto lines = rig_lines();
  lines[9] = "shape = \"coordinates\"\nfile = \"diamond.csv\"";
  // An invented diamond, thin enough to stand in its row.
  folder.write("diamond.csv", "x,y\n0,0\n0.5,-0.05\n1,0\n0.5,0.05\n");
  const std::string path = folder.write("row.toml", joined(lines));
  const std::string before = read_case(path).sha256;
  folder.write("diamond.csv", "x,y\n0,0\n0.5,-0.06\n1,0\n0.5,0.06\n");
  EXPECT_NE(read_case(path).sha256, before);
}

TEST(OperatingPoints, FollowTheVelocityTriangleByHand) {
  // By hand: air, 7.01325 to 1.013 bar, 293.15 K: c_is = sqrt(2 cp T0 (1 - r^(2/7))),
  // cp = 3.5 x 287.05; c1 = 0.95 c_is; u = 2 pi 750 x 0.023; w from the cosine rule.
  const Case input = read_text(joined(wheel_lines()));
  const auto points = operating_points(input);
  ASSERT_EQ(points.size(), 1U);
  const double cp = 3.5 * 287.05, ratio = 101300.0 / 701325.0;
  const double spouting = std::sqrt(2.0 * cp * 293.15 * (1.0 - std::pow(ratio, 2.0 / 7.0)));
  const double c1 = 0.95 * spouting, u = 2.0 * pi * 750.0 * 0.023, alpha = pi / 9.0;
  const double w = std::sqrt(c1 * c1 + u * u - 2.0 * c1 * u * std::cos(alpha));
  const double beta = std::atan2(c1 * std::sin(alpha), c1 * std::cos(alpha) - u);
  const double t1 = 293.15 - c1 * c1 / (2.0 * cp);
  const double mach = w / std::sqrt(1.4 * 287.05 * t1);
  EXPECT_NEAR(points[0].blade_speed, u, 1e-9 * u);
  EXPECT_NEAR(points[0].speed_ratio, u / c1, 1e-9);
  EXPECT_NEAR(points[0].inlet.angle, beta, 1e-9);
  EXPECT_NEAR(points[0].inlet_mach, mach, 1e-9);
  EXPECT_NEAR(points[0].inlet.total_temperature, t1 + w * w / (2.0 * cp), 1e-6);
  EXPECT_NEAR(points[0].inlet.total_pressure, 101300.0 * std::pow(1.0 + 0.2 * mach * mach, 3.5),
              1e-3);
  EXPECT_NEAR(points[0].exit_pressure, 101300.0, 1e-9);
  EXPECT_NEAR(blade_inlet_angle(input), beta, 1e-9);
}

TEST(OperatingPoints, RiseInSpeedAndShapeTheBladeForTheBest) {
  auto lines = wheel_lines();
  lines[19] = "speed_ratios = [0.6, 0.2, 0.46, 0.4]";
  const Case input = read_text(joined(lines));
  const auto points = operating_points(input);
  ASSERT_EQ(points.size(), 4U);
  EXPECT_EQ(points[0].id, "point-01");
  EXPECT_NEAR(points[0].speed_ratio, 0.2, 1e-12);
  EXPECT_NEAR(points[3].speed_ratio, 0.6, 1e-12);
  // cos(20 deg)/2 = 0.4698: nearest on the list is 0.46.
  EXPECT_NEAR(design_point(input, points).speed_ratio, 0.46, 1e-12);
}

TEST(BladeRow, OfEachShapeHasAPassage) {
  for (const char* shape : {"channel", "cup"}) {
    SCOPED_TRACE(shape);
    auto lines = wheel_lines();
    lines[21] = "shape = \"" + std::string(shape) + "\"";
    const BladeRow row = make_blade_row(read_text(joined(lines)));
    EXPECT_NEAR(row.pitch, pi * 0.046 / 34.0, 1e-12);
    EXPECT_NEAR(row.outline.width(), 0.006, 1e-6);
    EXPECT_GT(row.throat, 0.2 * row.pitch * std::sin(row.inlet_angle));
    EXPECT_LT(row.throat, row.pitch);
  }
}

}  // namespace
}  // namespace falcate::cases
