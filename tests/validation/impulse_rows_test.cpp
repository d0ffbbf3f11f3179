// The exact impulse rows (impulse_rows.h) at 8,000 and 20,000 cells.
#include "tests/validation/impulse_rows.h"

#include <gtest/gtest.h>

#include <cmath>
#include <string>
#include <vector>

namespace falcate::validation {
namespace {

class ExactImpulseRow : public testing::TestWithParam<ImpulseRow> {};

TEST_P(ExactImpulseRow, LosesNothingAndKeepsItsMachNumber) {
  const ImpulseRow& row = GetParam();
  const SolvedPassage passage = solved(row);
  std::vector<double> entropy;
  for (int k = 0; k < passage.level_count(); ++k) {
    const auto f = passage.figures(k);
    const SurfaceError wall = surface_error(row, passage, k);
    entropy.push_back(passage.entropy_error(k));
    std::printf(
        "%s %5d cells: exit angle %+.4f deg, Mach %+.4f %%, total pressure %.4f %% lost, entropy "
        "%.2e; wall Mach rms %.2f %%, worst %.2f %%, between kinks %.2f %%\n",
        row.name, passage.mesh(k).cell_count(), f.exit.angle_deg - (180.0 - row.inlet_deg),
        100.0 * (f.exit.mach / row.mach - 1.0),
        100.0 * (1.0 - f.exit.total_pressure_pa / impulse_total_pressure), entropy.back(),
        100.0 * wall.root_mean_square, 100.0 * wall.worst, 100.0 * wall.between_kinks);
  }
  const int finest = passage.finest();
  const auto& summary = passage.solution(finest).summary;
  EXPECT_EQ(summary.status, solver::SolutionStatus::steady) << summary.reason;
  EXPECT_NEAR(passage.mesh(finest).cell_count(), row.cells, 0.15 * row.cells);
  const auto f = passage.figures(finest);
  EXPECT_NEAR(f.exit.angle_deg, 180.0 - row.inlet_deg, row.angle_deg);
  EXPECT_NEAR(f.exit.mach, row.mach, row.mach_share * row.mach);
  EXPECT_LT(std::abs(1.0 - f.exit.total_pressure_pa / impulse_total_pressure), row.loss);
  EXPECT_GT(observed_order(entropy), 1.7);

  const SurfaceError wall = surface_error(row, passage, finest);
  EXPECT_LT(wall.between_kinks, row.between_kinks);
  EXPECT_LT(wall.worst, row.at_kinks);
  EXPECT_LT(wall.root_mean_square, 0.004);

  EXPECT_LT(std::abs(f.mass_imbalance), 1e-10);
  EXPECT_NEAR(f.tangential_force_n_m / f.momentum_tangential_n_m, 1.0, 1e-10);
  EXPECT_NEAR(f.axial_force_n_m, f.momentum_axial_n_m, 1e-10 * f.momentum_tangential_n_m);
}

INSTANTIATE_TEST_SUITE_P(Rows, ExactImpulseRow, testing::ValuesIn(impulse_rows()),
                         [](const auto& info) { return std::string(info.param.name); });

// Both ends of the arcs: four places on the convex side, two on the concave one, which begins and
// ends with an arc.
TEST(ExactImpulseRows, HaveTheirKinks) {
  for (const ImpulseRow& row : impulse_rows()) {
    EXPECT_EQ(ExactSide(row, "suction").kinks.size(), 4U) << row.name;
    EXPECT_EQ(ExactSide(row, "pressure").kinks.size(), 2U) << row.name;
  }
}

}  // namespace
}  // namespace falcate::validation
