// Small flow problems of every kind of boundary and flux, at states that put every branch to work:
// what the derivatives of the residual are checked on.
#pragma once
#include <cmath>
#include <numbers>
#include <random>

#include "mesh/structured.h"
#include "solver/residual.h"

namespace falcate::solver {

using mesh::PatchKind;
using mesh::Point;

struct Setting {
  const char* name;
  mesh::CellKind cells;
  bool periodic;
  std::array<PatchKind, 4> sides;
  double angle;  ///< deg from the plane of rotation
  double mach;   ///< of the flow
  bool given;    ///< whether the inlet condition states the Mach number
  FluxKind flux;
};

inline constexpr PatchKind in = PatchKind::inlet, out = PatchKind::outlet, wall = PatchKind::wall,
                           fixed = PatchKind::prescribed;

inline const Setting settings[] = {
    {"subsonic_periodic",
     mesh::CellKind::quads,
     true,
     {wall, out, wall, in},
     50,
     0.4,
     false,
     FluxKind::slau2},
    {"supersonic_periodic",
     mesh::CellKind::mixed,
     true,
     {wall, out, wall, in},
     25,
     2.0,
     true,
     FluxKind::slau2},
    {"downward_periodic",
     mesh::CellKind::quads,
     true,
     {wall, out, wall, in},
     150,
     1.7,
     true,
     FluxKind::hllc},
    {"axially_supersonic",
     mesh::CellKind::quads,
     true,
     {wall, out, wall, in},
     80,
     2.0,
     true,
     FluxKind::roe},
    {"channel",
     mesh::CellKind::triangles,
     false,
     {wall, out, wall, in},
     90,
     0.3,
     false,
     FluxKind::slau2},
    {"prescribed",
     mesh::CellKind::mixed,
     false,
     {fixed, fixed, wall, fixed},
     80,
     0.8,
     false,
     FluxKind::hllc},
};

inline mesh::PassageMesh mesh_of(const Setting& s) {
  const auto map = [](double xi, double eta) {
    return Point(2.0 * xi, 0.8 * eta + 0.1 * std::sin(3.0 * xi));
  };
  return mesh::PassageMesh::build(
      mesh::structured(9, 7, s.cells, map, s.sides, s.periodic ? 0.8 : 0.0, 0.15));
}

inline FlowProblem problem_of(const Setting& s, const mesh::PassageMesh& mesh) {
  FlowProblem p;
  p.mesh = &mesh;
  p.gas = {1.4, 287.0};
  p.inlet = {2e5, 300.0, s.angle * std::numbers::pi / 180.0, {}};
  if (s.given) p.inlet.mach = s.mach;
  p.exit_pressure = 2e5 * std::pow(1.0 + 0.2 * s.mach * s.mach, -3.5);
  p.prescribed = [](const Point& x) {
    return Primitive{2.0, 200.0 + 10.0 * x.x(), 30.0, 1.2e5 + 1e3 * x.y()};
  };
  return p;
}

/// The cold start, stirred by a tenth: the limiter and every branch are at work.
inline std::vector<State<double>> stirred(const FlowProblem& problem, const ScaledProblem& scaled) {
  auto cells = cold_start(problem, scaled);
  std::mt19937 random(7);
  std::uniform_real_distribution<double> part(-0.05, 0.05);
  for (auto& q : cells)
    for (auto& value : q) value *= 1.0 + part(random);
  return cells;
}

/// The residual of a setting, to be differentiated at the stirred cells.
struct StirredFlow {
  mesh::PassageMesh mesh;
  FlowProblem problem;
  ScaledProblem scaled;
  std::vector<State<double>> cells;
  Residual residual;

  explicit StirredFlow(const Setting& s)
      : mesh(mesh_of(s)),
        problem(problem_of(s, mesh)),
        scaled(scale(problem)),
        cells(stirred(problem, scaled)),
        residual(scaled, {s.flux, 2.0}) {
    refresh_planes(scaled, cells);
  }
};

}  // namespace falcate::solver
