/// Steady flow of one passage by pseudo-transient Newton-Krylov with exact linearisation.
///
/// Each step solves (V M / dt + dR/dq) dq = -R, M = dU/dq, dt = CFL V / sum of face wave speeds, by
/// GMRES on the assembled exact derivative (newton_matrix.h), preconditioned in two stages
/// (newton_preconditioner.h). CFL grows with every whole step, so the last steps are Newton's own.
/// Where no steady flow is found, the flow is marched in time by implicit Euler steps of one
/// fiftieth of the passage time (plane to plane at the reference speed), shorter where a cell would
/// change too much, first to forget its start, then to be averaged; the solution says so. Cells all
/// but empty of gas stop neither way.
///
/// Sources: Kelley & Keyes, SIAM J. Numer. Anal. 35(2) (1998) 508-523 (pseudo-transient
/// continuation); Knoll & Keyes, J. Comput. Phys. 193 (2004) 357-397.
///
/// Limits: ideal gas, inviscid. Throws std::invalid_argument when the problem is not one.
#pragma once
#include <functional>

#include "solver/flow_problem.h"
#include "solver/flow_solution.h"
#include "solver/residual.h"

namespace falcate::solver {

struct SteadyOptions {
  double residual_drop = 1e-11;  ///< stop when |R| <= residual_drop * |R of the cold start|
  int max_steps = 150;           ///< Newton steps, of both attempts together
  int averaging_steps = 160;     ///< time steps averaged where there is no steady flow; 0: none
  double initial_cfl = 10.0;
  int level_of_fill = 1;  ///< of the smoother on the preconditioner's coarse levels
  SchemeOptions scheme;
};

/// Called after every step; only the command line prints.
using Observer = std::function<void(const ConvergencePoint&)>;

/// Solves from `start` (cell states; empty: cold start from the inlet and exit conditions).
FlowSolution solve_steady(const FlowProblem& problem, const SteadyOptions& options,
                          const std::vector<Primitive>& start, const Observer& observer = {});

/// Cell states of a coarse level carried to the next finer one: linear in each coarse cell, plain
/// where that would change density or pressure by more than half. `parent` is the coarse cell of
/// each fine one.
std::vector<Primitive> prolong(const std::vector<Primitive>& cells, const mesh::PassageMesh& coarse,
                               const mesh::PassageMesh& fine, const std::vector<int>& parent);

}  // namespace falcate::solver
