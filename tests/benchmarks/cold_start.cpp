// Cold start to a residual drop of 1e-10 on three nested meshes: whole time over that of one
// residual evaluation on the finest.
#include <fmt/format.h>
#include <omp.h>

#include "post/passage_figures.h"
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

std::string loss_words(const solver::FlowProblem& problem, const solver::FlowSolution& solution) {
  if (solution.summary.status == solver::SolutionStatus::failed) return "-";
  const double loss = post::passage_figures(problem, solution, {}).total_pressure_loss;
  return fmt::format("{:.1f} %", 100.0 * loss);
}

void add_row(const PassageRow& row, int cells, Table& table) {
  const mesh::MeshLevels meshes = passage_meshes(row, cells);
  const ColdSolve solve = solve_from_cold(row, meshes);
  solver::FlowProblem problem = passage_problem(row);
  problem.mesh = &meshes.levels.back();
  const double ree = residual_seconds(problem, solve.finest.cells);
  const int count = problem.mesh->cell_count();
  const Bounds& bounds = row.strong_shocks ? shocked_flow : smooth_flow;
  table.add({row.name, loss_words(problem, solve.finest), fmt::format("{}", count),
             fmt::format("{:.2f}", 1e3 * ree), fmt::format("{:.0f}", 1e9 * ree / count),
             fmt::format("{}", solve.steps), fmt::format("{}", solve.krylov_iterations),
             fmt::format("{:.2f}", solve.time.wall),
             fmt::format("{:.0f} %", 100.0 * solve.time.core_share()),
             post::status_words(solve.finest.summary.status),
             fmt::format("{:.0f}", solve.time.wall / ree), bounds.aim, bounds.limit});
}

}  // namespace

std::string cold_start(const Scale& scale) {
  omp_set_num_threads(1);
  Table table({"row", "loss", "cells", "REE, ms", "ns a cell", "steps", "Krylov iterations",
               "seconds", "core had", "ended", "REE", "aim", "limit"});
  const auto& rows = passage_rows();
  for (std::size_t i = 0; i < rows.size() && i < scale.row_count; ++i)
    add_row(rows[i], scale.row_cells, table);
  return "From nothing to a residual drop of 1e-10 on three nested meshes, one thread. Steps,\n"
         "iterations and time are those of all three. Loss is that of total pressure, mixed out, "
         "over the\n"
         "inlet's less the exit pressure: the last rows lose by strong shocks. Where the solve did "
         "not\n"
         "have its core to itself, the figures say little.\n\n" +
         table.text();
}

}  // namespace falcate::benchmarks
