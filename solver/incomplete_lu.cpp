#include "solver/incomplete_lu.h"

#include <Eigen/LU>

namespace falcate::solver {

void IncompleteLu::factor(const BlockMatrix& matrix) {
  pattern_ = &matrix;
  std::vector<Block> f(matrix.block_count());
  for (std::size_t k = 0; k < f.size(); ++k) f[k] = matrix.block(k);
  std::vector<std::ptrdiff_t> where(static_cast<std::size_t>(matrix.rows()), -1);
  for (int row = 0; row < matrix.rows(); ++row) {
    for (std::size_t k = matrix.begin(row); k < matrix.end(row); ++k)
      where[static_cast<std::size_t>(matrix.column(k))] = static_cast<std::ptrdiff_t>(k);
    for (std::size_t k = matrix.begin(row); k < matrix.diagonal(row); ++k) {
      const int pivot = matrix.column(k);
      f[k] = (f[k] * f[matrix.diagonal(pivot)]).eval();
      for (std::size_t j = matrix.diagonal(pivot) + 1; j < matrix.end(pivot); ++j) {
        const std::ptrdiff_t target = where[static_cast<std::size_t>(matrix.column(j))];
        if (target >= 0) f[static_cast<std::size_t>(target)].noalias() -= f[k] * f[j];
      }
    }
    Block& diagonal = f[matrix.diagonal(row)];
    diagonal = diagonal.inverse().eval();
    for (std::size_t k = matrix.begin(row); k < matrix.end(row); ++k)
      where[static_cast<std::size_t>(matrix.column(k))] = -1;
  }
  factors_.resize(f.size());
  for (std::size_t k = 0; k < f.size(); ++k) factors_[k] = f[k].cast<float>();
}

void IncompleteLu::solve(const Vector& b, Vector& x) const {
  const BlockMatrix& m = *pattern_;
  work_ = b.cast<float>();
  for (int row = 0; row < m.rows(); ++row) {
    Eigen::Vector4f sum = work_.segment<4>(4 * row);
    for (std::size_t k = m.begin(row); k < m.diagonal(row); ++k)
      sum.noalias() -= factors_[k] * work_.segment<4>(4 * m.column(k));
    work_.segment<4>(4 * row) = sum;
  }
  for (int row = m.rows() - 1; row >= 0; --row) {
    Eigen::Vector4f sum = work_.segment<4>(4 * row);
    for (std::size_t k = m.diagonal(row) + 1; k < m.end(row); ++k)
      sum.noalias() -= factors_[k] * work_.segment<4>(4 * m.column(k));
    work_.segment<4>(4 * row).noalias() = factors_[m.diagonal(row)] * sum;
  }
  x = work_.cast<double>();
}

}  // namespace falcate::solver
