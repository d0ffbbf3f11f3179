/// Incomplete LU factors of a block matrix with a level of fill, block ILU(k).
/// An entry made by eliminating through entries of levels a and b has level a + b + 1; entries of
/// the matrix have level 0; those above k are dropped.
/// Source: Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. 2003, sec. 10.3.
/// Errors: none thrown; a singular pivot block shows as non-finite values in the solution.
#pragma once
#include <span>

#include "solver/block_matrix.h"

namespace falcate::solver {

/// Rows first, ..., last - 1.
struct RowRange {
  int first, last;
  int size() const { return last - first; }
};

struct WeightedMatrix {
  const BlockMatrix* matrix;
  float weight;
};

class IncompleteLu {
 public:
  /// Lays out the factors for matrices of this pattern; of a part of its rows only where told so,
  /// leaving out the couplings to other rows.
  IncompleteLu(const BlockMatrix& matrix, int level_of_fill);
  IncompleteLu(const BlockMatrix& matrix, int level_of_fill, RowRange rows);
  void factor(const BlockMatrix& matrix);
  /// Of a weighted sum of matrices whose patterns lie within that of the layout.
  void factor(std::span<const WeightedMatrix> sum);
  /// x = (LU)^-1 b, both of the length of the rows worked on.
  void solve(const Eigen::Ref<const SingleVector>& b, SingleVector& x) const;

 private:
  void add(const WeightedMatrix& term);

  RowRange rows_;
  BlockMatrix factors_;  ///< unit L below, U above, inverse pivots on the diagonal
};

}  // namespace falcate::solver
