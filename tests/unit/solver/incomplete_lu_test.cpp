// Incomplete factors against Eigen's dense LU: complete, hence exact to single precision, where no
// fill is dropped.
#include "solver/incomplete_lu.h"

#include <gtest/gtest.h>

#include "tests/unit/solver/dense.h"

namespace falcate::solver {
namespace {

/// Relative distance from the answer of the dense LU.
double distance(const BlockMatrix& m, int level) {
  IncompleteLu lu(m, level);
  lu.factor(m);
  const Vector b = random_vector(m, 3);
  SingleVector x;
  lu.solve(b.cast<float>(), x);
  const Vector exact = dense(m).partialPivLu().solve(b);
  return (x.cast<double>() - exact).norm() / exact.norm();
}

TEST(IncompleteLu, IsExactForABlockTridiagonalMatrix) {
  EXPECT_LT(distance(random_matrix(tridiagonal(50), 2, 6.0), 0), 2e-6);
}

TEST(IncompleteLu, IsExactForABlockDiagonalMatrix) {
  EXPECT_LT(distance(random_matrix({{0}, {1}, {2}}, 2, 6.0), 0), 1e-6);
}

TEST(IncompleteLu, IsExactWhereEveryFillIsKept) {
  EXPECT_LT(distance(random_matrix(star(6), 4, 9.0), 36), 2e-6);
  EXPECT_LT(distance(random_matrix(scattered(25), 4, 9.0), 25), 2e-6);
}

TEST(IncompleteLu, ComesNearerWithEachLevelOfFill) {
  const auto m = random_matrix(star(8), 4, 7.0);
  double last = 1.0;
  for (const int level : {0, 1, 2, 3}) {
    const double now = distance(m, level);
    EXPECT_GT(now, 1e-6) << "level " << level;
    EXPECT_LT(now, 0.9 * last) << "level " << level;
    last = now;
  }
}

// Without fill the product LU has the matrix's own entries on its pattern (Saad 2003, prop. 10.4).
// A matrix whose dropped fill is zero is therefore solved exactly: here the arrow whose tip is
// last.
TEST(IncompleteLu, NeedsNoFillForAnArrowThatEndsInItsTip) {
  const Pattern arrow = {{0, 4}, {1, 4}, {2, 4}, {3, 4}, {0, 1, 2, 3, 4}};
  EXPECT_LT(distance(random_matrix(arrow, 9, 6.0), 0), 1e-6);
}

TEST(IncompleteLu, FactorsAnewForNewEntries) {
  auto m = random_matrix(tridiagonal(12), 2, 6.0);
  IncompleteLu lu(m, 0);
  lu.factor(m);
  m = random_matrix(tridiagonal(12), 31, 6.0);
  lu.factor(m);
  const Vector b = random_vector(m, 3);
  SingleVector x;
  lu.solve(b.cast<float>(), x);
  EXPECT_LT((dense(m) * x.cast<double>() - b).norm(), 1e-5 * b.norm());
}

TEST(IncompleteLu, TakesAPartOfTheRowsAsAMatrixOfItsOwn) {
  const auto m = random_matrix(tridiagonal(12), 2, 6.0);
  IncompleteLu part(m, 0, {3, 8});
  part.factor(m);
  const Vector b = random_vector(m, 3).segment(12, 20);
  SingleVector x;
  part.solve(b.cast<float>(), x);
  const Vector exact = dense(m).block(12, 12, 20, 20).partialPivLu().solve(b);
  EXPECT_LT((x.cast<double>() - exact).norm(), 2e-6 * exact.norm());
}

TEST(IncompleteLu, ShowsASingularPivotAsNonFinite) {
  BlockMatrix m({{0}, {1}});
  m.block(0) = Block::Identity();
  IncompleteLu lu(m, 0);
  lu.factor(m);
  SingleVector x;
  lu.solve(SingleVector::Ones(8), x);
  EXPECT_TRUE(x.head<4>().allFinite());
  EXPECT_FALSE(x.tail<4>().allFinite());
}

}  // namespace
}  // namespace falcate::solver
