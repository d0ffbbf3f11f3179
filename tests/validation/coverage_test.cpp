// Error bars against exact answers: the arithmetic of the coverage, and that the bars hold for the
// first conditions of a few exact flows; build/error_bar_coverage does all of them.
#include "tests/validation/coverage.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <set>

#include "post/error_bar.h"

namespace falcate::validation {
namespace {

/// phi = exact + c h^p on h = 4, 2, 1.
Finding power_law(double exact, double c, double order) {
  return {"figure",
          "",
          exact,
          {exact + c * std::pow(4.0, order), exact + c * std::pow(2.0, order), exact + c},
          0.0};
}

TEST(Coverage, CountsWhatLiesWithinTheBar) {
  const Finding holds = power_law(3.0, 0.01, 2.0);
  Finding misses = holds;
  misses.exact = 4.0;
  Finding spread = misses;
  spread.spread = 2.0;
  const double bar = post::error_bar(holds.found).half_width;
  const Coverage c = coverage({&holds, &misses, &spread});
  EXPECT_EQ(c.figures, 3);
  EXPECT_EQ(c.inside, 2);
  EXPECT_NEAR(c.share(), 2.0 / 3.0, 1e-15);
  EXPECT_NEAR(c.widths[0], bar / 0.99, 1e-12);
  EXPECT_NEAR(c.median(), std::min(bar / 0.01, (bar + 2.0) / 0.99), 1e-9);
  EXPECT_NEAR(c.worst(), 0.99 / bar, 1e-9);
}

TEST(Coverage, TheTableHasALineForEveryFlowAndFigure) {
  const ExactCase flow{"A", "an invented flow", "invented", 1, {}};
  const std::vector<SolvedCase> solved = {
      {&flow, {{"", {power_law(3.0, 0.01, 2.0), power_law(2.0, 0.01, 1.0)}, true}}}};
  const std::string text = coverage_section(solved);
  EXPECT_THAT(text, testing::HasSubstr("| A: an invented flow | 2 | 100.0 % |"));
  EXPECT_THAT(text, testing::HasSubstr("| all | 2 | 100.0 % |"));
  EXPECT_THAT(text, testing::HasSubstr("| figure | 2 | 100.0 % |"));
  EXPECT_THAT(text, testing::HasSubstr("- A: invented.\n"));
  EXPECT_THAT(text, testing::Not(testing::HasSubstr("Outside the bar")));
}

TEST(Coverage, TellsWhatLiesOutside) {
  const ExactCase flow{"A", "an invented flow", "invented", 1, {}};
  Finding miss = power_law(3.0, 0.01, 2.0);
  miss.exact = 4.0;
  miss.unit = "deg";
  const std::string text = coverage_section({{&flow, {{"10 cells", {miss}, true}}}});
  EXPECT_THAT(text, testing::HasSubstr("| A: 10 cells | figure 3.01 deg (exact 4) | 79.20 |\n"));
}

TEST(ExactCases, EachHasTenConditionsAndASourceAndANameOfItsOwn) {
  std::set<std::string> names;
  for (const ExactCase& one : exact_cases()) {
    EXPECT_EQ(one.conditions, 10) << one.name;
    EXPECT_FALSE(one.source.empty()) << one.name;
    names.insert(one.name);
  }
  EXPECT_EQ(names.size(), exact_cases().size());
}

// A supersonic row, a slow one and a curved channel under the first three of their conditions, the
// smallest meshes: what is asked of all flows and conditions together.
TEST(ErrorBars, HoldAndAreNotTooWide) {
  std::vector<ExactCase> some;
  for (const ExactCase& one : exact_cases())
    if (one.name == "S1" || one.name == "I3" || one.name == "V") some.push_back(one);
  ASSERT_EQ(some.size(), 3U);
  for (ExactCase& one : some) one.conditions = 3;
  const auto solved = solve_cases(some, 1);
  std::vector<const Finding*> findings;
  for (const SolvedCase& one : solved)
    for (const Condition& condition : one.conditions) {
      EXPECT_TRUE(condition.steady) << one.exact->name << ": " << condition.words;
      for (const Finding& finding : condition.findings) findings.push_back(&finding);
    }
  const Coverage c = coverage(findings);
  std::printf("%d of %d within the bar, bar / true error %.2f on median\n", c.inside, c.figures,
              c.median());
  EXPECT_GE(c.share(), 0.95) << coverage_list(solved);
  EXPECT_LE(c.median(), 4.0) << coverage_list(solved);
}

}  // namespace
}  // namespace falcate::validation
