/// One cold start in a process of its own, so that its peak memory is its own as well.
#pragma once
#include <string>

namespace falcate::benchmarks {

struct ChildSolve {
  int cells = 0;
  double mesh_seconds = 0.0, solve_seconds = 0.0, residual_seconds = 0.0;
  int steps = 0;
  long krylov_iterations = 0;
  long peak_kb = 0;  ///< resident, from start to the end of the solve
  bool steady = false;
};

/// In the child: solves S1 (no cells: nothing) and returns its figures as text.
std::string child_report(int cells);
/// In the parent: starts this program again with `--solve CELLS` and reads what it says.
/// Throws std::runtime_error where that fails.
ChildSolve solve_in_child(int cells);

}  // namespace falcate::benchmarks
