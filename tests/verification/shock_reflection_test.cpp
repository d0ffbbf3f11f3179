// A shock of a Mach 2.9 stream, 29 deg to it, meets a wall and is reflected: three uniform states.
// Exact by the oblique-shock relations, NACA Report 1135 (1953), eqs. 128 to 139; every row of the
// flux table must find the angles, pressures and Mach numbers within 1 %.
#include <gtest/gtest.h>

#include <algorithm>
#include <numbers>

#include "mesh/structured.h"
#include "solver/steady_solver.h"
#include "tests/verification/shock_behind_wave.h"

namespace falcate::verification {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double gamma = 1.4, degree = std::numbers::pi / 180.0;
constexpr double length = 4.0, stream_mach = 2.9, shock_deg = 29.0;

struct Reflection {
  BehindShock first = behind_shock(stream_mach, shock_deg* degree);
  double second_wave = wave_angle(first.mach, first.turning);
  BehindShock second = behind_shock(first.mach, second_wave);
  double to_wall() const { return second_wave - first.turning; }  ///< of the reflected shock
  double foot() const { return 1.0 / std::tan(shock_deg * degree); }
};

/// Density and speed of sound at rest 1.
solver::Primitive state(double mach, double angle, double pressure_over_stream, double density) {
  const double t1 = 1.0 / (1.0 + 0.2 * stream_mach * stream_mach), rho1 = std::pow(t1, 2.5);
  const double p = rho1 * t1 / gamma * pressure_over_stream, rho = rho1 * density;
  const double w = mach * std::sqrt(gamma * p / rho);
  return {rho, w * std::cos(angle), -w * std::sin(angle), p};
}

struct Flow {
  mesh::PassageMesh mesh;
  solver::FlowSolution solution;
};

/// Wall below, stream from the left, the state behind the first shock along the top.
Flow solve(solver::FluxKind flux, int n) {
  const auto map = [](double xi, double eta) { return Point(length * xi, eta); };
  Flow flow{
      mesh::PassageMesh::build(mesh::structured(
          4 * n, n, mesh::CellKind::quads, map,
          {PatchKind::wall, PatchKind::outlet, PatchKind::prescribed, PatchKind::prescribed})),
      {}};
  const Reflection exact;
  solver::FlowProblem problem;
  problem.mesh = &flow.mesh;
  problem.gas = {gamma, 1.0};
  problem.inlet = {1.0 / gamma, 1.0 / gamma, std::acos(0.0), stream_mach};
  problem.exit_pressure = state(stream_mach, 0.0, 1.0, 1.0).pressure;
  problem.prescribed = [exact](const Point& x) {
    const auto& b = exact.first;
    return x.y() > 1.0 - 1e-9 ? state(b.mach, b.turning, b.pressure_ratio, b.density_ratio)
                              : state(stream_mach, 0.0, 1.0, 1.0);
  };
  solver::SteadyOptions options;
  options.scheme.flux = flux;
  flow.solution = solver::solve_steady(problem, options, {});
  return flow;
}

/// Area means over the cells well inside a region: pressure over the stream's, Mach number.
struct Mean {
  double pressure = 0.0, mach = 0.0, area = 0.0;
};
template <class Inside>
Mean mean(const Flow& flow, const Inside& inside) {
  Mean m;
  for (std::size_t i = 0; i < flow.solution.cells.size(); ++i) {
    if (!inside(flow.mesh.centroids()[i])) continue;
    const auto& q = flow.solution.cells[i];
    const double a = flow.mesh.areas()[i];
    m.area += a;
    m.pressure += a * q.pressure / state(stream_mach, 0.0, 1.0, 1.0).pressure;
    m.mach += a * std::hypot(q.u, q.v) / std::sqrt(gamma * q.pressure / q.density);
  }
  return {m.pressure / m.area, m.mach / m.area, m.area};
}

/// Angle to the wall of the line where the pressure passes `middle` (over the stream's), row by row
/// of cells from left to right, between two heights and not before `from`.
double front_angle(const Flow& flow, double middle, double from, double low, double high) {
  std::vector<std::pair<Point, double>> cells;
  for (std::size_t i = 0; i < flow.solution.cells.size(); ++i) {
    const Point& x = flow.mesh.centroids()[i];
    if (x.y() > low && x.y() < high && x.x() > from)
      cells.emplace_back(
          x, flow.solution.cells[i].pressure / state(stream_mach, 0.0, 1.0, 1.0).pressure);
  }
  std::sort(cells.begin(), cells.end(), [](const auto& a, const auto& b) {
    return std::abs(a.first.y() - b.first.y()) > 1e-9 ? a.first.y() < b.first.y()
                                                      : a.first.x() < b.first.x();
  });
  double sx = 0, sy = 0, syy = 0, sxy = 0, n = 0, last_row = -1.0;
  for (std::size_t i = 0; i + 1 < cells.size(); ++i) {
    const auto& [a, pa] = cells[i];
    const auto& [b, pb] = cells[i + 1];
    if (std::abs(a.y() - b.y()) > 1e-9 || std::abs(a.y() - last_row) < 1e-9) continue;
    if (pa >= middle || pb < middle) continue;
    last_row = a.y();
    const double x = a.x() + (middle - pa) / (pb - pa) * (b.x() - a.x()), y = a.y();
    sx += x, sy += y, syy += y * y, sxy += x * y, n += 1.0;
  }
  EXPECT_GT(n, 10.0);
  return std::atan2(n * syy - sy * sy, n * sxy - sx * sy) / degree;
}

class ShockReflection : public testing::TestWithParam<solver::FluxMethod> {};

TEST_P(ShockReflection, HasItsAnglesAndStates) {
  const Flow flow = solve(GetParam().kind, 40);
  const Reflection exact;
  const double p2 = exact.first.pressure_ratio, p3 = p2 * exact.second.pressure_ratio;
  const double incident = 180.0 - front_angle(flow, 0.5 * (1.0 + p2), 0.0, 0.2, 0.9);
  const double reflected = front_angle(flow, 0.5 * (p2 + p3), exact.foot() + 0.1, 0.1, 0.8);
  const double slope = std::tan(exact.to_wall());
  // A tenth of the height away from shocks and boundaries.
  const Mean second = mean(flow, [&](const Point& x) {
    return x.y() > 1.15 - std::tan(shock_deg * degree) * x.x() && x.y() < 0.9 &&
           x.y() > slope * (x.x() - exact.foot()) + 0.12;
  });
  const Mean third = mean(flow, [&](const Point& x) {
    return x.y() < slope * (x.x() - exact.foot()) - 0.12 && x.y() > 0.05;
  });
  const auto& s = flow.solution.summary;
  std::printf("%s: %s, %d steps, %.1f s\n", std::string(GetParam().name).c_str(), s.reason.c_str(),
              s.newton_steps, s.seconds);
  std::printf("  shock angles %.3f (exact %.3f), %.3f (%.3f) deg\n", incident, shock_deg, reflected,
              exact.to_wall() / degree);
  std::printf("  pressure %.5f (%.5f), %.5f (%.5f); Mach %.5f (%.5f), %.5f (%.5f)\n",
              second.pressure, p2, third.pressure, p3, second.mach, exact.first.mach, third.mach,
              exact.second.mach);
  EXPECT_NE(s.status, solver::SolutionStatus::failed) << s.reason;
  EXPECT_NEAR(incident, shock_deg, 0.01 * shock_deg);
  EXPECT_NEAR(reflected * degree, exact.to_wall(), 0.01 * exact.to_wall());
  EXPECT_NEAR(second.pressure, p2, 0.01 * p2);
  EXPECT_NEAR(third.pressure, p3, 0.01 * p3);
  EXPECT_NEAR(second.mach, exact.first.mach, 0.01 * exact.first.mach);
  EXPECT_NEAR(third.mach, exact.second.mach, 0.01 * exact.second.mach);
}

INSTANTIATE_TEST_SUITE_P(Fluxes, ShockReflection, testing::ValuesIn(solver::flux_methods),
                         [](const auto& info) { return std::string(info.param.name); });

// The relations used above, against values recomputed from NACA Report 1135 by another program.
TEST(ShockReflectionFormula, MatchesTheTable) {
  const Reflection r;
  EXPECT_NEAR(r.first.turning / degree, 10.94037, 1e-5);
  EXPECT_NEAR(r.first.mach, 2.37807, 1e-5);
  EXPECT_NEAR(r.first.pressure_ratio, 2.13947, 1e-5);
  EXPECT_NEAR(r.second_wave / degree, 34.21947, 1e-5);
  EXPECT_NEAR(r.second.mach, 1.94242, 1e-5);
  EXPECT_NEAR(r.first.pressure_ratio * r.second.pressure_ratio, 4.10757, 1e-5);
}

}  // namespace
}  // namespace falcate::verification
