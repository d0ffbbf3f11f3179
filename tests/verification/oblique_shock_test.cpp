// Supersonic streams turned by a wall: the oblique shock of a wedge and the fan of a convex corner.
// Exact: tests/data/oblique_shock_checks.csv (source in its first line); the fan from NACA Report
// 1135 (1953), Prandtl-Meyer flow: Mach 2 turned by 10 deg leaves at Mach 2.384887, p2/p1 0.547969.
#include <gtest/gtest.h>

#include <algorithm>
#include <fstream>
#include <numbers>
#include <sstream>

#include "mesh/structured.h"
#include "solver/prandtl_meyer.h"
#include "solver/steady_solver.h"

namespace falcate::verification {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double gamma = 1.4, mach = 2.0, turn_deg = 10.0;
constexpr double degree = std::numbers::pi / 180.0;
constexpr double fore = 0.3, aft = 1.0, height = 1.2;  ///< corner at the origin

struct Shock {
  double angle_deg, pressure_ratio, mach, total_pressure_ratio;
};

Shock exact_shock() {
  std::ifstream file(FALCATE_SOURCE_DIR "/tests/data/oblique_shock_checks.csv");
  for (std::string line; std::getline(file, line);) {
    std::vector<double> row;
    std::istringstream fields(line);
    for (std::string field; std::getline(fields, field, ',');) {
      if (field.find_first_not_of("0123456789.") != std::string::npos) break;
      row.push_back(std::stod(field));
    }
    if (row.size() == 10 && row[0] == mach && row[1] == turn_deg)
      return {row[2], row[4], row[6], row[7]};
  }
  throw std::runtime_error("no row of Mach 2 and 10 deg");
}

/// Stream along x; speed of sound and density at rest 1.
solver::Primitive stream() {
  const double t = 1.0 / (1.0 + 0.5 * (gamma - 1.0) * mach * mach);
  const double rho = std::pow(t, 1.0 / (gamma - 1.0));
  return {rho, mach * std::sqrt(t), 0.0, rho * t / gamma};
}

/// Wall along x up to the origin, then turned by `turn` (rad, up positive).
mesh::PassageMesh corner(int n, double turn) {
  const auto map = [=](double xi, double eta) {
    const double x = -fore + (fore + aft) * xi;
    const double wall = x > 0.0 ? std::tan(turn) * x : 0.0;
    return Point(x, wall + (height - wall) * eta);
  };
  return mesh::PassageMesh::build(mesh::structured(
      13 * n, 12 * n, mesh::CellKind::quads, map,
      {PatchKind::wall, PatchKind::outlet, PatchKind::prescribed, PatchKind::prescribed}));
}

struct Flow {
  mesh::PassageMesh mesh;
  solver::FlowSolution solution;
};

Flow solve(double turn, int n = 5) {
  Flow flow{corner(n, turn), {}};
  solver::FlowProblem problem;
  problem.mesh = &flow.mesh;
  problem.gas = {gamma, 1.0};
  problem.inlet = {1.0 / gamma, 1.0 / gamma, std::acos(0.0), mach};
  problem.exit_pressure = stream().pressure;
  problem.prescribed = [](const Point&) { return stream(); };
  flow.solution = solver::solve_steady(problem, {}, {});
  return flow;
}

/// Mean wall pressure over wall pressure of the stream, between two stations behind the corner.
double wall_pressure_ratio(const Flow& flow, double from, double to) {
  double sum = 0.0, length = 0.0;
  for (const auto& patch : flow.mesh.patches()) {
    if (patch.kind != PatchKind::wall) continue;
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f) {
      const auto& face = flow.mesh.faces()[static_cast<std::size_t>(f)];
      if (face.midpoint.x() < from || face.midpoint.x() > to) continue;
      const auto& flux =
          flow.solution.boundary[static_cast<std::size_t>(f - flow.mesh.interior_face_count())];
      sum += std::hypot(flux.momentum_x, flux.momentum_y);
      length += face.normal.norm();
    }
  }
  return sum / length / stream().pressure;
}

