/// Approximate inverse of the matrix of a Newton step, in two stages.
///
///   x = P C^-1 P^T b,  C: the compact matrix summed over groups of cells, by a multigrid cycle
///   x += S^-1 (b - compact x),  S: the mean of the wide and the compact matrix, by block ILU(0)
/// The first carries what is smooth across the passage. The second sees the second-order couplings:
/// a compact upwind matrix smears what the flow carries along unchanged, such as wakes, and leaves
/// those errors to the Krylov method one by one. The wide matrix alone has no stable factors at low
/// Mach number; the mean does (measured: docs/decisions.md).
/// Source: Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. 2003, sec. 13.3 (two-level
/// corrections), 10.3 (ILU).
/// Errors: none thrown; a singular block shows as non-finite values in the solution.
#pragma once
#include "solver/multigrid.h"
#include "solver/newton_matrix.h"

namespace falcate::solver {

class NewtonPreconditioner {
 public:
  /// The matrix is not copied: it must stay as long as this is used, with the values that it had at
  /// the last factor().
  NewtonPreconditioner(const NewtonMatrix& matrix, const MultigridOptions& options);
  void factor();
  /// x is about A^-1 b
  void solve(const SingleVector& b, SingleVector& x) const;

 private:
  const NewtonMatrix& matrix_;
  Agglomeration joined_;
  BlockMatrix coarse_;
  Multigrid multigrid_;
  SchwarzSmoother smoother_;
  mutable SingleVector coarse_rhs_, coarse_solution_, rest_, change_;
};

}  // namespace falcate::solver
