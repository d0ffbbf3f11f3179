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

// The first conditions of every flow are the smallest meshes.
class ErrorBarsHold : public testing::TestWithParam<ExactCase> {};

TEST_P(ErrorBarsHold, OnTheFirstConditions) {
  ExactCase some = GetParam();
  some.conditions = 3;
  std::vector<const Finding*> findings;
  const auto solved = solve_cases({some}, 1);
  for (const Condition& condition : solved[0].conditions) {
    EXPECT_TRUE(condition.steady) << condition.words;
    for (const Finding& f : condition.findings) {
      findings.push_back(&f);
      EXPECT_LE(true_error(f), half_width(f)) << condition.words << ": " << f.figure;
    }
  }
  const Coverage c = coverage(findings);
  std::printf("%s: %d of %d within the bar, bar / true error %.2f on median\n", some.name.c_str(),
              c.inside, c.figures, c.median());
  EXPECT_LE(c.median(), 4.0);
}

std::vector<ExactCase> quick_cases() {
  std::vector<ExactCase> quick;
  for (const ExactCase& one : exact_cases())
    if (one.name == "S1" || one.name == "I3" || one.name == "V") quick.push_back(one);
  return quick;
}

INSTANTIATE_TEST_SUITE_P(Flows, ErrorBarsHold, testing::ValuesIn(quick_cases()),
                         [](const auto& info) { return info.param.name; });

}  // namespace
}  // namespace falcate::validation
