// Time and peak memory of a cold start against the number of cells.
#include <fmt/format.h>

#include <cmath>

#include "tests/benchmarks/child_solve.h"
#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/power_law.h"
#include "tests/benchmarks/table.h"

namespace falcate::benchmarks {

std::string size(const Scale& scale) {
  const long idle_kb = solve_in_child(0).peak_kb;
  Table table({"cells", "meshing, s", "solving, s", "steps", "Krylov iterations", "ended", "REE",
               "microseconds a cell", "peak memory, MB", "kB a cell", "limit"});
  std::vector<double> cells, seconds;
  for (const int wanted : scale.sizes) {
    const ChildSolve s = solve_in_child(wanted);
    cells.push_back(s.cells);
    seconds.push_back(s.solve_seconds);
    const double kb = static_cast<double>(s.peak_kb - idle_kb);
    table.add({fmt::format("{}", s.cells), fmt::format("{:.1f}", s.mesh_seconds),
               fmt::format("{:.2f}", s.solve_seconds), fmt::format("{}", s.steps),
               fmt::format("{}", s.krylov_iterations), s.steady ? "steady" : "not steady",
               fmt::format("{:.0f}", s.solve_seconds / s.residual_seconds),
               fmt::format("{:.0f}", 1e6 * s.solve_seconds / s.cells),
               fmt::format("{:.0f}", kb / 1024.0), fmt::format("{:.2f}", kb / s.cells), "4"});
  }
  return fmt::format(
      "S1 from a cold start on three nested meshes, one thread, each size in a process of its "
      "own.\n"
      "Memory is the peak of that process until the end of the solve, less the {} MB that the\n"
      "program takes before it does anything; the mesher's own process is not counted.\n\n{}\n"
      "Time grows as cells^{:.2f} (least squares of the logarithms); aim: at most 1.2.\n",
      idle_kb / 1024, table.text(), power_of(cells, seconds));
}

}  // namespace falcate::benchmarks
