// The multigrid cycle and its smoother against Eigen's dense LU.
#include "solver/multigrid.h"

#include <gtest/gtest.h>
#include <omp.h>

#include <map>

#include "tests/unit/solver/dense.h"

namespace falcate::solver {
namespace {

/// First-order upwind transport with diffusion on a square with given values around it, four
/// equations alike: the kind of matrix the cycle is made for.
BlockMatrix transport(int side) {
  BlockMatrix m(star(side));
  const auto couple = [&](int row, bool inside, int column, float rate) {
    if (inside) m.block(m.place(row, column)) -= rate * Block::Identity();
    m.block(m.diagonal(row)) += rate * Block::Identity();
  };
  for (int i = 0; i < side * side; ++i) {
    couple(i, i % side > 0, i - 1, 1.2f);
    couple(i, i % side < side - 1, i + 1, 0.2f);
    couple(i, i / side > 0, i - side, 0.7f);
    couple(i, i / side < side - 1, i + side, 0.2f);
  }
  return m;
}

double reduction(const BlockMatrix& m, const MultigridOptions& options) {
  Multigrid multigrid(m, options);
  multigrid.factor();
  const SingleVector b = random_vector(m, 3).cast<float>();
  SingleVector x;
  multigrid.solve(b, x);
  return (b.cast<double>() - dense(m) * x.cast<double>()).norm() / b.norm();
}

TEST(Agglomeration, JoinsNeighboursByAboutFour) {
  const BlockMatrix m(star(20));
  const Agglomeration joined(m);
  std::map<int, std::vector<int>> members;
  for (int i = 0; i < m.rows(); ++i) members[joined.group(i)].push_back(i);
  EXPECT_LT(members.size(), 160u);
  EXPECT_GE(members.size(), 100u);
  EXPECT_EQ(members.begin()->first, 0);
  EXPECT_EQ(members.rbegin()->first, static_cast<int>(members.size()) - 1);
  for (const auto& [name, list] : members) {
    EXPECT_LE(list.size(), 4u);
    for (const int cell : list) {
      const bool linked = list.size() == 1 || std::any_of(list.begin(), list.end(), [&](int other) {
                            return std::abs(cell - other) == 1 || std::abs(cell - other) == 20;
                          });
      EXPECT_TRUE(linked) << "cell " << cell << " of group " << name;
    }
  }
}

TEST(Multigrid, IsExactWhereTheFinestLevelIsSolvedDirectly) {
  EXPECT_LT(reduction(random_matrix(star(5), 4, 6.0), {.coarsest = 40}), 1e-5);
}

// A cycle whose quality does not fall with the size is what multigrid is for (Trottenberg et al.
// 2001, ch. 1); a single level loses it.
TEST(Multigrid, ReducesAlikeOnEveryMesh) {
  for (const int side : {10, 20, 30}) {
    EXPECT_LT(reduction(transport(side), {}), 0.15) << side;
  }
}

TEST(Multigrid, BeatsItsSmootherAlone) {
  const auto m = transport(30);
  SchwarzSmoother smoother(m, 1, 10000);
  smoother.factor(m);
  const SingleVector b = random_vector(m, 3).cast<float>();
  SingleVector x;
  smoother.solve(b, x);
  const double alone = (b.cast<double>() - dense(m) * x.cast<double>()).norm() / b.norm();
  EXPECT_LT(reduction(m, {}), 0.5 * alone);
}

TEST(Multigrid, GivesTheSameBitsOnEveryNumberOfThreads) {
  const auto m = transport(30);
  const SingleVector b = random_vector(m, 3).cast<float>();
  const int before = omp_get_max_threads();
  std::vector<SingleVector> x(2);
  for (const int threads : {1, 2}) {
    omp_set_num_threads(threads);
    Multigrid multigrid(m, {.rows_a_run = 200});
    multigrid.factor();
    multigrid.solve(b, x[static_cast<std::size_t>(threads - 1)]);
  }
  omp_set_num_threads(before);
  EXPECT_EQ(x[0], x[1]);
}

TEST(SchwarzSmoother, LosesLittleByRuns) {
  const auto m = transport(30);
  EXPECT_LT(reduction(m, {.rows_a_run = 200}), 0.1);
}

}  // namespace
}  // namespace falcate::solver
