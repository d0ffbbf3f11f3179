#include "post/error_bar.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <set>
#include <string>
#include <vector>

namespace falcate::post {
namespace {

struct Sample {
  double fine, medium, coarse, ratio_21, ratio_32;
  double order, extrapolated, error, extrapolated_error, index;
};

// Sample calculations of Celik et al., J. Fluids Engineering 130 (2008) 078001, table 1 (values
// from memory, recomputed to the digits shown), and Roache's classic r = 2 example.
TEST(GridConvergence, PublishedSamples) {
  const Sample samples[] = {
      {6.063, 5.972, 5.863, 1.5, 1.3333, 1.534, 6.1685, 0.0150, 0.0171, 0.0217},
      {10.7880, 10.7250, 10.6050, 2.0, 2.1429, 0.752, 10.8801, 0.0058, 0.0085, 0.0107},
      {6.0042, 5.9624, 6.0909, 2.0, 2.1429, 1.508, 6.0269, 0.0070, 0.0038, 0.0047},
      {0.9705, 0.9685, 0.9618, 2.0, 2.0, 1.7442, 0.97135, 0.00206, 0.00088, 0.00110}};
  for (const Sample& s : samples) {
    const GridConvergence c = grid_convergence(s.fine, s.medium, s.coarse, s.ratio_21, s.ratio_32);
    EXPECT_NEAR(c.observed_order, s.order, 6e-4) << s.fine;
    EXPECT_NEAR(c.extrapolated, s.extrapolated, 6e-5) << s.fine;
    EXPECT_NEAR(c.relative_error, s.error, 6e-5) << s.fine;
    EXPECT_NEAR(c.extrapolated_relative_error, s.extrapolated_error, 6e-5) << s.fine;
    EXPECT_NEAR(c.index, s.index, 6e-5) << s.fine;
    EXPECT_EQ(c.oscillatory, s.fine == 6.0042);
  }
}

/// phi = exact + c h^p on h = 4, 2, 1.
std::vector<double> series(double exact, double c, double order) {
  return {exact + c * std::pow(4.0, order), exact + c * std::pow(2.0, order), exact + c};
}

// On an exact power law the true error is c, and the bar 1.25 times that.
TEST(ErrorBar, PowerLawGivesTheTrueErrorTimesTheSafetyFactor) {
  for (double order : {0.6, 1.0, 1.5, 2.0}) {
    for (double c : {0.01, -0.01}) {
      const ErrorBar bar = error_bar(series(3.0, c, order));
      EXPECT_EQ(bar.kind, ErrorBarKind::observed_order) << order;
      EXPECT_NEAR(bar.order, order, 1e-10);
      EXPECT_NEAR(bar.half_width, 1.25 * std::abs(c), 1e-11);
    }
  }
}

TEST(ErrorBar, AgreesWithTheGeneralProcedureOnNestedMeshes) {
  const ErrorBar bar = error_bar({0.9618, 0.9685, 0.9705});
  EXPECT_NEAR(bar.half_width, 0.9705 * grid_convergence(0.9705, 0.9685, 0.9618, 2.0, 2.0).index,
              1e-14);
  EXPECT_NEAR(bar.half_width / 0.9705, 0.00110, 5e-6);  // Roache's example
}

// Order out of range: safety factor 3 with the formal order 2 (Roache 2011), h^2 - 1 = 3.
TEST(ErrorBar, OrderAboveTheRange) {
  const ErrorBar bar = error_bar(series(3.0, 0.01, 3.0));
  EXPECT_EQ(bar.kind, ErrorBarKind::out_of_range);
  EXPECT_EQ(bar.order, 2.0);
  EXPECT_NEAR(bar.half_width, std::max(0.07, 0.56 / 4.0), 1e-12);
  EXPECT_GT(bar.half_width, 0.01);
}

TEST(ErrorBar, OrderBelowTheRangeIsWiderThanOrderOneHalf) {
  const ErrorBar bar = error_bar({1.0, 1.1, 1.2});
  EXPECT_EQ(bar.kind, ErrorBarKind::out_of_range);
  EXPECT_NEAR(bar.half_width, 1.25 * 0.1 / (std::sqrt(2.0) - 1.0), 1e-12);
  const ErrorBar drifting = error_bar({1.0, 1.1, 1.4});
  EXPECT_EQ(drifting.kind, ErrorBarKind::out_of_range);
  EXPECT_NEAR(drifting.half_width, 3.0 * bar.half_width, 1e-12);
}

TEST(ErrorBar, OscillationTakesTheLargerChange) {
  const ErrorBar bar = error_bar({6.0909, 5.9624, 6.0042});
  EXPECT_EQ(bar.kind, ErrorBarKind::oscillatory);
  EXPECT_NEAR(bar.half_width, 6.0909 - 5.9624, 1e-12);
}

TEST(ErrorBar, IsNeverNoughtByAccident) {
  const ErrorBar met = error_bar({1.0, 1.4, 1.4});  // the last two happen to meet
  EXPECT_EQ(met.kind, ErrorBarKind::out_of_range);
  EXPECT_NEAR(met.half_width, 0.1, 1e-12);
  const ErrorBar again = error_bar({1.4, 1.4, 1.0});
  EXPECT_GT(again.half_width, 0.4);
  const ErrorBar same = error_bar({1.4, 1.4, 1.4});
  EXPECT_EQ(same.kind, ErrorBarKind::round_off);
  EXPECT_GT(same.half_width, 0.0);
}

TEST(ErrorBar, RoundOffIsCalledSo) {
  const ErrorBar bar = error_bar({300.0, 300.0 + 2e-10, 300.0 - 3e-10});
  EXPECT_EQ(bar.kind, ErrorBarKind::round_off);
  EXPECT_NEAR(bar.half_width, 5e-10, 1e-12);
  EXPECT_EQ(error_bar({300.0, 300.0 + 2e-7, 300.0 + 2.5e-7}).kind, ErrorBarKind::observed_order);
}

TEST(ErrorBar, TwoMeshes) {
  const ErrorBar bar = error_bar({1.0, 1.3});
  EXPECT_EQ(bar.kind, ErrorBarKind::two_meshes);
  EXPECT_NEAR(bar.half_width, 3.0 * 0.3 / 3.0, 1e-12);
}

TEST(ErrorBar, OneMeshIsNotKnown) {
  EXPECT_TRUE(std::isnan(error_bar({1.0}).half_width));
  EXPECT_EQ(error_bar({1.0}).kind, ErrorBarKind::unknown);
  EXPECT_TRUE(std::isnan(error_bar({1.0, NAN, 1.0}).half_width));
}

TEST(ErrorBar, EveryKindHasItsWords) {
  std::set<std::string> words;
  for (int i = 0; i <= static_cast<int>(ErrorBarKind::unknown); ++i)
    words.insert(error_bar_words(static_cast<ErrorBarKind>(i)));
  EXPECT_EQ(words.size(), 6u);
  EXPECT_EQ(words.count(""), 0u);
}

// Every row of the table carries a bar of its own.
TEST(ErrorBars, FigureByFigure) {
  std::vector<PassageFigures> levels(3);
  double c = 0.0;
  for (const FigureRow& row : figure_rows()) {
    c += 0.01;
    const std::vector<double> values = series(5.0, c, 1.5);
    for (std::size_t k = 0; k < 3; ++k) figure_value(row, levels[k]) = values[k];
  }
  const NumericalError bars = error_bars(levels);
  c = 0.0;
  for (const FigureRow& row : figure_rows()) {
    c += 0.01;
    EXPECT_NEAR(figure_value(row, bars), 1.25 * c, 1e-11) << row.group << ' ' << row.key;
  }
  EXPECT_EQ(bars.basis, std::to_string(figure_rows().size()) + " observed order");
}

// One kind a figure, by the changes from mesh to mesh; figures that are nought everywhere do not
// count.
TEST(ErrorBars, BasisCountsTheKinds) {
  std::vector<PassageFigures> levels(3);
  const auto set = [&](double PassageFigures::*figure, std::vector<double> values) {
    for (std::size_t k = 0; k < 3; ++k) levels[k].*figure = values[k];
  };
  set(&PassageFigures::turning_deg, series(100.0, 0.01, 1.5));
  set(&PassageFigures::power_w, series(50.0, 0.01, 1.8));
  set(&PassageFigures::torque_n_m, {1.0, 1.2, 1.1});
  set(&PassageFigures::mass_flow_kg_s_m, {1.0, 1.0, 1.0});
  set(&PassageFigures::total_pressure_loss, {1.0, 1.1, 1.3});
  EXPECT_EQ(error_bars(levels).basis,
            "2 observed order, 1 observed order out of range, 1 swinging from mesh to mesh, "
            "1 differing by round-off alone");
  levels.resize(2);
  EXPECT_EQ(error_bars(levels).basis, "4 two meshes only, 1 differing by round-off alone");
}

}  // namespace
}  // namespace falcate::post
