#include "solver/incomplete_lu.h"

#include <Eigen/LU>
#include <algorithm>
#include <map>

#include "solver/block_sum.h"

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

/// Entries of the term on the places of the factors.
void IncompleteLu::add(const WeightedMatrix& term) {
  const BlockMatrix& matrix = *term.matrix;
  BlockMatrix& f = factors_;
  for (int row = 0; row < f.rows(); ++row) {
    std::size_t k = matrix.begin(rows_.first + row);
    const std::size_t last = matrix.end(rows_.first + row);
    for (std::size_t place = f.begin(row); place < f.end(row); ++place) {
      const int column = rows_.first + f.column(place);
      while (k < last && matrix.column(k) < column) ++k;
      if (k < last && matrix.column(k) == column) f.block(place) += term.weight * matrix.block(k);
    }
  }
}

void IncompleteLu::factor(const BlockMatrix& matrix) {
  const WeightedMatrix whole{&matrix, 1.0f};
  factor({&whole, 1});
}

void IncompleteLu::factor(std::span<const WeightedMatrix> sum) {
  BlockMatrix& f = factors_;
  f.set_zero();
  for (const WeightedMatrix& term : sum) add(term);
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
    BlockSum sum;
    for (std::size_t k = f.begin(row); k < f.diagonal(row); ++k)
      sum.add(f.block(k), x.data() + 4 * f.column(k));
    x.segment<4>(4 * row) = b.segment<4>(4 * row) - sum.total();
  }
  for (int row = f.rows() - 1; row >= 0; --row) {
    BlockSum sum;
    for (std::size_t k = f.diagonal(row) + 1; k < f.end(row); ++k)
      sum.add(f.block(k), x.data() + 4 * f.column(k));
    const Eigen::Vector4f rest = x.segment<4>(4 * row) - sum.total();
    x.segment<4>(4 * row).noalias() = f.block(f.diagonal(row)) * rest;
  }
}

}  // namespace falcate::solver
