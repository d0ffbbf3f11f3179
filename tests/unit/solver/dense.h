// Helpers of the linear-algebra tests: random block matrices and their dense twins.
#pragma once
#include <Eigen/Dense>
#include <algorithm>
#include <cstdlib>
#include <random>

#include "solver/block_matrix.h"

namespace falcate::solver {

using Pattern = std::vector<std::vector<int>>;

inline Pattern tridiagonal(int n) {
  Pattern p;
  for (int i = 0; i < n; ++i) {
    p.emplace_back();
    for (int j = std::max(0, i - 1); j <= std::min(n - 1, i + 1); ++j) p.back().push_back(j);
  }
  return p;
}

/// The five-point star on a square of side^2 cells.
inline Pattern star(int side) {
  Pattern p;
  for (int i = 0; i < side * side; ++i) {
    p.emplace_back();
    for (int j = 0; j < side * side; ++j)
      if (std::abs(i / side - j / side) + std::abs(i % side - j % side) <= 1) p.back().push_back(j);
  }
  return p;
}

/// About four columns a row at random places, the diagonal among them.
inline Pattern scattered(int n) {
  std::mt19937 dice(1);
  Pattern p;
  for (int i = 0; i < n; ++i) {
    p.emplace_back();
    for (int j = 0; j < n; ++j)
      if (j == i || dice() % static_cast<unsigned>(n) < 3) p.back().push_back(j);
  }
  return p;
}

/// Entries between -1 and 1; `extra` is added to the diagonal.
inline BlockMatrix random_matrix(const Pattern& pattern, unsigned seed, double extra) {
  std::mt19937 dice(seed);
  std::uniform_real_distribution<double> part(-1.0, 1.0);
  BlockMatrix m(pattern);
  for (std::size_t k = 0; k < m.block_count(); ++k)
    for (float& entry : m.block(k).reshaped()) entry = static_cast<float>(part(dice));
  for (int row = 0; row < m.rows(); ++row)
    m.block(m.diagonal(row)) += static_cast<float>(extra) * Block::Identity();
  return m;
}

inline Vector random_vector(const BlockMatrix& m, unsigned seed) {
  std::mt19937 dice(seed);
  std::uniform_real_distribution<double> part(-1.0, 1.0);
  Vector v(4 * m.rows());
  for (double& entry : v) entry = part(dice);
  return v;
}

inline Eigen::MatrixXd dense(const BlockMatrix& m) {
  Eigen::MatrixXd out = Eigen::MatrixXd::Zero(4 * m.rows(), 4 * m.rows());
  for (int row = 0; row < m.rows(); ++row)
    for (std::size_t k = m.begin(row); k < m.end(row); ++k)
      out.block<4, 4>(4 * row, 4 * m.column(k)) = m.block(k).cast<double>();
  return out;
}

}  // namespace falcate::solver
