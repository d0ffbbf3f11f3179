// A uniform stream stays what it is, to round-off, through every boundary, flux and kind of cell:
// the simplest exact solution of the Euler equations.
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "mesh/structured.h"
#include "solver/residual.h"

namespace falcate::solver {
namespace {

using mesh::PatchKind;
using mesh::Point;

struct Stream {
  const char* name;
  double angle_deg, mach;
  bool given;
};
const Stream streams[] = {{"slow", 40, 0.1, false},         {"subsonic", 25, 0.7, false},
                          {"falling", 150, 0.5, false},     {"simple_wave", 25, 2.0, true},
                          {"falling_wave", 155, 1.8, true}, {"axially_supersonic", 70, 2.5, true}};

State<double> state_of(const Stream& s, double gamma) {
  const double angle = s.angle_deg * std::numbers::pi / 180.0;
  const double t = 1.0 / (1.0 + 0.5 * (gamma - 1.0) * s.mach * s.mach);
  const double w = s.mach * std::sqrt(gamma * t);
  const double rho = std::pow(t, 1.0 / (gamma - 1.0));
  return {rho, w * std::sin(angle), w * std::cos(angle), rho * t};
}

double worst_residual(const Stream& s, mesh::CellKind kind, FluxKind flux,
                      const std::array<PatchKind, 4>& sides, double pitch) {
  const double gamma = 1.33;
  const auto map = [](double xi, double eta) {
    return Point(0.03 * xi, 0.02 * eta + 0.004 * std::sin(4.0 * xi));
  };
  const auto mesh = mesh::PassageMesh::build(mesh::structured(10, 8, kind, map, sides, pitch, 0.2));
  const auto q = state_of(s, gamma);
  FlowProblem problem;
  problem.mesh = &mesh;
  problem.gas = {gamma, 287.0};
  problem.inlet = {3e5, 290.0, s.angle_deg * std::numbers::pi / 180.0, {}};
  if (s.given) problem.inlet.mach = s.mach;
  problem.exit_pressure = q[pressure] * problem.inlet.total_pressure;
  const double rt = 287.0 * 290.0;
  problem.prescribed = [&](const Point&) {
    return Primitive{q[0] * 3e5 / rt, q[1] * std::sqrt(rt), q[2] * std::sqrt(rt), q[3] * 3e5};
  };
  auto scaled = scale(problem);
  const std::vector<State<double>> cells(static_cast<std::size_t>(mesh.cell_count()), q);
  refresh_planes(scaled, cells);
  std::vector<State<double>> fluxes, sums(cells.size());
  Residual(scaled, {flux, 3.0}).evaluate<double>(cells, fluxes, sums);
  double worst = 0.0;
  for (const auto& r : sums)
    for (const double v : r) worst = std::max(worst, std::abs(v));
  return worst / mesh.faces()[0].normal.norm();
}

class UniformStream : public testing::TestWithParam<Stream> {};

TEST_P(UniformStream, StaysThroughInletAndOutlet) {
  for (const auto& method : flux_methods)
    for (const auto kind :
         {mesh::CellKind::quads, mesh::CellKind::triangles, mesh::CellKind::mixed})
      EXPECT_LT(worst_residual(
                    GetParam(), kind, method.kind,
                    {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, 0.02),
                1e-13)
          << method.name;
}

TEST_P(UniformStream, StaysThroughPrescribedBoundaries) {
  const auto fixed = PatchKind::prescribed;
  for (const auto& method : flux_methods)
    EXPECT_LT(worst_residual(GetParam(), mesh::CellKind::mixed, method.kind,
                             {fixed, fixed, fixed, fixed}, 0.0),
              1e-13)
        << method.name;
}

INSTANTIATE_TEST_SUITE_P(Streams, UniformStream, testing::ValuesIn(streams),
                         [](const auto& info) { return std::string(info.param.name); });

TEST(UniformStreamAtAWall, StaysAlongIt) {
  const double gamma = 1.4;
  const auto map = [](double xi, double eta) { return Point(xi, eta); };
  const auto mesh = mesh::PassageMesh::build(mesh::structured(
      8, 6, mesh::CellKind::mixed, map,
      {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, 0.0, 0.2));
  const Stream along{"along", 90, 0.6, false};
  const auto q = state_of(along, gamma);
  FlowProblem problem;
  problem.mesh = &mesh;
  problem.gas = {gamma, 287.0};
  problem.inlet = {1e5, 300.0, std::numbers::pi / 2.0, {}};
  problem.exit_pressure = q[pressure] * 1e5;
  auto scaled = scale(problem);
  const std::vector<State<double>> cells(static_cast<std::size_t>(mesh.cell_count()), q);
  refresh_planes(scaled, cells);
  std::vector<State<double>> fluxes, sums(cells.size());
  Residual(scaled, {}).evaluate<double>(cells, fluxes, sums);
  for (const auto& r : sums)
    for (const double v : r) EXPECT_NEAR(v, 0.0, 1e-14);
}

}  // namespace
}  // namespace falcate::solver
