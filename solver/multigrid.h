/// Agglomeration multigrid as an approximate inverse of a block matrix: one V cycle.
/// Cells are joined level by level (agglomeration.h). Each level is smoothed once before and once
/// after by block ILU(k); the coarsest is solved directly.
/// Source: Trottenberg, Oosterlee & Schueller, Multigrid, Academic Press 2001, ch. 2.
/// Errors: none thrown; a singular block shows as non-finite values in the solution.
#pragma once
#include <Eigen/LU>
#include <memory>

#include "solver/agglomeration.h"
#include "solver/schwarz_smoother.h"

namespace falcate::solver {

struct MultigridOptions {
  int level_of_fill = 1;
  int coarsest = 40;       ///< cells at most on the level solved directly
  int rows_a_run = 10000;  ///< of the smoother
};

class Multigrid {
 public:
  /// Lays out the levels. The matrix is not copied: it must stay as long as this is used, with the
  /// values that it had at the last factor().
  Multigrid(const BlockMatrix& finest, const MultigridOptions& options);
  void factor();
  /// x is about A^-1 b, for the matrix of the last factor().
  void solve(const SingleVector& b, SingleVector& x) const;

 private:
  struct Level {
    const BlockMatrix& matrix;
    SchwarzSmoother smoother;
    Agglomeration joined;
    mutable SingleVector rhs, solution, rest, change;
  };
  void add_level(const BlockMatrix& matrix);
  void cycle(std::size_t level) const;

  MultigridOptions options_;
  std::vector<std::unique_ptr<BlockMatrix>> coarse_;  ///< of the levels after the finest
  std::vector<std::unique_ptr<Level>> levels_;
  Eigen::PartialPivLU<Eigen::MatrixXf> direct_;
};

}  // namespace falcate::solver
