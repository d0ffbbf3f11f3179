/// Block ILU(k) on overlapping runs of rows, worked on side by side: a smoother for multigrid.
/// The rows are cut into runs of equal length; each run is solved together with the rows next to it
/// as far as couplings reach, and keeps its own part of the answer (restricted additive Schwarz).
/// The number of runs depends on the matrix, not on the threads.
/// Source: Cai & Sarkis, SIAM J. Sci. Comput. 21(2) (1999) 792-797.
#pragma once
#include "solver/incomplete_lu.h"

namespace falcate::solver {

class SchwarzSmoother {
 public:
  SchwarzSmoother(const BlockMatrix& matrix, int level_of_fill, int rows_a_run);
  void factor(const BlockMatrix& matrix);
  void factor(std::span<const WeightedMatrix> sum);
  /// x is about A^-1 b
  void solve(const SingleVector& b, SingleVector& x) const;

 private:
  struct Run {
    RowRange own, rows;
    IncompleteLu factors;
    mutable SingleVector solution;
  };
  std::vector<Run> runs_;
};

}  // namespace falcate::solver
