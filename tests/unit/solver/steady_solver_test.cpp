// The steady solver's promises: its answer, when and why it stops, what it tells, the same bits.
// The flow is the simplest with an exact answer, the uniform stream of a passage without blades,
// reached from a stream of another Mach number stirred at random.
#include "solver/steady_solver.h"

#include <gtest/gtest.h>
#include <omp.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <random>
#include <stdexcept>

#include "mesh/structured.h"

namespace falcate::solver {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double pitch = 0.02, total_pressure = 2e5, total_temperature = 320.0, mach = 0.6;
constexpr double angle = 50.0 * std::numbers::pi / 180.0;

class SteadySolver : public testing::Test {
 protected:
  SteadySolver()
      : mesh_(mesh::PassageMesh::build(mesh::structured(
            12, 8, mesh::CellKind::mixed,
            [](double xi, double eta) { return Point(0.03 * xi, pitch * eta); },
            {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, pitch, 0.2))) {
    problem_.mesh = &mesh_;
    // The Mach number given starts the flow only: below Mach 1 the exit pressure rules.
    problem_.inlet = {total_pressure, total_temperature, angle, 0.3};
    problem_.exit_pressure = total_pressure * std::pow(1.0 + 0.2 * mach * mach, -3.5);
    std::mt19937 dice(5);
    std::uniform_real_distribution<double> part(-0.05, 0.05);
    const Primitive q = stream(0.4);
    for (int i = 0; i < mesh_.cell_count(); ++i)
      start_.push_back({q.density * (1 + part(dice)), q.u * (1 + part(dice)),
                        q.v * (1 + part(dice)), q.pressure * (1 + part(dice))});
  }

  Primitive stream(double m) const {
    const double t = total_temperature / (1.0 + 0.2 * m * m), r = problem_.gas.gas_constant;
    const double p = total_pressure * std::pow(t / total_temperature, 3.5);
    const double w = m * std::sqrt(1.4 * r * t);
    return {p / (r * t), w * std::sin(angle), w * std::cos(angle), p};
  }

  FlowSolution solve(const SteadyOptions& options = {}) const {
    return solve_steady(problem_, options, start_);
  }

  mesh::PassageMesh mesh_;
  FlowProblem problem_;
  std::vector<Primitive> start_;
};

TEST_F(SteadySolver, FindsTheUniformStream) {
  const auto s = solve();
  const Primitive exact = stream(mach);
  ASSERT_EQ(s.summary.status, SolutionStatus::steady);
  ASSERT_EQ(s.cells.size(), static_cast<std::size_t>(mesh_.cell_count()));
  for (const auto& q : s.cells) {
    EXPECT_NEAR(q.density / exact.density, 1.0, 1e-9);
    EXPECT_NEAR(q.u / exact.u, 1.0, 1e-9);
    EXPECT_NEAR(q.v / exact.v, 1.0, 1e-9);
    EXPECT_NEAR(q.pressure / exact.pressure, 1.0, 1e-9);
  }
}

TEST_F(SteadySolver, GivesTheFluxesThroughEveryBoundaryFace) {
  const auto s = solve();
  const Primitive q = stream(mach);
  const double enthalpy = 3.5 * problem_.gas.gas_constant * total_temperature;
  ASSERT_EQ(static_cast<int>(s.boundary.size()), mesh_.face_count() - mesh_.interior_face_count());
  for (std::size_t i = 0; i < s.boundary.size(); ++i) {
    const Point n = mesh_.faces()[i + static_cast<std::size_t>(mesh_.interior_face_count())].normal;
    const double mass = q.density * (q.u * n.x() + q.v * n.y());
    EXPECT_NEAR(s.boundary[i].mass / mass, 1.0, 1e-8);
    EXPECT_NEAR(s.boundary[i].momentum_x / (mass * q.u + q.pressure * n.x()), 1.0, 1e-8);
    EXPECT_NEAR(s.boundary[i].momentum_y / (mass * q.v + q.pressure * n.y()), 1.0, 1e-8);
    EXPECT_NEAR(s.boundary[i].energy / (mass * enthalpy), 1.0, 1e-8);
  }
}

void expect_same_bits(const FlowSolution& a, const FlowSolution& b) {
  ASSERT_EQ(a.cells.size(), b.cells.size());
  for (std::size_t i = 0; i < a.cells.size(); ++i) {
    ASSERT_EQ(a.cells[i].density, b.cells[i].density) << i;
    ASSERT_EQ(a.cells[i].u, b.cells[i].u) << i;
    ASSERT_EQ(a.cells[i].v, b.cells[i].v) << i;
    ASSERT_EQ(a.cells[i].pressure, b.cells[i].pressure) << i;
  }
  for (std::size_t i = 0; i < a.boundary.size(); ++i) {
    ASSERT_EQ(a.boundary[i].mass, b.boundary[i].mass) << i;
    ASSERT_EQ(a.boundary[i].momentum_y, b.boundary[i].momentum_y) << i;
  }
  EXPECT_EQ(a.summary.residual_drop, b.summary.residual_drop);
  EXPECT_EQ(a.summary.krylov_iterations, b.summary.krylov_iterations);
}

TEST_F(SteadySolver, GivesTheSameBitsEachTime) { expect_same_bits(solve(), solve()); }

TEST_F(SteadySolver, GivesTheSameBitsOnEveryNumberOfThreads) {
  const int before = omp_get_max_threads();
  omp_set_num_threads(1);
  const auto one = solve();
  omp_set_num_threads(2);
  const auto two = solve();
  omp_set_num_threads(before);
  expect_same_bits(one, two);
}

TEST_F(SteadySolver, TellsItsObserverOnceAStep) {
  std::vector<ConvergencePoint> seen;
  const auto s =
      solve_steady(problem_, {}, start_, [&](const ConvergencePoint& p) { seen.push_back(p); });
  ASSERT_EQ(static_cast<int>(seen.size()), s.summary.newton_steps);
  ASSERT_EQ(seen.size(), s.summary.history.size());
  long krylov = 0;
  for (std::size_t i = 0; i < seen.size(); ++i) {
    EXPECT_EQ(seen[i].step, static_cast<int>(i) + 1);
    EXPECT_EQ(seen[i].residual, s.summary.history[i].residual);
    EXPECT_EQ(seen[i].cfl, s.summary.history[i].cfl);
    krylov += seen[i].krylov_iterations;
  }
  EXPECT_EQ(krylov, s.summary.krylov_iterations);
  EXPECT_EQ(seen.back().residual, s.summary.residual_drop);
  // Each Jacobian-vector product counts as two evaluations.
  EXPECT_GE(s.summary.residual_evaluations, 2 * krylov + s.summary.newton_steps);
  EXPECT_GE(s.summary.seconds, 0.0);
}

TEST_F(SteadySolver, StopsAtTheFirstStepThatReachesTheTarget) {
  for (const double target : {1e-2, 1e-5, 1e-9, 1e-11}) {
    SteadyOptions options;
    options.residual_drop = target;
    const auto s = solve(options);
    EXPECT_EQ(s.summary.status, SolutionStatus::steady);
    EXPECT_EQ(s.summary.reason, "residual at its target");
    EXPECT_LE(s.summary.residual_drop, target);
    const auto& h = s.summary.history;
    for (std::size_t i = 0; i + 1 < h.size(); ++i) EXPECT_GT(h[i].residual, target);
  }
}

TEST_F(SteadySolver, StopsAtTheStepLimit) {
  SteadyOptions options;
  options.max_steps = 2;
  options.averaging_steps = 0;
  const auto s = solve(options);
  EXPECT_EQ(s.summary.status, SolutionStatus::failed);
  EXPECT_EQ(s.summary.reason, "step limit reached before the residual target");
  EXPECT_EQ(s.summary.newton_steps, 2);
  EXPECT_GT(s.summary.residual_drop, options.residual_drop);
}

TEST_F(SteadySolver, GivesBackItsStartWithoutSteps) {
  SteadyOptions options;
  options.max_steps = 0;
  options.averaging_steps = 0;
  const auto s = solve(options);
  for (std::size_t i = 0; i < start_.size(); ++i) {
    EXPECT_NEAR(s.cells[i].u, start_[i].u, 1e-12 * std::abs(start_[i].u));
    EXPECT_NEAR(s.cells[i].pressure, start_[i].pressure, 1e-12 * start_[i].pressure);
  }
}

// A steady flow marched in time comes to itself: the average is the steady answer.
TEST_F(SteadySolver, AveragesOverTimeWhereNoSteadyFlowWasFound) {
  const auto steady = solve();
  SteadyOptions options;
  options.max_steps = 1;
  options.averaging_steps = 400;
  const auto s = solve(options);
  EXPECT_EQ(s.summary.status, SolutionStatus::averaged);
  EXPECT_EQ(s.summary.reason, "no steady flow found; averaged over time");
  EXPECT_EQ(s.summary.newton_steps, 1 + 600);
  ASSERT_EQ(s.halves[0].size(), s.boundary.size());
  ASSERT_EQ(s.halves[1].size(), s.boundary.size());
  for (std::size_t i = 0; i < s.boundary.size(); ++i) {
    EXPECT_NEAR(0.5 * (s.halves[0][i].mass + s.halves[1][i].mass), s.boundary[i].mass,
                1e-12 * std::abs(s.boundary[i].mass) + 1e-15);
    EXPECT_NEAR(s.boundary[i].mass, steady.boundary[i].mass,
                1e-3 * std::abs(steady.boundary[i].mass) + 1e-12);
  }
  for (std::size_t i = 0; i < s.cells.size(); ++i)
    EXPECT_NEAR(s.cells[i].pressure, steady.cells[i].pressure, 1e-3 * steady.cells[i].pressure);
}

TEST_F(SteadySolver, GivesUpOnAStartThatIsNoFlow) {
  start_[3].pressure = std::numeric_limits<double>::quiet_NaN();
  const auto s = solve();
  EXPECT_EQ(s.summary.status, SolutionStatus::failed);
  EXPECT_EQ(s.summary.reason, "no step lowers the residual any more");
}

TEST_F(SteadySolver, StartsColdWithoutAStart) {
  const auto s = solve_steady(problem_, {}, {});
  EXPECT_EQ(s.summary.status, SolutionStatus::steady);
  EXPECT_NEAR(s.cells[0].pressure, problem_.exit_pressure, 1e-8 * problem_.exit_pressure);
  EXPECT_LE(s.summary.history.front().residual, 1.0);
}

void expect_refused(const FlowProblem& problem, const char* words) {
  try {
    solve_steady(problem, {}, {});
    FAIL() << "expected: " << words;
  } catch (const std::invalid_argument& error) {
    EXPECT_STREQ(error.what(), words);
  }
}

TEST_F(SteadySolver, RefusesWhatIsNoProblem) {
  const char* words = "a flow problem needs a mesh and positive pressures";
  for (int wrong = 0; wrong < 4; ++wrong) {
    FlowProblem p = problem_;
    if (wrong == 0) p.mesh = nullptr;
    if (wrong == 1) p.inlet.total_pressure = 0.0;
    if (wrong == 2) p.inlet.total_temperature = -1.0;
    if (wrong == 3) p.exit_pressure = 0.0;
    expect_refused(p, words);
  }
}

TEST(SteadySolverWithoutState, RefusesAPrescribedPatch) {
  const auto fixed = PatchKind::prescribed;
  const auto mesh = mesh::PassageMesh::build(mesh::structured(
      3, 3, mesh::CellKind::quads, [](double xi, double eta) { return Point(xi, eta); },
      {fixed, fixed, fixed, fixed}));
  FlowProblem p;
  p.mesh = &mesh;
  p.inlet = {1e5, 300.0, 1.0, {}};
  p.exit_pressure = 9e4;
  expect_refused(p, "a prescribed patch needs its state");
}

mesh::PassageMesh square(int side) {
  const auto kind = mesh::PatchKind::wall;
  return mesh::PassageMesh::build(mesh::structured(
      side, side, mesh::CellKind::quads, [](double x, double y) { return mesh::Point(x, y); },
      {kind, kind, kind, kind}, 0.0, 0.0));
}

/// Coarse cell whose centroid is nearest.
std::vector<int> parents(const mesh::PassageMesh& coarse, const mesh::PassageMesh& fine) {
  std::vector<int> parent;
  for (const auto& x : fine.centroids()) {
    const auto nearer = [&](const mesh::Point& a, const mesh::Point& b) {
      return (a - x).norm() < (b - x).norm();
    };
    const auto& c = coarse.centroids();
    parent.push_back(static_cast<int>(std::min_element(c.begin(), c.end(), nearer) - c.begin()));
  }
  return parent;
}

TEST(Prolong, IsExactOnLinearFields) {
  const auto coarse = square(4), fine = square(8);
  const auto field = [](const mesh::Point& x) {
    return Primitive{2.0 + 0.1 * x.x(), 3.0 - x.y(), x.x() + 2.0 * x.y(), 5.0 + 0.4 * x.y()};
  };
  std::vector<Primitive> cells;
  for (const auto& x : coarse.centroids()) cells.push_back(field(x));
  const auto carried = prolong(cells, coarse, fine, parents(coarse, fine));
  ASSERT_EQ(carried.size(), 64u);
  for (std::size_t i = 0; i < carried.size(); ++i) {
    const Primitive exact = field(fine.centroids()[i]);
    EXPECT_NEAR(carried[i].density, exact.density, 1e-13);
    EXPECT_NEAR(carried[i].u, exact.u, 1e-13);
    EXPECT_NEAR(carried[i].v, exact.v, 1e-13);
    EXPECT_NEAR(carried[i].pressure, exact.pressure, 1e-13);
  }
}

TEST(Prolong, KeepsTheParentsStateWhereTheSlopeIsSteep) {
  const auto coarse = square(4), fine = square(8);
  std::vector<Primitive> cells;
  for (const auto& x : coarse.centroids())
    cells.push_back({1.0, x.x(), 0.0, x.x() < 0.5 ? 1.0 : 40.0});
  const auto parent = parents(coarse, fine);
  const auto carried = prolong(cells, coarse, fine, parent);
  for (std::size_t i = 0; i < carried.size(); ++i) {
    const double own = cells[static_cast<std::size_t>(parent[i])].pressure;
    EXPECT_LE(std::abs(carried[i].pressure - own), 0.5 * own);
  }
}

TEST(Prolong, GivesNothingForNothing) {
  const auto mesh = square(2);
  EXPECT_TRUE(prolong({}, mesh, mesh, {0, 1, 2, 3}).empty());
}

}  // namespace
}  // namespace falcate::solver
