#include "solver/incomplete_lu.h"

#include <Eigen/LU>
#include <algorithm>
#include <map>

namespace falcate::solver {
namespace {

/// Columns of each row with fill up to level k; rows and columns count from the first of the range.
std::vector<std::vector<int>> filled_pattern(const BlockMatrix& matrix, int k, RowRange rows) {
  const auto n = static_cast<std::size_t>(rows.size());
  std::vector<std::vector<int>> columns(n), levels(n);
  for (int row = 0; row < rows.size(); ++row) {
    std::map<int, int> entries;  // column -> level
    for (std::size_t p = matrix.begin(rows.first + row); p < matrix.end(rows.first + row); ++p)
      if (matrix.column(p) >= rows.first && matrix.column(p) < rows.last)
        entries[matrix.column(p) - rows.first] = 0;
    for (auto it = entries.begin(); it != entries.end() && it->first < row; ++it) {
      const auto pivot = static_cast<std::size_t>(it->first);
      for (std::size_t j = 0; j < columns[pivot].size(); ++j) {
        const int column = columns[pivot][j], level = it->second + levels[pivot][j] + 1;
        if (column <= it->first || level > k) continue;
        const auto [found, fresh] = entries.emplace(column, level);
        if (!fresh) found->second = std::min(found->second, level);
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
    : IncompleteLu(matrix, level_of_fill, {0, matrix.rows()}) {}

IncompleteLu::IncompleteLu(const BlockMatrix& matrix, int level_of_fill, RowRange rows)
    : rows_(rows), factors_(filled_pattern(matrix, level_of_fill, rows)) {}

void IncompleteLu::load(const BlockMatrix& matrix) {
  BlockMatrix& f = factors_;
  for (int row = 0; row < f.rows(); ++row) {
    std::size_t k = matrix.begin(rows_.first + row);
    const std::size_t last = matrix.end(rows_.first + row);
    for (std::size_t place = f.begin(row); place < f.end(row); ++place) {
      const int column = rows_.first + f.column(place);
      while (k < last && matrix.column(k) < column) ++k;
      if (k < last && matrix.column(k) == column)
        f.block(place) = matrix.block(k);
      else
        f.block(place).setZero();
    }
  }
}

void IncompleteLu::factor(const BlockMatrix& matrix) {
  load(matrix);
  BlockMatrix& f = factors_;
  std::vector<std::ptrdiff_t> where(static_cast<std::size_t>(f.rows()), -1);
  const auto slot = [&](std::size_t k) -> std::ptrdiff_t& {
    return where[static_cast<std::size_t>(f.column(k))];
  };
  for (int row = 0; row < f.rows(); ++row) {
    for (std::size_t k = f.begin(row); k < f.end(row); ++k)
      slot(k) = static_cast<std::ptrdiff_t>(k);
    for (std::size_t k = f.begin(row); k < f.diagonal(row); ++k) {
      const int pivot = f.column(k);
      const Block multiplier = f.block(k) * f.block(f.diagonal(pivot));
      f.block(k) = multiplier;
      for (std::size_t j = f.diagonal(pivot) + 1; j < f.end(pivot); ++j)
        if (slot(j) >= 0)
          f.block(static_cast<std::size_t>(slot(j))).noalias() -= multiplier * f.block(j);
    }
    Block& diagonal = f.block(f.diagonal(row));
    diagonal = diagonal.inverse().eval();
    for (std::size_t k = f.begin(row); k < f.end(row); ++k) slot(k) = -1;
  }
}

void IncompleteLu::solve(const Eigen::Ref<const SingleVector>& b, SingleVector& x) const {
  const BlockMatrix& f = factors_;
  x.resize(b.size());
  for (int row = 0; row < f.rows(); ++row) {
    Eigen::Vector4f sum = b.segment<4>(4 * row);
    for (std::size_t k = f.begin(row); k < f.diagonal(row); ++k)
      sum.noalias() -= f.block(k) * x.segment<4>(4 * f.column(k));
    x.segment<4>(4 * row) = sum;
  }
  for (int row = f.rows() - 1; row >= 0; --row) {
    Eigen::Vector4f sum = x.segment<4>(4 * row);
    for (std::size_t k = f.diagonal(row) + 1; k < f.end(row); ++k)
      sum.noalias() -= f.block(k) * x.segment<4>(4 * f.column(k));
    x.segment<4>(4 * row).noalias() = f.block(f.diagonal(row)) * sum;
  }
}

}  // namespace falcate::solver
