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
#include "solver/gas_dynamics.h"
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
  double angle;  ///< deg; 0: the blade S1, shock-free at Mach 2 and 25 degrees
  double pitch;  ///< over width
  double edge_radius;
  double mach;
  double exit_pressure;        ///< over that of the stream at Mach `mach`
  double upstream;             ///< inlet plane to leading edge, widths
  double waves_in, waves_out;  ///< least spread of pressure over a plane, of its mean
};

/// Channel blades and S1. The streams faster than sound have an axial part slower than sound;
/// their waves, and where the exit pressure is raised strong shocks, cross the planes.
const Row rows[] = {{"subsonic", 30, 0.5, 0.01, 0.6, 1.0, 1.0, 0.0, 0.0},
                    {"bow_waves", 20, 0.5, 0.01, 2.0, 1.3, 0.3, 0.12, 0.05},
                    {"blunt_edges", 30, 0.8, 0.03, 1.6, 1.0, 1.0, 0.1, 0.15},
                    {"slow", 25, 0.5, 0.01, 1.3, 1.0, 0.5, 0.1, 0.02},
                    {"shocked_exit", 0, 0.3002776851, 0.0, 2.0, 1.6, 1.0, 0.0, 0.12}};

mesh::BladeOutline blade_of(const Row& row) {
  if (row.angle == 0.0)
    return mesh::coordinates_blade(
        FALCATE_SOURCE_DIR "/tests/data/exact_supersonic_impulse_S1_M2.0_b65.csv", width);
  mesh::ChannelParameters blade;
  blade.width = width;
  blade.pitch = row.pitch * width;
  blade.inlet_angle = row.angle * degree;
  blade.exit_angle = std::numbers::pi - blade.inlet_angle;
  blade.edge_radius = row.edge_radius * width;
  return mesh::channel_blade(blade);
}

/// The states of the nearest cells: behind the plane of the smaller mesh those of its last column.
std::vector<solver::Primitive> carried(const std::vector<solver::Primitive>& cells,
                                       const mesh::PassageMesh& from, const mesh::PassageMesh& to) {
  const auto by_x = [](const Point& a, const Point& b) { return a.x() < b.x(); };
  const auto& old = from.centroids();
  const auto [first, last] = std::minmax_element(old.begin(), old.end(), by_x);
  std::vector<solver::Primitive> out;
  for (const Point& centroid : to.centroids()) {
    const Point place(std::clamp(centroid.x(), first->x(), last->x()), centroid.y());
    const auto nearer = [&](const Point& a, const Point& b) {
      return (a - place).squaredNorm() < (b - place).squaredNorm();
    };
    out.push_back(cells[at(
        static_cast<int>(std::min_element(old.begin(), old.end(), nearer) - old.begin()))]);
  }
  return out;
}

/// Greatest less least pressure beside a plane, over that of the mixed-out stream.
double waves(const mesh::PassageMesh& passage, const solver::FlowSolution& solution, PatchKind kind,
             double mixed_out) {
  double least = 1e300, greatest = 0.0;
  for (const auto& patch : passage.patches()) {
    if (patch.kind != kind) continue;
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f) {
      const double p = solution.cells[at(passage.faces()[at(f)].left)].pressure;
      least = std::min(least, p);
      greatest = std::max(greatest, p);
    }
  }
  return (greatest - least) / mixed_out;
}

/// A row and its solution with the planes where they are.
class Planes : public testing::TestWithParam<Row> {
 protected:
  solver::FlowProblem problem(const mesh::PassageMesh& passage) const {
    const Row& row = GetParam();
    solver::FlowProblem problem;
    problem.mesh = &passage;
    const double angle = row.angle == 0.0 ? 25.0 : row.angle;
    problem.inlet = {1e6, 300.0, angle * degree, row.mach};
    problem.exit_pressure =
        1e6 * row.exit_pressure * solver::pressure_ratio(row.mach, problem.gas.heat_capacity_ratio);
    return problem;
  }
  solver::FlowSolution solve(const mesh::PassageMesh& passage,
                             const std::vector<solver::Primitive>& start) const {
    auto solution = solver::solve_steady(problem(passage), {}, start);
    EXPECT_EQ(solution.summary.status, solver::SolutionStatus::steady) << GetParam().name;
    return solution;
  }
  mesh::MeshLevels make_meshes() const {
    const Row& row = GetParam();
    mesh::MeshOptions options;
    options.cells = 6000;
    options.upstream = row.upstream;
    const double angle = (row.angle == 0.0 ? 25.0 : row.angle) * degree;
    return mesh::make_mesh_levels(blade_of(row), row.pitch * width, angle, std::numbers::pi - angle,
                                  options);
  }
};

/// All within 0.1 %: what enters, what leaves, turning, force, and force over mass flow, which the
/// efficiency goes by.
void expect_same(const post::PassageFigures& near, const post::PassageFigures& far) {
  const auto same = [](const char* what, double a, double b) {
    EXPECT_NEAR(b / a, 1.0, 1e-3) << what;
    std::printf("  %s %+.4f %%", what, 100.0 * (b / a - 1.0));
  };
  same("mass flow", near.mass_flow_kg_s_m, far.mass_flow_kg_s_m);
  same("inlet Mach", near.inlet.mach, far.inlet.mach);
  same("inlet angle", near.inlet.angle_deg, far.inlet.angle_deg);
  same("turning", near.turning_deg, far.turning_deg);
  same("exit velocity", near.exit.velocity_m_s, far.exit.velocity_m_s);
  same("exit pressure", near.exit.pressure_pa, far.exit.pressure_pa);
  same("force", near.tangential_force_n_m, far.tangential_force_n_m);
  same("efficiency", near.tangential_force_n_m / near.mass_flow_kg_s_m,
       far.tangential_force_n_m / far.mass_flow_kg_s_m);
  std::printf("\n");
}

