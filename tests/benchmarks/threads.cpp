// The whole solve on one thread and on all, against what pure arithmetic gains from them.
#include <fmt/format.h>
#include <omp.h>

#include <algorithm>
#include <cmath>
#include <cstring>

#include "tests/benchmarks/arithmetic.h"
#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/passages.h"
#include "tests/benchmarks/table.h"

namespace falcate::benchmarks {
namespace {

using States = std::vector<solver::Primitive>;

struct Run {
  double solve = 0.0, arithmetic = 0.0;  ///< s
  States cells;
};

Run run_on(int threads, const PassageRow& row, const mesh::MeshLevels& meshes, long rounds) {
  omp_set_num_threads(threads);
  Run run;
  run.arithmetic = arithmetic_seconds(threads, rounds);
  ColdSolve solve = solve_from_cold(row, meshes);
  // Before and after the solve, so that the load of the machine is the same.
  run.arithmetic = 0.5 * (run.arithmetic + arithmetic_seconds(threads, rounds));
  run.solve = solve.time.wall;
  run.cells = std::move(solve.finest.cells);
  return run;
}

bool same_bits(const States& a, const States& b) {
  return a.size() == b.size() &&
         std::memcmp(a.data(), b.data(), a.size() * sizeof(solver::Primitive)) == 0;
}

/// Largest difference of a pressure, over the largest pressure.
double difference(const States& a, const States& b) {
  double largest = 0.0, scale = 0.0;
  for (std::size_t i = 0; i < a.size(); ++i) {
    largest = std::max(largest, std::abs(a[i].pressure - b[i].pressure));
    scale = std::max(scale, a[i].pressure);
  }
  return largest / scale;
}

void add_row(const PassageRow& row, const Scale& scale, int threads, Table& table) {
  const mesh::MeshLevels meshes = passage_meshes(row, scale.row_cells);
  const long rounds = scale.row_cells * 1000L;
  const Run one = run_on(1, row, meshes, rounds), all = run_on(threads, row, meshes, rounds);
  const Run one_again = run_on(1, row, meshes, rounds),
            all_again = run_on(threads, row, meshes, rounds);
  const double gain = threads * std::min(one.arithmetic, one_again.arithmetic) /
                      std::min(all.arithmetic, all_again.arithmetic);
  const double speed_up =
      std::min(one.solve, one_again.solve) / std::min(all.solve, all_again.solve);
  const bool repeats =
      same_bits(one.cells, one_again.cells) && same_bits(all.cells, all_again.cells);
  table.add({row.name, fmt::format("{}", threads), fmt::format("{:.2f}", speed_up),
             fmt::format("{:.2f}", gain), fmt::format("{:.2f}", speed_up / gain), "0.85",
             fmt::format("{:.0e}", difference(one.cells, all.cells)), repeats ? "yes" : "no"});
}

}  // namespace

std::string threads(const Scale& scale) {
  const int cores = std::max(2, omp_get_num_procs());
  Table table({"row", "threads", "speed-up of the solve", "of arithmetic", "share", "aim",
               "largest difference to one thread", "same bits again"});
  for (const char* name : {"S1, Mach 2.0", "I3, Mach 0.1"})
    add_row(passage_row(name), scale, cores, table);
  omp_set_num_threads(1);
  return "The cold start above on one thread and on all cores, twice each, the faster counted,\n"
         "against a loop of multiply-adds in registers timed beside it. The difference is that of\n"
         "the pressure in any cell over the largest pressure.\n\n" +
         table.text();
}

}  // namespace falcate::benchmarks
