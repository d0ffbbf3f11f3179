// The block matrix against Eigen's dense product.
#include "solver/block_matrix.h"

#include <gtest/gtest.h>
#include <omp.h>

#include "tests/unit/solver/dense.h"

namespace falcate::solver {
namespace {

TEST(BlockMatrix, HoldsItsPattern) {
  const BlockMatrix m({{0, 2}, {0, 1, 2}, {2}});
  EXPECT_EQ(m.rows(), 3);
  EXPECT_EQ(m.block_count(), 6u);
  EXPECT_EQ(m.end(1) - m.begin(1), 3u);
  EXPECT_EQ(m.column(m.begin(0) + 1), 2);
  for (int row = 0; row < 3; ++row) {
    EXPECT_EQ(m.column(m.diagonal(row)), row);
    EXPECT_EQ(m.place(row, row), m.diagonal(row));
  }
  EXPECT_EQ(m.place(0, 2), m.begin(0) + 1);
}

TEST(BlockMatrix, StartsAndEndsAtZero) {
  BlockMatrix m({{0, 1}, {1}});
  EXPECT_EQ(m.block(0), Block::Zero());
  m.block(1) = Block::Identity();
  m.set_zero();
  EXPECT_EQ(m.block(1), Block::Zero());
}

TEST(BlockMatrix, MultipliesLikeADenseMatrix) {
  const auto m = random_matrix(scattered(40), 5, 1.0);
  const Vector x = random_vector(m, 6), b = random_vector(m, 9);
  SingleVector r;
  m.residual(b.cast<float>(), x.cast<float>(), r);
  const Vector exact = b - dense(m) * x;
  EXPECT_LT((r.cast<double>() - exact).norm(), 1e-6 * exact.norm());
}

TEST(BlockMatrix, MultipliesToTheSameBitsOnEveryNumberOfThreads) {
  const auto m = random_matrix(scattered(300), 7, 1.0);
  const SingleVector x = random_vector(m, 8).cast<float>();
  const int before = omp_get_max_threads();
  std::vector<SingleVector> r(3);
  for (const int threads : {1, 2, 3}) {
    omp_set_num_threads(threads);
    m.residual(x, x, r[static_cast<std::size_t>(threads - 1)]);
  }
  omp_set_num_threads(before);
  EXPECT_EQ(r[0], r[1]);
  EXPECT_EQ(r[0], r[2]);
}

}  // namespace
}  // namespace falcate::solver
