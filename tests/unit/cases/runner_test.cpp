#include "cases/runner.h"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "cases/console_progress.h"
#include "cases/results_folder.h"
#include "post/output_error.h"
#include "tests/unit/cases/case_text.h"

namespace falcate::cases {
namespace {

TEST(Chains, CoverEveryPointOnceInOrder) {
  for (int points = 1; points <= 60; ++points) {
    SCOPED_TRACE(points);
    int next = 0;
    for (const auto& [first, last] : chains(points)) {
      EXPECT_EQ(first, next);
      EXPECT_LT(first, last);
      next = last;
    }
    EXPECT_EQ(next, points);
  }
  EXPECT_EQ(chains(3).size(), 1U);
  EXPECT_EQ(chains(4).size(), 2U);
  EXPECT_EQ(chains(12).size(), 4U);
  EXPECT_EQ(chains(24).size(), 8U);
}

TEST(CellStates, AreKeptToTheLastBit) {
  const ScratchFolder folder;
  const double third = 1.0 / 3.0, tiny = std::numeric_limits<double>::denorm_min();
  const LevelStates states{{}, {{1.2, third, -0.0, 1e5}}, {{tiny, 1.0, 2.0, 3.0}, {4, 5, 6, 7}}};
  write_states(states, folder.path("a.state"));
  const LevelStates read = read_states(folder.path("a.state"));
  ASSERT_EQ(read.size(), 3U);
  EXPECT_TRUE(read[0].empty());
  ASSERT_EQ(read[1].size(), 1U);
  EXPECT_EQ(read[1][0].u, third);
  EXPECT_TRUE(std::signbit(read[1][0].v));
  ASSERT_EQ(read[2].size(), 2U);
  EXPECT_EQ(read[2][0].density, tiny);
  EXPECT_EQ(read[2][1].pressure, 7.0);
}

TEST(CellStates, ThatAreDamagedAreRefused) {
  const ScratchFolder folder;
  write_states({{{1, 2, 3, 4}}}, folder.path("a.state"));
  std::filesystem::resize_file(folder.path("a.state"), 30);
  EXPECT_THROW(read_states(folder.path("a.state")), post::OutputError);
  folder.write("b.state", "something else altogether");
  EXPECT_THROW(read_states(folder.path("b.state")), post::OutputError);
}

TEST(Progress, DrawsABarOfTheRightLength) {
  EXPECT_EQ(ConsoleProgress::bar(0.0, 10), "[..........]");
  EXPECT_EQ(ConsoleProgress::bar(0.31, 10), "[###.......]");
  EXPECT_EQ(ConsoleProgress::bar(1.0, 10), "[##########]");
}

TEST(Progress, CountsTheFinestMeshMost) {
  // Costs 1, 4, 16 of 21; the residual half way down in decades.
  PointProgress progress{"point-01", 2, 3, {7, 1e-5, 1.0, 3}, 1e-10};
  EXPECT_NEAR(ConsoleProgress::share_done(progress), (5.0 + 8.0) / 21.0, 1e-12);
  progress.level = 0;
  progress.step.residual = 1e-10;
  EXPECT_NEAR(ConsoleProgress::share_done(progress), 1.0 / 21.0, 1e-12);
}

}  // namespace
}  // namespace falcate::cases
