/// Steady flow of one passage by pseudo-transient Newton-Krylov with exact linearisation.
#pragma once
#include <functional>

#include "solver/flow_problem.h"
#include "solver/flow_solution.h"

namespace falcate::solver {

struct SteadyOptions {
  double residual_drop = 1e-10;  ///< stop when |R| <= residual_drop * |R_first|
  int max_steps = 200;           ///< Newton steps
  double initial_cfl = 5.0;
};

/// Called after every step; only the command line prints.
using Observer = std::function<void(const ConvergencePoint&)>;

/// Solves from `start` (cell states; empty: cold start from the inlet and exit conditions).
FlowSolution solve_steady(const FlowProblem& problem, const SteadyOptions& options,
                          const std::vector<Primitive>& start, const Observer& observer = {});

/// Cell states of a coarse level carried to the next finer one (injection through `parent`).
std::vector<Primitive> prolong(const std::vector<Primitive>& coarse, const std::vector<int>& parent);

}  // namespace falcate::solver
