// The next point of a speed line, solved from the one before it as a run of the program does.
#include <fmt/format.h>
#include <omp.h>

#include <algorithm>
#include <iterator>

#include "cases/case_file.h"
#include "cases/point_solver.h"
#include "mesh/mesh_levels_maker.h"
#include "post/point_record.h"
#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/passages.h"
#include "tests/benchmarks/table.h"
#include "tests/benchmarks/timing.h"

namespace falcate::benchmarks {
namespace {

struct Neighbours {
  double from, to;  ///< u/c1
};
/// At the last the stream meets the blades faster than sound; such a point starts cold.
constexpr Neighbours pairs[] = {{0.47, 0.49}, {0.43, 0.47}, {0.33, 0.38}, {0.16, 0.20}};

mesh::MeshLevels meshes_of(const cases::Case& input) {
  const cases::BladeRow row = cases::make_blade_row(input);
  mesh::MeshOptions options;
  options.cells = input.cells;
  options.upstream = input.upstream;
  options.downstream = input.downstream;
  return mesh::make_mesh_levels(row.outline, row.pitch, row.inlet_angle, row.exit_angle, options);
}

solver::FlowProblem problem_of(const cases::Case& input, const cases::OperatingPoint& point,
                               const mesh::PassageMesh& mesh) {
  solver::FlowProblem problem;
  problem.mesh = &mesh;
  problem.gas = input.gas;
  problem.inlet = point.inlet;
  problem.exit_pressure = point.exit_pressure;
  return problem;
}

void add_row(cases::Case input, const Neighbours& pair, Table& table) {
  const mesh::MeshLevels meshes = meshes_of(input);
  input.speed_ratios = {pair.from, pair.to};
  const auto points = cases::operating_points(input);
  cases::RunObserver silent;
  const cases::SolvedPoint before = cases::solve_point(input, meshes, points.at(0), {}, silent);
  cases::SolvedPoint point;
  const Elapsed time = elapsed(
      [&] { point = cases::solve_point(input, meshes, points.at(1), before.states, silent); });
  const auto& states = point.states.back().empty() ? before.states.back() : point.states.back();
  const double ree =
      residual_seconds(problem_of(input, points.at(1), meshes.levels.back()), states);
  const solver::SteadySummary& summary = point.result.solution;
  table.add({fmt::format("u/c1 {:.2f} to {:.2f}", pair.from, pair.to),
             fmt::format("{:.2f}", points.at(1).inlet_mach),
             fmt::format("{}", meshes.levels.back().cell_count()), fmt::format("{:.2f}", 1e3 * ree),
             fmt::format("{:.0f}", before.result.seconds / ree),
             fmt::format("{}", summary.newton_steps), fmt::format("{}", summary.krylov_iterations),
             fmt::format("{:.2f}", time.wall), fmt::format("{:.0f} %", 100.0 * time.core_share()),
             post::status_words(summary.status), fmt::format("{:.0f}", time.wall / ree), "100"});
}

}  // namespace

std::string speed_line(const Scale& scale) {
  omp_set_num_threads(1);
  cases::Case input = cases::read_case(FALCATE_SOURCE_DIR "/cases/examples/deburring-spindle.toml");
  input.cells = scale.line_cells;
  Table table({"neighbours", "relative Mach", "cells", "REE, ms", "first from cold, REE", "steps",
               "Krylov iterations", "seconds", "core had", "ended", "REE", "aim"});
  for (std::size_t i = 0; i < std::min(std::size(pairs), scale.row_count); ++i)
    add_row(input, pairs[i], table);
  return "The demo case `deburring-spindle.toml`: a point from the one before it, all three\n"
         "meshes with figures and error bars, one thread; steps and iterations are those of the\n"
         "finest. A stream faster than sound always starts cold: two flows may be possible "
         "there.\n\n" +
         table.text();
}

}  // namespace falcate::benchmarks