/// Cells of the column that holds x, from the wall up: height and pressure.
std::vector<std::pair<double, double>> column(const Flow& flow, double x, double width) {
  std::vector<std::pair<double, double>> out;
  for (int i = 0; i < flow.mesh.cell_count(); ++i) {
    const auto& c = flow.mesh.centroids()[static_cast<std::size_t>(i)];
    if (std::abs(c.x() - x) < 0.5 * width)
      out.emplace_back(c.y(), flow.solution.cells[static_cast<std::size_t>(i)].pressure);
  }
  std::sort(out.begin(), out.end());
  return out;
}

/// Where the pressure passes half-way, column by column; the line through these points.
double shock_angle_deg(const Flow& flow, double middle) {
  double sx = 0, sy = 0, sxx = 0, sxy = 0, n = 0;
  const double width = (fore + aft) / 65.0;
  for (double x = 0.2 + 0.5 * width - std::fmod(0.2 + fore, width); x < 0.9; x += width) {
    const auto cells = column(flow, x, width);
    for (std::size_t j = 0; j + 1 < cells.size(); ++j) {
      if (cells[j].second < middle || cells[j + 1].second >= middle) continue;
      const double part = (cells[j].second - middle) / (cells[j].second - cells[j + 1].second);
      const double y = cells[j].first + part * (cells[j + 1].first - cells[j].first);
      sx += x, sy += y, sxx += x * x, sxy += x * y, n += 1.0;
    }
  }
  EXPECT_GT(n, 30.0);
  return std::atan((n * sxy - sx * sy) / (n * sxx - sx * sx)) / degree;
}

/// p/rho^gamma over that of the stream, least and greatest over the cells.
std::pair<double, double> entropy_range(const Flow& flow) {
  const auto q = stream();
  double least = 1e9, greatest = -1e9;
  for (const auto& c : flow.solution.cells) {
    const double s = c.pressure / q.pressure * std::pow(q.density / c.density, gamma);
    least = std::min(least, s);
    greatest = std::max(greatest, s);
  }
  return {least, greatest};
}

void print(const char* what, const Flow& flow) {
  const auto [least, greatest] = entropy_range(flow);
  const auto& s = flow.solution.summary;
  std::printf("%s: %d steps, residual %.1e (%s), entropy %.5f to %.5f, %.1f s\n", what,
              s.newton_steps, s.residual_drop, s.reason.c_str(), least, greatest, s.seconds);
}

/// Cells seen from the corner between two angles (deg from the x axis), beyond x = 0.3.
struct Region {
  double mach = 0.0, entropy = 0.0;  ///< means; entropy over that of the stream
};
Region mean_between(const Flow& flow, double low_deg, double high_deg) {
  Region r;
  double area = 0.0;
  const auto q = stream();
  for (std::size_t i = 0; i < flow.solution.cells.size(); ++i) {
    const auto& x = flow.mesh.centroids()[i];
    const double angle = std::atan2(x.y(), x.x()) / degree;
    if (x.x() < 0.3 || angle < low_deg || angle > high_deg) continue;
    const auto& c = flow.solution.cells[i];
    const double a = flow.mesh.areas()[i];
    r.mach += a * std::hypot(c.u, c.v) / std::sqrt(gamma * c.pressure / c.density);
    r.entropy += a * c.pressure / q.pressure * std::pow(q.density / c.density, gamma);
    area += a;
  }
  return {r.mach / area, r.entropy / area};
}

TEST(ObliqueShock, HasItsAngleAndStateBehind) {
  const Flow flow = solve(turn_deg * degree);
  print("wedge", flow);
  const Shock exact = exact_shock();
  EXPECT_EQ(flow.solution.summary.status, solver::SolutionStatus::steady)
      << flow.solution.summary.reason;
  const double ratio = wall_pressure_ratio(flow, 0.2, 0.9);
  const double angle =
      shock_angle_deg(flow, 0.5 * (1.0 + exact.pressure_ratio) * stream().pressure);
  const Region behind = mean_between(flow, 16.0, 32.0);
  const double total = std::pow(behind.entropy, -1.0 / (gamma - 1.0));
  std::printf("  angle %.3f (exact %.3f), pressure ratio %.5f (exact %.5f)\n", angle,
              exact.angle_deg, ratio, exact.pressure_ratio);
  std::printf("  Mach %.4f (exact %.4f), total pressure ratio %.5f (exact %.5f)\n", behind.mach,
              exact.mach, total, exact.total_pressure_ratio);
  EXPECT_NEAR(angle, exact.angle_deg, 0.01 * exact.angle_deg);
  EXPECT_NEAR(ratio, exact.pressure_ratio, 0.01 * exact.pressure_ratio);
  EXPECT_NEAR(behind.mach, exact.mach, 0.01 * exact.mach);
  EXPECT_NEAR(total, exact.total_pressure_ratio, 0.005);
  // A captured shock undershoots within its few cells: less than 1 % of the stream's entropy.
  EXPECT_GT(entropy_range(flow).first, 0.99);
}

