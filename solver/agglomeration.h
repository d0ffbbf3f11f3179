/// Cells joined in groups of about four, and what multigrid does between the two levels: sums of
/// blocks and right-hand sides over a group (Galerkin product with piecewise constant transfer,
/// which for a first-order finite-volume matrix is that of the scheme on the joined cells), and
/// corrections handed to all cells of a group alike.
/// Source: Lallemand, Steve & Dervieux, Computers & Fluids 21(3) (1992) 397-433.
#pragma once
#include "solver/block_matrix.h"

namespace falcate::solver {

class Agglomeration {
 public:
  /// Joins the neighbours of a pattern, in the order of the cells.
  explicit Agglomeration(const BlockMatrix& pattern);

  int group_count() const { return count_; }
  int group(int cell) const { return group_[static_cast<std::size_t>(cell)]; }
  /// The matrix of the groups, blocks zero.
  BlockMatrix coarse_pattern(const BlockMatrix& fine) const;
  /// coarse = P^T fine P
  void sum(const BlockMatrix& fine, BlockMatrix& coarse);
  /// coarse = P^T fine
  void restrict_to(const SingleVector& fine, SingleVector& coarse) const;
  /// fine += P coarse
  void add_to(const SingleVector& coarse, SingleVector& fine) const;

 private:
  int count_ = 0;
  std::vector<int> group_;
  std::vector<std::size_t> target_;  ///< coarse block each fine block adds to
};

}  // namespace falcate::solver
