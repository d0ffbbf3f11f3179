/// Agglomeration multigrid as an approximate inverse of a block matrix: one V cycle.
/// Cells are joined in groups of about four, level by level; the coarse matrix sums the blocks of a
/// group (Galerkin product with piecewise constant transfer), which for a first-order finite-volume
/// matrix is that of the scheme on the joined cells. Each level is smoothed once before and once
/// after by block ILU(k); the coarsest is solved directly.
/// Source: Lallemand, Steve & Dervieux, Computers & Fluids 21(3) (1992) 397-433; Trottenberg,
/// Oosterlee & Schueller, Multigrid, Academic Press 2001, ch. 2.
/// Errors: none thrown; a singular block shows as non-finite values in the solution.
#pragma once
#include <Eigen/LU>
#include <memory>

#include "solver/schwarz_smoother.h"

namespace falcate::solver {

struct MultigridOptions {
  int level_of_fill = 1;
  int coarsest = 40;       ///< cells at most on the level solved directly
  int rows_a_run = 10000;  ///< of the smoother
};

/// Group of each cell: neighbours joined by about four, in the order of the cells.
std::vector<int> agglomerate(const BlockMatrix& pattern);

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
    std::vector<int> group;           ///< of each cell, on the next level
    std::vector<std::size_t> target;  ///< block of the next matrix each block adds to
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
