#include "solver/block_matrix.h"

#include <algorithm>
#include <cassert>

#include "solver/block_sum.h"

namespace falcate::solver {

BlockMatrix::BlockMatrix(const std::vector<std::vector<int>>& pattern) {
  start_.push_back(0);
  for (const auto& row : pattern) {
    columns_.insert(columns_.end(), row.begin(), row.end());
    start_.push_back(columns_.size());
  }
  for (int row = 0; row < rows(); ++row) diagonal_.push_back(place(row, row));
  blocks_.resize(columns_.size());
  set_zero();
}

std::size_t BlockMatrix::place(int row, int column) const {
  const auto first = columns_.begin() + static_cast<std::ptrdiff_t>(begin(row));
  const auto last = columns_.begin() + static_cast<std::ptrdiff_t>(end(row));
  const auto found = std::lower_bound(first, last, column);
  assert(found != last && *found == column);
  return static_cast<std::size_t>(found - columns_.begin());
}

void BlockMatrix::set_zero() {
  for (auto& block : blocks_) block.setZero();
}

Eigen::Vector4f BlockMatrix::row_product(int row, const SingleVector& x) const {
  BlockSum sum;
  for (std::size_t k = begin(row); k < end(row); ++k)
    sum.add(blocks_[k], x.data() + 4 * columns_[k]);
  return sum.total();
}

void BlockMatrix::multiply(const SingleVector& x, SingleVector& y) const {
  y.resize(x.size());
#pragma omp parallel for schedule(static)
  for (int row = 0; row < rows(); ++row) {
    y.segment<4>(4 * row) = row_product(row, x);
  }
}

void BlockMatrix::residual(const SingleVector& b, const SingleVector& x, SingleVector& r) const {
  r.resize(b.size());
#pragma omp parallel for schedule(static)
  for (int row = 0; row < rows(); ++row) {
    r.segment<4>(4 * row) = b.segment<4>(4 * row) - row_product(row, x);
  }
}

}  // namespace falcate::solver
