// A share of the matrix of operating points on coarse meshes: each ends steady or averaged, with an
// error bar on every figure. The whole matrix is solved by robustness_matrix (docs/robustness.md).
#include <gtest/gtest.h>

#include <algorithm>
#include <set>

#include "robustness/matrix_page.h"
#include "robustness/matrix_rows.h"

namespace falcate::robustness {
namespace {

constexpr int coarse = 1000;

TEST(Matrix, CoversItsRanges) {
  std::size_t points = 0;
  double least_mach = 9.0, greatest_mach = 0.0, greatest_ratio = 0.0;
  std::set<double> angles, pitches;
  std::set<std::string> shapes;
  for (const MatrixRow& row : matrix_rows(coarse)) {
    points += row.points.size();
    angles.insert(row.blade_angle_deg);
    pitches.insert(row.pitch_over_width);
    shapes.insert(row.input.shape);
    for (const auto& point : row.points) {
      least_mach = std::min(least_mach, point.inlet_mach);
      greatest_mach = std::max(greatest_mach, point.inlet_mach);
      greatest_ratio = std::max(greatest_ratio, point.speed_ratio);
    }
  }
  EXPECT_GE(points, 300U);
  EXPECT_LE(least_mach, 0.101);
  EXPECT_GE(greatest_mach, 2.5);
  EXPECT_DOUBLE_EQ(greatest_ratio, 1.0);
  EXPECT_EQ(*angles.begin(), 15.0);
  EXPECT_EQ(*angles.rbegin(), 40.0);
  EXPECT_EQ(*pitches.begin(), 0.3);
  EXPECT_EQ(*pitches.rbegin(), 1.2);
  EXPECT_EQ(shapes, (std::set<std::string>{"channel", "cup"}));
}

class MatrixShare : public testing::TestWithParam<std::size_t> {};

TEST_P(MatrixShare, IsAnswered) {
  const auto rows = matrix_rows(coarse);
  const auto answers = solve_row(rows.at(GetParam()));
  for (const Answer& a : answers)
    EXPECT_TRUE(answered(a)) << a.row << ", Mach " << a.relative_mach << ": " << kind_words(a)
                             << " " << a.result.failure;
}

// Channel and cup, a wheel over its speeds and two rig rows over their Mach numbers.
INSTANTIATE_TEST_SUITE_P(Rows, MatrixShare, testing::Values(3, 27, 31));

TEST(MatrixPage, CountsAndListsWhatFailed) {
  Answer good, bad;
  good.row = bad.row = "rig cup 20 deg, pitch 0.60 widths";
  good.shape = bad.shape = "cup";
  good.relative_mach = bad.relative_mach = 1.2;
  good.result.solution.status = solver::SolutionStatus::steady;
  bad.result.failure = "the passage is choked";
  const std::string page = matrix_page({good, good, good, bad}, 2000);
  EXPECT_NE(page.find("| all | 4 | 3 | 0 | 1 | 0 | 75.0 % |"), std::string::npos) << page;
  EXPECT_NE(page.find("- rig cup 20 deg, pitch 0.60 widths, relative Mach 1.20 at 0.0 deg: the "
                      "passage is choked\n"),
            std::string::npos);
}

}  // namespace
}  // namespace falcate::robustness
