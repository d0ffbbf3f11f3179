#include "solver/incomplete_lu.h"

#include <Eigen/LU>
#include <algorithm>
#include <map>

namespace falcate::solver {
namespace {

/// Columns of each row with fill up to level k.
std::vector<std::vector<int>> filled_pattern(const BlockMatrix& matrix, int k) {
  const auto n = static_cast<std::size_t>(matrix.rows());
  std::vector<std::vector<int>> columns(n), levels(n);
  for (int row = 0; row < matrix.rows(); ++row) {
    std::map<int, int> entries;  // column -> level
    for (std::size_t p = matrix.begin(row); p < matrix.end(row); ++p) entries[matrix.column(p)] = 0;
    for (auto it = entries.begin(); it != entries.end() && it->first < row; ++it) {
      const auto pivot = static_cast<std::size_t>(it->first);
      for (std::size_t j = 0; j < columns[pivot].size(); ++j) {
        const int column = columns[pivot][j], level = it->second + levels[pivot][j] + 1;
        if (column <= it->first || level > k) continue;
        const auto found = entries.find(column);
        if (found == entries.end())
          entries[column] = level;
        else
          found->second = std::min(found->second, level);
      }
    }
    for (const auto& [column, level] : entries) {
      columns[static_cast<std::size_t>(row)].push_back(column);
      levels[static_cast<std::size_t>(row)].push_back(level);
    }
  }
  return columns;
}

}  // namespace

IncompleteLu::IncompleteLu(const BlockMatrix& matrix, int level_of_fill)
    : work_(filled_pattern(matrix, level_of_fill)), factors_(work_.block_count()) {}

void IncompleteLu::load(const BlockMatrix& matrix) {
  work_.set_zero();
  for (int row = 0; row < matrix.rows(); ++row) {
    std::size_t place = work_.begin(row);
    for (std::size_t k = matrix.begin(row); k < matrix.end(row); ++k) {
      while (work_.column(place) != matrix.column(k)) ++place;
      work_.block(place) = matrix.block(k);
    }
  }
}

void IncompleteLu::factor(const BlockMatrix& matrix) {
  load(matrix);
  BlockMatrix& f = work_;
  std::vector<std::ptrdiff_t> where(static_cast<std::size_t>(f.rows()), -1);
  for (int row = 0; row < f.rows(); ++row) {
    for (std::size_t k = f.begin(row); k < f.end(row); ++k)
      where[static_cast<std::size_t>(f.column(k))] = static_cast<std::ptrdiff_t>(k);
    for (std::size_t k = f.begin(row); k < f.diagonal(row); ++k) {
      const int pivot = f.column(k);
      const Block multiplier = f.block(k) * f.block(f.diagonal(pivot));
      f.block(k) = multiplier;
      for (std::size_t j = f.diagonal(pivot) + 1; j < f.end(pivot); ++j) {
        const std::ptrdiff_t target = where[static_cast<std::size_t>(f.column(j))];
        if (target >= 0)
          f.block(static_cast<std::size_t>(target)).noalias() -= multiplier * f.block(j);
      }
    }
    Block& diagonal = f.block(f.diagonal(row));
    diagonal = diagonal.inverse().eval();
    for (std::size_t k = f.begin(row); k < f.end(row); ++k)
      where[static_cast<std::size_t>(f.column(k))] = -1;
  }
  for (std::size_t k = 0; k < factors_.size(); ++k) factors_[k] = f.block(k).cast<float>();
}

void IncompleteLu::solve(const Vector& b, Vector& x) const {
  const BlockMatrix& m = work_;
  solution_ = b.cast<float>();
  for (int row = 0; row < m.rows(); ++row) {
    Eigen::Vector4f sum = solution_.segment<4>(4 * row);
    for (std::size_t k = m.begin(row); k < m.diagonal(row); ++k)
      sum.noalias() -= factors_[k] * solution_.segment<4>(4 * m.column(k));
    solution_.segment<4>(4 * row) = sum;
  }
  for (int row = m.rows() - 1; row >= 0; --row) {
    Eigen::Vector4f sum = solution_.segment<4>(4 * row);
    for (std::size_t k = m.diagonal(row) + 1; k < m.end(row); ++k)
      sum.noalias() -= factors_[k] * solution_.segment<4>(4 * m.column(k));
    solution_.segment<4>(4 * row).noalias() = factors_[m.diagonal(row)] * sum;
  }
  x = solution_.cast<double>();
}

}  // namespace falcate::solver
