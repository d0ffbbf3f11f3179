// Blade rows with exact answers, from the coordinates to the mixed-out figures: mesh of three
// levels, solved coarse to fine. Incompressible cascades from a conformal map, run at Mach 0.1,
// where the gas is incompressible to half a per cent of the pressure difference. Sources: the first
// line of each file.
#include <gtest/gtest.h>

#include <Eigen/Dense>
#include <cmath>
#include <numbers>
#include <optional>
#include <string>
#include <vector>

#include "mesh/blade_shapes.h"
#include "mesh/mesh_levels_maker.h"
#include "post/passage_figures.h"
#include "solver/gas_dynamics.h"
#include "solver/steady_solver.h"

namespace falcate {
namespace {

constexpr double degree = std::numbers::pi / 180.0, width = 0.01;

struct Row {
  const char* name;
  const char* file;
  double pitch;  ///< over width
  double mach, inlet_deg, exit_deg;
};

const Row rows[] = {
    {"I1", "exact_incompressible_cascade_I1_turn83.csv", 0.7384864051, 0.1, 50.0,
     90.0 + 42.80286004},
    {"I3", "exact_incompressible_cascade_I3_turn31.csv", 0.7507737395, 0.1, 75.0,
     90.0 + 15.51856456},
};

struct Answer {
  post::PassageFigures figures;
  solver::SteadySummary summary;
  int cells = 0;
};

struct Task {
  solver::FlowProblem problem;
  double exit_angle = 0.0;
  std::optional<post::WheelDuty> duty;
};

/// Solved coarse to fine; `solution` of the finest mesh may be solved on from.
struct Passage {
  mesh::MeshLevels meshes;
  Task task;
  solver::FlowSolution solution;