TEST_P(Planes, ChangeNothingWhereTheyMoveOut) {
  const Row& row = GetParam();
  const auto meshes = make_meshes();
  solver::FlowSolution solution;
  for (std::size_t k = 0; k < meshes.levels.size(); ++k)
    solution =
        solve(meshes.levels[k], k == 0 ? solution.cells
                                       : solver::prolong(solution.cells, meshes.levels[k - 1],
                                                         meshes.levels[k], meshes.parent[k]));
  const mesh::PassageMesh& passage = meshes.levels.back();
  const auto near = post::passage_figures(problem(passage), solution, {});
  const double in = waves(passage, solution, PatchKind::inlet, near.inlet.pressure_pa),
               out = waves(passage, solution, PatchKind::outlet, near.exit.pressure_pa);
  std::printf("%s: inlet Mach %.4f at %.3f deg, exit Mach %.4f at %.3f deg, waves of %.3f, %.3f\n",
              row.name, near.inlet.mach, near.inlet.angle_deg, near.exit.mach, near.exit.angle_deg,
              in, out);
  EXPECT_GE(in, row.waves_in);
  EXPECT_GE(out, row.waves_out);
  EXPECT_EQ(near.inlet.mach > 1.0, row.mach > 1.0);
  for (const PatchKind plane : {PatchKind::inlet, PatchKind::outlet}) {
    // From the solution before it: there can be more than one.
    const auto wider = moved_out(passage, plane, width);
    const auto far = solve(wider, carried(solution.cells, passage, wider));
    expect_same(near, post::passage_figures(problem(wider), far, {}));
  }
}

INSTANTIATE_TEST_SUITE_P(Rows, Planes, testing::ValuesIn(rows),
                         [](const auto& info) { return std::string(info.param.name); });

/// Figures of a row of this outline, solved coarse to fine.
post::PassageFigures solved(const mesh::BladeOutline& outline, double pitch, double blade_angle,
                            const solver::InletCondition& inlet, double exit_pressure, int cells) {
  mesh::MeshOptions options;
  options.cells = cells;
  const auto meshes =
      mesh::make_mesh_levels(outline, pitch, blade_angle, std::numbers::pi - blade_angle, options);
  solver::FlowProblem problem;
  problem.inlet = inlet;
  problem.exit_pressure = exit_pressure;
  solver::FlowSolution solution;
  for (std::size_t k = 0; k < meshes.levels.size(); ++k) {
    problem.mesh = &meshes.levels[k];
    solution = solver::solve_steady(problem, {},
                                    k == 0 ? solution.cells
                                           : solver::prolong(solution.cells, meshes.levels[k - 1],
                                                             meshes.levels[k], meshes.parent[k]));
  }
  EXPECT_EQ(solution.summary.status, solver::SolutionStatus::steady);
  return post::passage_figures(problem, solution, {});
}

double axial_mach(const post::StreamState& stream) {
  return stream.mach * std::sin(stream.angle_deg * degree);
}

// A stream that expands past the set pressure on its way through the first guess meets a shock that
// this pressure drives back into the row: the set pressure holds.
TEST(ExitPressure, HoldsWhereAShockWouldRunIntoTheRow) {
  mesh::CupParameters cup;
  cup.width = width;
  cup.pitch = 0.8 * width;
  cup.inlet_angle = 35.0 * degree;
  cup.exit_angle = 145.0 * degree;
  cup.wall_thickness = 0.06 * width;
  const double set = 1e6 * solver::pressure_ratio(1.71, 1.4);
  const auto f = solved(mesh::cup_blade(cup), cup.pitch, cup.inlet_angle,
                        {1e6, 300.0, 24.8 * degree, 1.71}, set, 2000);
  EXPECT_NEAR(f.exit.pressure_pa / set, 1.0, 1e-9);
  EXPECT_LT(axial_mach(f.exit), 1.0);
  EXPECT_GT(f.exit.mach, 1.0);
}

// Limit load: at and below a pressure the row behaves alike, whatever is set; a shock along the
// plane marks where pressure acts again (NACA Report 1135 (1953), eq. 93).
TEST(ExitPressure, ActsOnlyAboveThatBehindAShockAtLimitLoad) {
  mesh::ChannelParameters blade;
  blade.width = width;
  blade.pitch = 0.5 * width;
  blade.inlet_angle = 30.0 * degree;
  blade.exit_angle = 150.0 * degree;
  blade.edge_radius = 0.01 * width;
  const double ideal = 1e6 * solver::pressure_ratio(2.0, 1.4);
  const auto at_pressure = [&](double level) {
    return solved(mesh::channel_blade(blade), blade.pitch, blade.inlet_angle,
                  {1e6, 300.0, blade.inlet_angle, 2.0}, level * ideal, 8000);
  };
  const auto high = at_pressure(1.0), low = at_pressure(0.6), raised = at_pressure(1.4);
  const double axial = axial_mach(high.exit);
  EXPECT_GT(axial, 1.0);
  EXPECT_NEAR(low.exit.pressure_pa / high.exit.pressure_pa, 1.0, 1e-8);
  EXPECT_NEAR(low.tangential_force_n_m / high.tangential_force_n_m, 1.0, 1e-8);
  const double behind = high.exit.pressure_pa * (1.0 + 2.8 / 2.4 * (axial * axial - 1.0));
  EXPECT_GT(behind, ideal);
  EXPECT_LT(behind, 1.4 * ideal);
  EXPECT_NEAR(raised.exit.pressure_pa / (1.4 * ideal), 1.0, 1e-9);
  EXPECT_LT(axial_mach(raised.exit), 1.0);
}

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
