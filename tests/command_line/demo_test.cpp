// The demo case, at two of its speeds and its own mesh: what goes in comes out, and the pressure on
// the blade is the momentum that the gas gives up (conservation of mass and momentum, to
// round-off).
#include <gtest/gtest.h>

#include <cmath>
#include <nlohmann/json.hpp>
#include <regex>

#include "tests/command_line/program.h"

namespace falcate::command_line {
namespace {

using cases::ScratchFolder;

TEST(Demo, BalancesMassAndMomentum) {
  const ScratchFolder folder;
  const std::string demo = content(FALCATE_SOURCE_DIR "/cases/examples/deburring-spindle.toml");
  const std::string two_speeds =
      std::regex_replace(demo, std::regex("speed_ratios = [^\n]*"), "speed_ratios = [0.25, 0.45]");
  ASSERT_NE(two_speeds, demo);
  folder.write("demo.toml", two_speeds);
  const Outcome run = falcate(folder, "run demo.toml --out demo");
  ASSERT_EQ(run.status, 0) << run.out << run.err;
  const auto json = nlohmann::json::parse(content(folder.path("demo/results.json")));
  ASSERT_EQ(json["points"].size(), 2U);
  for (const auto& point : json["points"]) {
    EXPECT_EQ(point["solution"]["status"], "steady");
    EXPECT_LE(point["solution"]["residual_drop"].get<double>(), 1e-10);
    EXPECT_NEAR(point["solution"]["cells"].get<double>(), 8000.0, 1200.0);
    const auto& balance = point["balance"];
    const double fu = point["force"]["tangential_n_m"], fx = point["force"]["axial_n_m"];
    const double size = std::hypot(fu, fx);
    EXPECT_LE(std::abs(balance["mass_imbalance"].get<double>()), 1e-10);
    EXPECT_NEAR(balance["momentum_tangential_n_m"].get<double>(), fu, 1e-10 * size);
    EXPECT_NEAR(balance["momentum_axial_n_m"].get<double>(), fx, 1e-10 * size);
  }
}

}  // namespace
}  // namespace falcate::command_line
