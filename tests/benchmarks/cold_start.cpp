// Cold start to a residual drop of 1e-10 on three nested meshes: whole time over that of one
// residual evaluation on the finest.
#include <fmt/format.h>
#include <omp.h>

#include "post/point_record.h"
#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/passages.h"
#include "tests/benchmarks/table.h"

namespace falcate::benchmarks {
namespace {

struct Bounds {
  const char *aim, *limit;
};
constexpr Bounds smooth_flow{"300", "800"}, shocked_flow{"600", "1500"};

void add_row(const PassageRow& row, int cells, Table& table) {
  const mesh::MeshLevels meshes = passage_meshes(row, cells);
  const ColdSolve solve = solve_from_cold(row, meshes);
  solver::FlowProblem problem = passage_problem(row);
  problem.mesh = &meshes.levels.back();
  const double ree = residual_seconds(problem, solve.finest.cells);
  const int count = problem.mesh->cell_count();
  const Bounds& bounds = row.strong_shocks ? shocked_flow : smooth_flow;
  table.add({row.name, fmt::format("{}", count), fmt::format("{:.2f}", 1e3 * ree),
             fmt::format("{:.0f}", 1e9 * ree / count), fmt::format("{}", solve.steps),
             fmt::format("{}", solve.krylov_iterations), fmt::format("{:.2f}", solve.seconds),
             post::status_words(solve.finest.summary.status),
             fmt::format("{:.0f}", solve.seconds / ree), bounds.aim, bounds.limit});
}

}  // namespace

std::string cold_start(const Scale& scale) {
  omp_set_num_threads(1);
  Table table({"row", "cells", "REE, ms", "ns a cell", "steps", "Krylov iterations", "seconds",
               "ended", "REE", "aim", "limit"});
  const auto& rows = passage_rows();
  for (std::size_t i = 0; i < rows.size() && i < scale.row_count; ++i)
    add_row(rows[i], scale.row_cells, table);
  return "From nothing to a residual drop of 1e-10 on three nested meshes, one thread. Steps,\n"
         "iterations and time are those of all three. The last rows have strong shocks.\n\n" +
         table.text();
}

}  // namespace falcate::benchmarks
