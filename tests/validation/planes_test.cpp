// The in- and outflow planes let everything out: results do not change when the planes move one
// blade width further out, on meshes that are the same elsewhere. And a supersonic stream with
// subsonic axial part takes the direction that the row's entrance gives it (unique incidence).
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <string>
#include <vector>

#include "mesh/blade_shapes.h"
#include "mesh/mesh_levels_maker.h"
#include "post/passage_figures.h"
#include "solver/prandtl_meyer.h"
#include "solver/steady_solver.h"

namespace falcate {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double degree = std::numbers::pi / 180.0, width = 0.01;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

/// The parts the mesh was made from, but for the edges of one plane.
mesh::RawMesh parts_without(const mesh::PassageMesh& from, PatchKind plane,
                            std::vector<int>& plane_nodes) {
  mesh::RawMesh raw;
  raw.pitch = from.pitch();
  raw.nodes = from.nodes();
  raw.cells = from.cells();
  for (const auto& patch : from.patches())
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f) {
      const auto& face = from.faces()[at(f)];
      if (patch.kind == plane)
        plane_nodes.insert(plane_nodes.end(), face.nodes.begin(), face.nodes.end());
      else
        raw.boundary.push_back({face.nodes[0], face.nodes[1], patch.kind, face.midpoint});
    }
  // Below a periodic face lies its double: nodes that differ by the pitch.
  for (int f = 0; f < from.interior_face_count(); ++f) {
    const auto& face = from.faces()[at(f)];
    if (face.right_shift.norm() == 0.0) continue;
    for (const int node : face.nodes) {
      const Point other = raw.nodes[at(node)] - face.right_shift;
      int twin = 0;
      for (int i = 1; i < static_cast<int>(raw.nodes.size()); ++i)
        if ((raw.nodes[at(i)] - other).norm() < (raw.nodes[at(twin)] - other).norm()) twin = i;
      const bool upper = face.right_shift.y() > 0.0;
      raw.periodic.push_back({upper ? twin : node, upper ? node : twin});
    }
  }
  const auto lower = [&](int a, int b) { return raw.nodes[at(a)].y() < raw.nodes[at(b)].y(); };
  std::sort(plane_nodes.begin(), plane_nodes.end(), lower);
  plane_nodes.erase(std::unique(plane_nodes.begin(), plane_nodes.end()), plane_nodes.end());
  return raw;
}

/// The mesh with even columns of cells put on at a plane, which moves out by `length`.
mesh::PassageMesh moved_out(const mesh::PassageMesh& from, PatchKind plane, double length) {
  std::vector<int> last;
  mesh::RawMesh raw = parts_without(from, plane, last);
  const int rows = static_cast<int>(last.size()) - 1;
  const int columns = static_cast<int>(std::lround(length * rows / from.pitch()));
  const double step = (plane == PatchKind::inlet ? -1.0 : 1.0) * length / columns;
  for (int c = 0; c < columns; ++c) {
    std::vector<int> next;
    for (const int node : last) {
      next.push_back(static_cast<int>(raw.nodes.size()));
      raw.nodes.emplace_back(raw.nodes[at(node)] + Point(step, 0.0));
    }
    for (std::size_t i = 0; i + 1 < last.size(); ++i) {
      const auto& left = step > 0.0 ? last : next;
      const auto& right = step > 0.0 ? next : last;
      raw.cells.push_back({left[i], right[i], right[i + 1], left[i + 1]});
    }
    raw.periodic.push_back({next.front(), next.back()});
    last = next;
  }
  for (std::size_t i = 0; i + 1 < last.size(); ++i)
    raw.boundary.push_back(
        {last[i], last[i + 1], plane, 0.5 * (raw.nodes[at(last[i])] + raw.nodes[at(last[i + 1])])});
  std::sort(raw.periodic.begin(), raw.periodic.end());
  raw.periodic.erase(std::unique(raw.periodic.begin(), raw.periodic.end()), raw.periodic.end());
  return mesh::PassageMesh::build(raw);
}

struct Row {
  const char* name;
  double mach;
  double exit_pressure;  ///< over the inlet's total pressure
};

/// Channel blades of 30 degrees, pitch half the width. The exit pressure is that of the impulse
/// row.
const Row rows[] = {{"subsonic", 0.6, 0.784}};

class Planes : public testing::TestWithParam<Row> {};