  Passage(const mesh::BladeOutline& outline, double pitch, const Task& given)
      : meshes(mesh::make_mesh_levels(outline, pitch, given.problem.inlet.angle, given.exit_angle,
                                      {})),
        task(given) {
    for (std::size_t k = 0; k < meshes.levels.size(); ++k) {
      task.problem.mesh = &meshes.levels[k];
      solve_from(k == 0 ? solution.cells
                        : solver::prolong(solution.cells, meshes.levels[k - 1], meshes.levels[k],
                                          meshes.parent[k]));
    }
  }
  void solve_from(const std::vector<solver::Primitive>& start,
                  const solver::SteadyOptions& options = {}) {
    solution = solver::solve_steady(task.problem, options, start);
  }
  Answer answer() const {
    return {post::passage_figures(task.problem, solution, task.duty), solution.summary,
            task.problem.mesh->cell_count()};
  }
};

Answer solve(const Row& row) {
  const auto outline =
      mesh::coordinates_blade(std::string(FALCATE_SOURCE_DIR) + "/tests/data/" + row.file, width);
  Task task;
  task.problem.inlet = {1e6, 300.0, row.inlet_deg * degree, {}};
  task.problem.exit_pressure = 1e6 * std::pow(1.0 + 0.2 * row.mach * row.mach, -3.5);
  task.exit_angle = row.exit_deg * degree;
  return Passage(outline, row.pitch * width, task).answer();
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
  EXPECT_LT(std::abs(f.mass_imbalance), 1e-10);
  EXPECT_NEAR(f.tangential_force_n_m / f.momentum_tangential_n_m, 1.0, 1e-10);
  const double size = std::abs(f.momentum_tangential_n_m);
  EXPECT_NEAR(f.axial_force_n_m, f.momentum_axial_n_m, 1e-10 * size);
}

INSTANTIATE_TEST_SUITE_P(Rows, ExactRow, testing::ValuesIn(rows),
                         [](const auto& info) { return std::string(info.param.name); });

// Frictionless symmetric impulse stage: diagram efficiency 2 r (cos a1 - r)(1 + k cos b2/cos b1),
// r = u/c1, k = w2/w1, b1 and b2 acute from the plane of rotation; greatest near r = cos(a1)/2,
// where it is cos^2(a1). Source: any steam-turbine text; common practice. A blade of its own for
// every r, so that the stream enters along the metal; jet Mach number 0.25. The jet reaches the
// blades at the speed of its triangle, whatever the blades' own exit angle.
constexpr double jet_angle_deg = 20.0, jet_mach = 0.25;

post::WheelDuty duty(double ratio) {
  const solver::Gas gas;
  post::WheelDuty d;
  d.jet_angle_deg = jet_angle_deg;
  d.jet.jet_pressure = 1e5;
  d.jet.jet_temperature = 300.0;
  d.jet.jet_velocity = jet_mach * solver::speed_of_sound(gas, d.jet.jet_temperature);
  d.jet.spouting_velocity = d.jet.jet_velocity;
  d.jet.jet_density = d.jet.jet_pressure / (gas.gas_constant * d.jet.jet_temperature);
  d.jet.mass_flow = 0.01;
  d.blade_speed = ratio * d.jet.jet_velocity;
  d.mean_radius = 0.05;
  return d;
}

Answer solve_stage(const post::WheelDuty& d) {
  const auto triangle = post::inlet_triangle(d.jet.jet_velocity, d.jet_angle_deg, d.blade_speed);
  mesh::ChannelParameters blade;
  blade.width = width;
  blade.pitch = 0.5 * width;
  blade.inlet_angle = triangle.relative_angle_deg * degree;
  blade.exit_angle = std::numbers::pi - blade.inlet_angle;
  blade.edge_radius = 0.005 * width;
  Task task;
  task.problem.inlet = post::relative_inlet(task.problem.gas, d.jet, triangle).condition;
  task.problem.exit_pressure = d.jet.jet_pressure;
  task.exit_angle = blade.exit_angle;
  task.duty = d;
  Passage passage(mesh::channel_blade(blade), blade.pitch, task);
  solver::SteadyOptions near;
  near.initial_cfl = 1e5;  // the answer is near: Newton's own steps
  auto& problem = passage.task.problem;
  for (int i = 0; i < 2; ++i) {
    // In slow flow the fall of pressure goes with the square of the speed.
    const double ratio = triangle.relative_velocity / passage.answer().figures.inlet.velocity_m_s;
    if (std::abs(ratio - 1.0) < 1e-3) break;
    problem.exit_pressure = problem.inlet.total_pressure -
                            ratio * ratio * (problem.inlet.total_pressure - problem.exit_pressure);
    passage.solve_from(passage.solution.cells, near);
  }
  EXPECT_NEAR(passage.answer().figures.inlet.velocity_m_s / triangle.relative_velocity, 1.0, 2e-3);
  return passage.answer();
}

/// Where the parabola nearest to the points (least squares) is highest.
double highest(const std::vector<double>& x, const std::vector<double>& y) {
  Eigen::MatrixXd a(static_cast<Eigen::Index>(x.size()), 3);
  Eigen::VectorXd b(a.rows());
  for (Eigen::Index i = 0; i < a.rows(); ++i) {
    const double xi = x[static_cast<std::size_t>(i)];
    a.row(i) << 1.0, xi, xi * xi;
    b(i) = y[static_cast<std::size_t>(i)];
  }
  const Eigen::Vector3d c = a.colPivHouseholderQr().solve(b);
  return -0.5 * c(1) / c(2);
}

TEST(ImpulseStage, FollowsTheHandbookCurve) {
  const double cosine = std::cos(jet_angle_deg * degree);
  std::vector<double> ratios, efficiencies;
  for (const double r : {0.35, 0.41, 0.47, 0.53, 0.59}) {
    const auto d = duty(r);
    const Answer a = solve_stage(d);
    const auto& f = a.figures;
    EXPECT_EQ(a.summary.status, solver::SolutionStatus::steady) << a.summary.reason;
    const double k = f.exit.velocity_m_s / f.inlet.velocity_m_s;
    const double swirl =
        -std::cos(f.exit.angle_deg * degree) / std::cos(f.inlet.angle_deg * degree);
    const double curve = 2.0 * r * (cosine - r) * (1.0 + k * swirl);
    std::printf(
        "r %.2f: %d cells, blade efficiency %.4f, curve %.4f; exit angle %.3f deg (metal "
        "%.3f), k %.4f, w1 %.2f m/s, loss %.4f\n",
        r, a.cells, f.blade_efficiency, curve, f.exit.angle_deg, 180.0 - f.inlet.angle_deg, k,
        f.inlet.velocity_m_s, f.total_pressure_loss);
    EXPECT_NEAR(f.blade_efficiency, curve, 0.01) << "r " << r;
    ratios.push_back(r);
    efficiencies.push_back(f.blade_efficiency);
  }
  const double best = highest(ratios, efficiencies);
  std::printf("best r %.4f (exact %.4f)\n", best, 0.5 * cosine);
  EXPECT_NEAR(best, 0.5 * cosine, 0.02);
}

}  // namespace
}  // namespace falcate
