#include "cases/flow_remarks.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <numbers>
#include <sstream>

namespace falcate::cases {
namespace {

using ::testing::ElementsAre;
using ::testing::IsEmpty;

constexpr double degree = std::numbers::pi / 180.0;

EntryFacts entry(double mach, double throat_ratio) {
  return {mach, 25.0 * degree, throat_ratio, 1.4, 1e5, true};
}

/// A point that has nothing to remark on.
post::PassageFigures quiet() {
  post::PassageFigures figures;
  figures.capacity_ratio = 1.0;
  figures.exit = {155.0, 0.8, 250.0, 1e5, 1.5e5, 300.0};
  figures.tangential_force_n_m = 10.0;
  return figures;
}

// Closed form of Kantrowitz & Donaldson, NACA ACR L5D20 (1945), tabled with an independent program.
TEST(Starting, IsTheInverseOfTheKantrowitzLimit) {
  std::ifstream table(FALCATE_SOURCE_DIR "/tests/unit/solver/data/kantrowitz_limits.csv");
  ASSERT_TRUE(table);
  int rows = 0;
  for (std::string line; std::getline(table, line);) {
    std::istringstream cells(line);
    double mach = 0.0, ratio = 0.0;
    char comma = 0;
    if (!(cells >> mach >> comma >> ratio)) continue;
    ++rows;
    const auto found = least_starting_mach(ratio, 1.4);
    ASSERT_TRUE(found) << line;
    // The table has six digits of the ratio, which falls slowly at high Mach numbers.
    EXPECT_NEAR(*found, mach, 2e-4 * mach) << line;
  }
  EXPECT_GE(rows, 10);
  EXPECT_EQ(least_starting_mach(1.0, 1.4), 1.0);
  EXPECT_EQ(least_starting_mach(1.3, 1.4), 1.0);
  EXPECT_FALSE(least_starting_mach(0.6, 1.4));  // 0.6002 at Mach infinity
}

TEST(FlowRemarks, AreNoneWhereTheStreamIsSwallowed) {
  EXPECT_THAT(flow_remarks(entry(2.0, 0.9), quiet(), false), IsEmpty());
  EXPECT_THAT(flow_remarks(entry(0.5, 0.4), quiet(), false), IsEmpty());
}

TEST(FlowRemarks, TellOfAPassageThatDoesNotStart) {
  auto figures = quiet();
  figures.capacity_ratio = 0.83;
  EXPECT_THAT(
      flow_remarks(entry(1.5, 0.822048), figures, true),
      ElementsAre(
          "The passage does not start at relative Mach 1.50: a shock stands before the "
          "blades (computed as a normal shock) and the gas enters below the speed of sound.",
          "The throat is 0.822 of the inlet stream width: it starts only above Mach 2.00 "
          "(Kantrowitz limit).",
          "The passage swallows 83 % of the gas that the jet offers; the rest spills past "
          "it."));
  EXPECT_THAT(flow_remarks(entry(3.0, 0.5), quiet(), false),
              ElementsAre("The throat is 0.500 of the inlet stream width: it starts at no Mach "
                          "number (Kantrowitz limit)."));
}

TEST(FlowRemarks, TellOfAJetThatNarrows) {
  auto figures = quiet();
  figures.capacity_ratio = 1.01;
  EXPECT_THAT(flow_remarks(entry(0.5, 1.0), figures, false), IsEmpty());
  figures.capacity_ratio = 1.16;
  EXPECT_THAT(flow_remarks(entry(0.5, 1.0), figures, false),
              ElementsAre("The passage would swallow 16 % more gas than the jet offers: the jet "
                          "narrows before the blades and fills fewer passages; force, torque and "
                          "power are those of the nozzles' flow."));
}

TEST(FlowRemarks, TellOfAnExitPressureThatIsMissed) {
  auto figures = quiet();
  // Pressure behind a shock at Mach 1.2 over that ahead of it: 1.513 (NACA Report 1135, table II).
  figures.exit = {90.0, 1.2, 350.0, 0.74394e5, 1.5e5, 300.0};
  EXPECT_THAT(
      flow_remarks(entry(0.5, 1.0), figures, false),
      ElementsAre("The row is at its limit load: the gas leaves at axial Mach 1.20, so that "
                  "a pressure behind it below 1.1258 bar(a) does not act on it; the mixed-out "
                  "exit pressure is 0.7439 bar(a), not the 1.0000 bar(a) set."));
  // More than the shock can hold off: no limit load.
  figures.exit = {90.0, 1.1, 350.0, 0.74394e5, 1.5e5, 300.0};
  EXPECT_THAT(flow_remarks(entry(0.5, 1.0), figures, false),
              ElementsAre("The exit pressure is missed: the mixed-out exit pressure is 0.7439 "
                          "bar(a), not the 1.0000 bar(a) set."));
  figures.exit = {150.0, 0.8, 250.0, 1.02e5, 1.5e5, 300.0};
  EXPECT_THAT(flow_remarks(entry(0.5, 1.0), figures, false),
              ElementsAre("The exit pressure is missed: the mixed-out exit pressure is 1.0200 "
                          "bar(a), not the 1.0000 bar(a) set."));
}

TEST(FlowRemarks, TellOfRunaway) {
  auto figures = quiet();
  figures.tangential_force_n_m = -1.0;
  EXPECT_THAT(flow_remarks(entry(0.5, 1.0), figures, false),
              ElementsAre("The gas brakes the wheel: this speed is beyond runaway."));
}

TEST(UnsolvedWords, SayWhatTheFlowDid) {
  const auto words = [](const EntryFacts& e, const UnsolvedFlow& f) {
    return unsolved_words(e, f);
  };
  EXPECT_EQ(words(entry(0.5, 1.0), {false, 1.0, 0.0, 0.5}),
            "the numbers ran away before a flow took shape");
  EXPECT_EQ(words(entry(0.5, 1.0), {true, -0.1, 0.0, 0.5}),
            "no gas enters: the pressure behind the row drives it back");
  EXPECT_EQ(words(entry(1.5, 0.822048), {true, 0.1, 0.0, 1.5}),
            "the passage does not start at relative Mach 1.50; it starts only above Mach 2.00 "
            "(Kantrowitz limit)");
  EXPECT_EQ(words(entry(1.5, 0.95), {true, 0.1, 0.0, 1.5}),
            "the passage does not start at relative Mach 1.50");
  EXPECT_EQ(words(entry(0.7, 1.0), {true, 0.1, 0.22, 1.2}),
            "the flow is separated: it runs backwards in 22 % of the passage");
  EXPECT_EQ(words(entry(0.7, 1.0), {true, 0.1, 0.0, 1.2}),
            "the passage is choked: Mach 1.20 is reached in it");
  EXPECT_EQ(words(entry(0.3, 1.0), {true, 0.1, 0.0, 0.4}), "no settled flow was found");
  EntryFacts late = entry(0.5, 1.0);
  late.inlet_angle = 100.0 * degree;
  EXPECT_EQ(words(late, {true, 0.1, 0.0, 0.4}),
            "the wheel runs beyond runaway: the gas meets the blades from behind and separates");
}

}  // namespace
}  // namespace falcate::cases