/// Exact pressure over that of the stream on the ray `angle_deg` through the fan's centre: the ray
/// is a Mach line, angle = mu(M) - (nu(M) - nu(M1)).
double fan_pressure(double angle_deg) {
  const auto nu = [](double m) { return solver::prandtl_meyer(m * m, gamma) / degree; };
  const auto ratio = [](double m) {
    return std::pow((1.0 + 0.2 * mach * mach) / (1.0 + 0.2 * m * m), 3.5);
  };
  double low = mach, high = 2.384887;
  for (int i = 0; i < 60; ++i) {
    const double m = 0.5 * (low + high);
    const double ray = std::asin(1.0 / m) / degree - (nu(m) - nu(mach));
    (ray > angle_deg ? low : high) = m;
  }
  return ratio(low);
}

struct FanError {
  double mean = 0.0;     ///< of the pressure, over that of the stream
  double of_jump = 0.0;  ///< the same for a sudden fall on the fan's middle ray
};

/// Beyond x = 0.5, where the kinks at head and tail are some cells apart.
FanError fan_error(const Flow& flow) {
  FanError e;
  double area = 0.0;
  const double head = fan_pressure(89.0), tail = fan_pressure(0.0);
  for (std::size_t i = 0; i < flow.solution.cells.size(); ++i) {
    const auto& x = flow.mesh.centroids()[i];
    const double angle = std::atan2(x.y(), x.x()) / degree, a = flow.mesh.areas()[i];
    if (x.x() < 0.5 || angle < 10.0 || angle > 35.0) continue;
    const double exact = fan_pressure(angle), jump = exact > 0.5 * (head + tail) ? head : tail;
    e.mean += a * std::abs(flow.solution.cells[i].pressure / stream().pressure - exact);
    e.of_jump += a * std::abs(jump - exact);
    area += a;
  }
  return {e.mean / area, e.of_jump / area};
}

// A fan, not an expansion shock: far nearer to the exact fan than a sudden fall would be, and the
// nearer the finer the cells (about first order, for the kinks).
TEST(ExpansionCorner, SpreadsItsFan) {
  const FanError coarse = fan_error(solve(-turn_deg * degree, 4));
  const FanError fine = fan_error(solve(-turn_deg * degree, 8));
  std::printf("  mean error in the fan %.5f, with half the spacing %.5f; of a sudden fall %.5f\n",
              coarse.mean, fine.mean, fine.of_jump);
  EXPECT_LT(fine.mean, 0.25 * fine.of_jump);
  EXPECT_LT(fine.mean, coarse.mean / 1.5);
}

TEST(ExpansionCorner, HasItsStateBehind) {
  const Flow flow = solve(-turn_deg * degree);
  print("corner", flow);
  EXPECT_EQ(flow.solution.summary.status, solver::SolutionStatus::steady)
      << flow.solution.summary.reason;
  const double ratio = wall_pressure_ratio(flow, 0.2, 0.9);
  const Region behind = mean_between(flow, -9.0, 10.0);
  std::printf("  pressure ratio %.5f (exact 0.54797), Mach %.4f (exact 2.3849), entropy %.5f\n",
              ratio, behind.mach, behind.entropy);
  EXPECT_NEAR(ratio, 0.547969, 0.01 * 0.547969);
  EXPECT_NEAR(behind.mach, 2.384887, 0.01 * 2.384887);
  EXPECT_NEAR(behind.entropy, 1.0, 0.005);
  // Lost entropy would tell of an expansion shock, whose entropy at this strength is 0.9 % low.
  EXPECT_GT(entropy_range(flow).first, 0.996);
}

}  // namespace
}  // namespace falcate::verification
