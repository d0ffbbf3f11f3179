/// Incomplete LU factors of a block matrix on its own pattern, block ILU(0), kept in single
/// precision: a preconditioner needs no more, and half the memory is read.
/// Source: Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. 2003, sec. 10.3.
/// Errors: none thrown; a singular pivot block shows as non-finite values in the solution.
#pragma once
#include "solver/block_matrix.h"

namespace falcate::solver {

class IncompleteLu {
 public:
  void factor(const BlockMatrix& matrix);
  /// x = (LU)^-1 b
  void solve(const Vector& b, Vector& x) const;

 private:
  using SmallBlock = Eigen::Matrix<float, 4, 4, Eigen::RowMajor>;
  const BlockMatrix* pattern_ = nullptr;
  std::vector<SmallBlock> factors_;  ///< unit L below, U above, inverse pivots on the diagonal
  mutable Eigen::VectorXf work_;
};

}  // namespace falcate::solver
