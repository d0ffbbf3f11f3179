#include "tests/benchmarks/passages.h"

#include <cmath>
#include <numbers>
#include <stdexcept>

#include "mesh/blade_shapes.h"
#include "mesh/mesh_levels_maker.h"
#include "solver/gas_dynamics.h"
#include "solver/steady_solver.h"

namespace falcate::benchmarks {
namespace {

constexpr double degree = std::numbers::pi / 180.0, width = 0.01;
constexpr double total_pressure = 1e6, total_temperature = 300.0;
constexpr double residual_drop = 1e-10;
constexpr const char* s1 = "exact_supersonic_impulse_S1_M2.0_b65.csv";
constexpr const char* s3 = "exact_supersonic_impulse_S3_M2.5_b70.csv";
constexpr const char* i1 = "exact_incompressible_cascade_I1_turn83.csv";
constexpr const char* i3 = "exact_incompressible_cascade_I3_turn31.csv";

mesh::BladeOutline outline_of(const PassageRow& row) {
  if (row.file)
    return mesh::coordinates_blade(FALCATE_SOURCE_DIR "/tests/data/" + std::string(row.file),
                                   width);
  mesh::ChannelParameters blade;
  blade.width = width;
  blade.pitch = row.pitch * width;
  blade.inlet_angle = row.inlet_angle * degree;
  blade.exit_angle = row.exit_angle * degree;
  blade.edge_radius = 0.01 * width;
  return mesh::channel_blade(blade);
}

}  // namespace

const std::vector<PassageRow>& passage_rows() {
  static const std::vector<PassageRow> rows{
      {"S1, Mach 2.0", s1, 0.3002776851, 2.0, 25.0, 155.0, 2.0, 1.0, false},
      {"I3, Mach 0.1", i3, 0.7507737395, 0.0, 75.0, 105.5, 0.1, 1.0, false},
      {"S3, Mach 2.5", s3, 0.2548557998, 2.5, 20.0, 160.0, 2.5, 1.0, false},
      {"I1, Mach 0.1", i1, 0.7384864051, 0.0, 50.0, 132.8, 0.1, 1.0, false},
      {"channel, exit Mach 0.5", nullptr, 0.5, 0.0, 25.0, 155.0, 0.5, 1.0, false},
      {"channel, exit Mach 0.8", nullptr, 0.5, 0.0, 25.0, 155.0, 0.8, 1.0, false},
      {"S1, exit pressure 1.6 times design", s1, 0.3002776851, 2.0, 25.0, 155.0, 2.0, 1.6, true},
      {"S3, exit pressure 1.8 times design", s3, 0.2548557998, 2.5, 20.0, 160.0, 2.5, 1.8, true},
      {"channel, exit Mach 1.3", nullptr, 0.5, 0.0, 25.0, 155.0, 1.3, 1.0, true},
  };
  return rows;
}

const PassageRow& passage_row(const std::string& name) {
  for (const PassageRow& row : passage_rows())
    if (row.name == name) return row;
  throw std::out_of_range("no passage " + name);
}

mesh::MeshLevels passage_meshes(const PassageRow& row, int cells) {
  mesh::MeshOptions options;
  options.cells = cells;
  options.time_limit_s = 600.0;  // a million cells
  return mesh::make_mesh_levels(outline_of(row), row.pitch * width, row.inlet_angle * degree,
                                row.exit_angle * degree, options);
}

solver::FlowProblem passage_problem(const PassageRow& row) {
  solver::FlowProblem problem;
  problem.inlet.total_pressure = total_pressure;
  problem.inlet.total_temperature = total_temperature;
  problem.inlet.angle = row.inlet_angle * degree;
  if (row.inlet_mach > 0.0) problem.inlet.mach = row.inlet_mach;
  problem.exit_pressure = total_pressure * row.pressure_factor *
                          solver::pressure_ratio(row.exit_mach, problem.gas.heat_capacity_ratio);
  return problem;
}

ColdSolve solve_from_cold(const PassageRow& row, const mesh::MeshLevels& meshes) {
  ColdSolve out;
  solver::FlowProblem problem = passage_problem(row);
  solver::SteadyOptions options;
  options.residual_drop = residual_drop;
  const auto solve_level = [&](std::size_t k) {
    problem.mesh = &meshes.levels[k];
    std::vector<solver::Primitive> start;
    if (k > 0)
      start = solver::prolong(out.finest.cells, meshes.levels[k - 1], meshes.levels[k],
                              meshes.parent[k]);
    out.finest = solver::solve_steady(problem, options, start);
    out.steps += out.finest.summary.newton_steps;
    out.krylov_iterations += out.finest.summary.krylov_iterations;
  };
  out.time = elapsed([&] {
    for (std::size_t k = 0; k < meshes.levels.size(); ++k) solve_level(k);
  });
  return out;
}

double residual_seconds(const solver::FlowProblem& problem,
                        const std::vector<solver::Primitive>& cells) {
  solver::ScaledProblem scaled = solver::scale(problem);
  std::vector<solver::State<double>> states, fluxes, residual(cells.size());
  for (const solver::Primitive& cell : cells) states.push_back(scaled.units.scaled(cell));
  solver::refresh_planes(scaled, states);
  const solver::Residual evaluation(scaled, {});
  return median_seconds([&] { evaluation.evaluate<double>(states, fluxes, residual); });
}

}  // namespace falcate::benchmarks
