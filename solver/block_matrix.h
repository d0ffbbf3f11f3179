/// Sparse matrix of 4x4 blocks (compressed rows, columns ascending) and its product with a vector,
/// in single precision: linear systems of Newton's method and their preconditioners need no more,
/// and half the memory is read. Vectors hold 4 values a cell, one cell after the other.
#pragma once
#include <Eigen/Core>
#include <vector>

namespace falcate::solver {

using Block = Eigen::Matrix4f;
using Vector = Eigen::VectorXd;
using SingleVector = Eigen::VectorXf;

class BlockMatrix {
 public:
  BlockMatrix() = default;
  /// Pattern: the columns of each row, ascending, the diagonal among them.
  explicit BlockMatrix(const std::vector<std::vector<int>>& pattern);

  int rows() const { return static_cast<int>(start_.size()) - 1; }
  std::size_t begin(int row) const { return start_[static_cast<std::size_t>(row)]; }
  std::size_t end(int row) const { return start_[static_cast<std::size_t>(row) + 1]; }
  std::size_t diagonal(int row) const { return diagonal_[static_cast<std::size_t>(row)]; }
  int column(std::size_t place) const { return columns_[place]; }
  /// Place of a column in a row; the pattern must hold it.
  std::size_t place(int row, int column) const;
  Block& block(std::size_t place) { return blocks_[place]; }
  const Block& block(std::size_t place) const { return blocks_[place]; }
  std::size_t block_count() const { return columns_.size(); }
  void set_zero();

  /// y = A x, r = b - A x; the same bits for every number of threads.
  void multiply(const SingleVector& x, SingleVector& y) const;
  void residual(const SingleVector& b, const SingleVector& x, SingleVector& r) const;

 private:
  Eigen::Vector4f row_product(int row, const SingleVector& x) const;

  std::vector<std::size_t> start_, diagonal_;
  std::vector<int> columns_;
  std::vector<Block, Eigen::aligned_allocator<Block>> blocks_;
};

}  // namespace falcate::solver
