/// Incomplete LU factors of a block matrix with a level of fill, block ILU(k), kept in single
/// precision: a preconditioner needs no more, and half the memory is read.
/// An entry made by eliminating through entries of levels a and b has level a + b + 1; entries of
/// the matrix have level 0; those above k are dropped.
/// Source: Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. 2003, sec. 10.3.
/// Errors: none thrown; a singular pivot block shows as non-finite values in the solution.
#pragma once
#include "solver/block_matrix.h"

namespace falcate::solver {

class IncompleteLu {
 public:
  /// Lays out the factors for matrices of this pattern.
  IncompleteLu(const BlockMatrix& matrix, int level_of_fill);
  void factor(const BlockMatrix& matrix);
  /// x = (LU)^-1 b
  void solve(const Vector& b, Vector& x) const;

 private:
  using SmallBlock = Eigen::Matrix<float, 4, 4, Eigen::RowMajor>;
  void load(const BlockMatrix& matrix);

  BlockMatrix work_;                 ///< the factors while they are made
  std::vector<SmallBlock> factors_;  ///< unit L below, U above, inverse pivots on the diagonal
  mutable Eigen::VectorXf solution_;
};

}  // namespace falcate::solver
