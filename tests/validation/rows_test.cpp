// Blade rows with exact answers, from the coordinates to the mixed-out figures: mesh of three
// levels, solved coarse to fine. S: shock-free supersonic impulse rows, M 2 and 2.5 in and out,
// symmetric. I: incompressible cascades from a conformal map, run at Mach 0.1, where the gas is
// incompressible to half a per cent of the pressure difference. Sources: the first line of each
// file.
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <optional>
#include <string>
#include <vector>

#include "mesh/blade_shapes.h"
#include "mesh/mesh_levels_maker.h"
#include "post/passage_figures.h"
#include "solver/steady_solver.h"

namespace falcate {
namespace {

constexpr double degree = std::numbers::pi / 180.0, width = 0.01;

struct Row {
  const char* name;
  const char* file;
  double pitch;  ///< over width
  double mach, inlet_deg, exit_deg;
  bool supersonic;
};

const Row rows[] = {
    {"S1", "exact_supersonic_impulse_S1_M2.0_b65.csv", 0.3002776851, 2.0, 25.0, 155.0, true},
    {"S3", "exact_supersonic_impulse_S3_M2.5_b70.csv", 0.2548557998, 2.5, 20.0, 160.0, true},
    {"I1", "exact_incompressible_cascade_I1_turn83.csv", 0.7384864051, 0.1, 50.0,
     90.0 + 42.80286004, false},
    {"I3", "exact_incompressible_cascade_I3_turn31.csv", 0.7507737395, 0.1, 75.0,
     90.0 + 15.51856456, false},
};

struct Answer {
  post::PassageFigures figures;
  solver::SteadySummary summary;
  int cells = 0;
};

Answer solve(const mesh::BladeOutline& outline, double pitch, solver::FlowProblem problem,
             double exit_angle, const std::optional<post::WheelDuty>& duty) {
  const auto meshes = mesh::make_mesh_levels(outline, pitch, problem.inlet.angle, exit_angle, {});
  std::vector<solver::Primitive> start;
  solver::FlowSolution solution;
  for (std::size_t k = 0; k < meshes.levels.size(); ++k) {
    problem.mesh = &meshes.levels[k];
    if (k > 0) start = solver::prolong(start, meshes.parent[k]);
    solution = solver::solve_steady(problem, {}, start);
    start = solution.cells;
  }
  return {post::passage_figures(problem, solution, duty), solution.summary,
          meshes.levels.back().cell_count()};
}

Answer solve(const Row& row) {
  const auto outline =
      mesh::coordinates_blade(std::string(FALCATE_SOURCE_DIR) + "/tests/data/" + row.file, width);
  solver::FlowProblem problem;
  problem.inlet = {1e6, 300.0, row.inlet_deg * degree, {}};
  if (row.supersonic) problem.inlet.mach = row.mach;
  problem.exit_pressure = 1e6 * std::pow(1.0 + 0.2 * row.mach * row.mach, -3.5);
  return solve(outline, row.pitch * width, problem, row.exit_deg * degree, {});
}

class ExactRow : public testing::TestWithParam<Row> {};

TEST_P(ExactRow, HasItsExitFlow) {
  const Row& row = GetParam();
  const Answer a = solve(row);
  const auto& f = a.figures;
  std::printf(
      "%s %5d cells: exit angle %8.3f deg (exact %.3f), exit Mach %.5f (exact %.4g), "
      "loss %.5f, %d steps, residual %.1e\n",
      row.name, a.cells, f.exit.angle_deg, row.exit_deg, f.exit.mach, row.mach,
      f.total_pressure_loss, a.summary.newton_steps, a.summary.residual_drop);
  EXPECT_EQ(a.summary.status, solver::SolutionStatus::steady) << a.summary.reason;
  EXPECT_NEAR(f.exit.angle_deg, row.exit_deg, 0.3);
  if (row.supersonic) {
    EXPECT_NEAR(f.exit.mach, row.mach, 0.005 * row.mach);
  }
  EXPECT_LT(std::abs(f.mass_imbalance), 1e-10);
  EXPECT_NEAR(f.tangential_force_n_m / f.momentum_tangential_n_m, 1.0, 1e-10);
  const double size = std::abs(f.momentum_tangential_n_m);
  EXPECT_NEAR(f.axial_force_n_m, f.momentum_axial_n_m, 1e-10 * size);
}

INSTANTIATE_TEST_SUITE_P(Rows, ExactRow, testing::ValuesIn(rows),
                         [](const auto& info) { return std::string(info.param.name); });

}  // namespace
}  // namespace falcate