TEST_P(Planes, ChangeNothingWhereTheyMoveOut) {
  const Row& row = GetParam();
  mesh::ChannelParameters blade;
  blade.width = width;
  blade.pitch = 0.5 * width;
  blade.inlet_angle = 30.0 * degree;
  blade.exit_angle = 150.0 * degree;
  blade.edge_radius = 0.01 * width;
  mesh::MeshOptions options;
  options.cells = 2000;
  options.levels = 1;
  const auto meshes = mesh::make_mesh_levels(mesh::channel_blade(blade), blade.pitch,
                                             blade.inlet_angle, blade.exit_angle, options);
  const auto solve = [&](const mesh::PassageMesh& passage) {
    solver::FlowProblem problem;
    problem.mesh = &passage;
    problem.inlet = {1e6, 300.0, blade.inlet_angle, row.mach};
    problem.exit_pressure = 1e6 * row.exit_pressure;
    const auto solution = solver::solve_steady(problem, {}, {});
    EXPECT_EQ(solution.summary.status, solver::SolutionStatus::steady) << row.name;
    return post::passage_figures(problem, solution, {});
  };
  const auto near = solve(meshes.levels[0]);
  for (const PatchKind plane : {PatchKind::inlet, PatchKind::outlet}) {
    const auto far = solve(moved_out(meshes.levels[0], plane, width));
    std::printf(
        "%s, %s: mass flow %.7f -> %.7f, inlet Mach %.6f -> %.6f, exit angle %.5f -> %.5f, "
        "exit Mach %.6f -> %.6f, force %.6f -> %.6f\n",
        row.name, plane == PatchKind::inlet ? "inlet" : "outlet", near.mass_flow_kg_s_m,
        far.mass_flow_kg_s_m, near.inlet.mach, far.inlet.mach, near.exit.angle_deg,
        far.exit.angle_deg, near.exit.mach, far.exit.mach, near.tangential_force_n_m,
        far.tangential_force_n_m);
    const auto same = [](double a, double b) { EXPECT_NEAR(b / a, 1.0, 1e-3); };
    same(near.mass_flow_kg_s_m, far.mass_flow_kg_s_m);
    same(near.inlet.mach, far.inlet.mach);
    same(near.inlet.angle_deg, far.inlet.angle_deg);
    same(near.exit.angle_deg, far.exit.angle_deg);
    same(near.exit.mach, far.exit.mach);
    same(near.tangential_force_n_m, far.tangential_force_n_m);
  }
}

INSTANTIATE_TEST_SUITE_P(Rows, Planes, testing::ValuesIn(rows),
                         [](const auto& info) { return std::string(info.param.name); });

// The suction side of S1 runs straight at 25 degrees up to its leading edge: whatever the stream
// far ahead, it enters along that side, turned by waves that keep |theta| + nu(M) (theta from the
// axial direction). Source: NACA Report 1135 (1953); Starken, Zhong & Schreiber, ASME 84-GT (1984).
TEST(UniqueIncidence, TurnsTheStreamToTheStraightSuctionSide) {
  const auto outline = mesh::coordinates_blade(
      FALCATE_SOURCE_DIR "/tests/data/exact_supersonic_impulse_S1_M2.0_b65.csv", width);
  mesh::MeshOptions options;
  options.cells = 4000;
  const auto meshes =
      mesh::make_mesh_levels(outline, 0.3002776851 * width, 25.0 * degree, 155.0 * degree, options);
  for (const double angle : {24.0, 26.0}) {
    solver::FlowProblem problem;
    problem.inlet = {1e6, 300.0, angle * degree, 2.0};
    problem.exit_pressure = 1e6 * 0.1278;
    solver::FlowSolution solution;
    for (std::size_t k = 0; k < meshes.levels.size(); ++k) {
      problem.mesh = &meshes.levels[k];
      solution = solver::solve_steady(problem, {},
                                      k == 0 ? solution.cells
                                             : solver::prolong(solution.cells, meshes.levels[k - 1],
                                                               meshes.levels[k], meshes.parent[k]));
    }
    const auto f = post::passage_figures(problem, solution, {});
    const double nu = solver::prandtl_meyer(4.0, 1.4) + (25.0 - angle) * degree;
    const double mach = std::sqrt(solver::mach_squared_from_prandtl_meyer(nu, 1.4));
    std::printf("stream %.0f deg: enters at %.3f deg, Mach %.4f (simple wave %.4f)\n", angle,
                f.inlet.angle_deg, f.inlet.mach, mach);
    EXPECT_EQ(solution.summary.status, solver::SolutionStatus::steady);
    EXPECT_NEAR(f.inlet.angle_deg, 25.0, 0.15);
    EXPECT_NEAR(f.inlet.mach, mach, 0.01);
  }
}

}  // namespace
}  // namespace falcate
