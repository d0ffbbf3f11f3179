// A supersonic passage that starts by itself, from the cold start: channel blades at Mach 2 and 25
// deg, the stream along the metal. Sharp edges disturb nothing, so the row swallows the stream as
// it comes; along the first part of either wall's arc the flow is a simple wave, and the Mach
// number on the wall follows from its turning alone: nu(M) = nu(2) + turning on the convex wall, -
// on the concave one, until waves of the other wall arrive. Exact: NACA Report 1135 (1953),
// Prandtl-Meyer flow. With rounded edges and a throat a little above the limit of Kantrowitz &
// Donaldson, NACA ACR L5D20 (1945), it starts as well.
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "mesh/blade_shapes.h"
#include "solver/gas_dynamics.h"
#include "solver/prandtl_meyer.h"
#include "tests/validation/solved_passage.h"

namespace falcate::validation {
namespace {

constexpr double degree = std::numbers::pi / 180.0, gamma = 1.4;
constexpr double width = 0.01, pitch = 0.4 * width, angle = 25.0 * degree, mach = 2.0;

mesh::ChannelParameters blade() {
  mesh::ChannelParameters p;
  p.width = width;
  p.pitch = pitch;
  p.inlet_angle = angle;
  p.exit_angle = std::numbers::pi - angle;
  return p;
}

double throat_ratio(const mesh::ChannelParameters& p) {
  return mesh::throat_width(mesh::channel_blade(p), pitch) / (pitch * std::sin(angle));
}

SolvedPassage solved(const mesh::ChannelParameters& p, int cells) {
  PassageTask task;
  task.pitch = pitch;
  task.exit_angle = p.exit_angle;
  task.problem.inlet = {1e6, 300.0, angle, mach};
  task.problem.exit_pressure = 1e6 * solver::pressure_ratio(mach, gamma);
  task.mesh.cells = cells;
  return {mesh::channel_blade(p), task};
}

/// Flow that passes over what the undisturbed stream carries through a pitch.
double swallowed(const SolvedPassage& passage) {
  const solver::Gas gas;
  const double stream =
      solver::mass_flux(gas, 1e6, 300.0, 1e6 * solver::pressure_ratio(mach, gamma));
  return passage.figures(passage.finest()).mass_flow_kg_s_m / (stream * std::sin(angle) * pitch);
}

/// Share by which the wall's Mach number differs from that of the simple wave, worst and rms, where
/// the wall has turned by `from` to `to` (deg) since its start at 65 deg from the axis.
struct WaveError {
  double worst = 0.0, sum = 0.0;
  int faces = 0;
  double root_mean_square() const { return std::sqrt(sum / faces); }
};
WaveError wave_error(const std::vector<post::SurfacePoint>& wall, double radius, double sense,
                     double from, double to) {
  WaveError error;
  const double first = 0.5 * std::numbers::pi - angle;
  for (const auto& face : wall) {
    const double sine = (0.5 * width - face.x) / radius;
    if (sine < 0.0 || sine > std::sin(first)) continue;
    const double turning = first - std::asin(sine);
    if (turning < from * degree || turning > to * degree) continue;
    const double nu = solver::prandtl_meyer(mach * mach, gamma) + sense * turning;
    const double exact = std::sqrt(solver::mach_squared_from_prandtl_meyer(nu, gamma));
    const double share = std::abs(face.isentropic_mach / exact - 1.0);
    error.worst = std::max(error.worst, share);
    error.sum += share * share;
    ++error.faces;
  }
  return error;
}

TEST(StartingPassage, WithSharpEdgesSwallowsTheStreamAsItComes) {
  const auto p = blade();
  const SolvedPassage passage = solved(p, 8000);
  const auto& summary = passage.solution(passage.finest()).summary;
  const auto f = passage.figures(passage.finest());
  // Both arcs about one centre, the concave one from edge to edge of the blade.
  const double outer = 0.5 * width / std::cos(angle), inner = outer - pitch * std::sin(angle);
  const auto surface = passage.surface(passage.finest());
  const WaveError convex = wave_error(surface.suction, inner, 1.0, 8.0, 28.0);
  const WaveError concave = wave_error(surface.pressure, outer, -1.0, 8.0, 18.0);
  std::printf(
      "throat ratio %.4f, %d steps: inlet Mach %.5f, %.4f deg, flow %.6f of the stream; simple "
      "waves: convex wall rms %.2f %%, worst %.2f %%, concave wall rms %.2f %%, worst %.2f %%\n",
      throat_ratio(p), summary.newton_steps, f.inlet.mach, f.inlet.angle_deg, swallowed(passage),
      100.0 * convex.root_mean_square(), 100.0 * convex.worst, 100.0 * concave.root_mean_square(),
      100.0 * concave.worst);
  EXPECT_EQ(summary.status, solver::SolutionStatus::steady) << summary.reason;
  EXPECT_NEAR(f.inlet.mach, mach, 0.001 * mach);
  EXPECT_NEAR(f.inlet.angle_deg, angle / degree, 0.02);
  EXPECT_NEAR(f.inlet.total_pressure_pa, 1e6, 1e3);
  EXPECT_NEAR(swallowed(passage), 1.0, 0.001);
  EXPECT_GT(convex.faces, 15);
  EXPECT_GT(concave.faces, 10);
  EXPECT_LT(convex.worst, 0.01);
  EXPECT_LT(concave.worst, 0.01);
}

TEST(StartingPassage, StartsAboveTheKantrowitzLimit) {
  auto p = blade();
  p.edge_radius = 0.005 * width;
  p.passage_width = 0.85 * pitch * std::sin(angle);
  const double limit = solver::starting_area_ratio(mach, gamma);
  EXPECT_NEAR(limit, 0.8220, 1e-4);  // NACA ACR L5D20, gamma 1.4
  EXPECT_GT(throat_ratio(p), limit);
  const SolvedPassage passage = solved(p, 4000);
  const auto& summary = passage.solution(passage.finest()).summary;
  const auto f = passage.figures(passage.finest());
  std::printf("throat ratio %.4f (limit %.4f), %d steps: inlet Mach %.4f, %.3f deg, flow %.5f\n",
              throat_ratio(p), limit, summary.newton_steps, f.inlet.mach, f.inlet.angle_deg,
              swallowed(passage));
  EXPECT_EQ(summary.status, solver::SolutionStatus::steady) << summary.reason;
  // Not behind a normal shock: the waves of the rounded edges alone slow the stream.
  EXPECT_GT(f.inlet.mach, 1.7);
  EXPECT_GT(swallowed(passage), 0.9);
}

}  // namespace
}  // namespace falcate::validation
