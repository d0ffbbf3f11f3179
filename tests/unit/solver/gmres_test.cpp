// GMRES against Eigen's dense LU, and its summary against the residual measured outside.
#include "solver/gmres.h"

#include <gtest/gtest.h>

#include "solver/incomplete_lu.h"
#include "tests/unit/solver/dense.h"

namespace falcate::solver {
namespace {

/// With the memory for `restart` directions.
GmresSummary gmres(const LinearMap& multiply, const LinearMap& precondition, const SingleVector& b,
                   SingleVector& x, const GmresOptions& options, int restart) {
  return Gmres(b.size(), restart).solve(multiply, precondition, b, x, options);
}

const LinearMap nothing = [](const SingleVector& x, SingleVector& y) { y = x; };

struct System {
  BlockMatrix matrix;
  Eigen::MatrixXd full;
  SingleVector b;
  explicit System(const Pattern& pattern, double extra = 6.0)
      : matrix(random_matrix(pattern, 5, extra)),
        full(dense(matrix)),
        b(random_vector(matrix, 6).cast<float>()) {}
  LinearMap product() const {
    return [this](const SingleVector& x, SingleVector& y) {
      y = (full * x.cast<double>()).cast<float>();
    };
  }
  double reduction(const SingleVector& x) const {
    return (b.cast<double>() - full * x.cast<double>()).norm() / b.cast<double>().norm();
  }
  SingleVector exact() const { return full.partialPivLu().solve(b.cast<double>()).cast<float>(); }
};

TEST(Gmres, FindsTheAnswerOfTheDenseLu) {
  const System s(star(6));
  SingleVector x = SingleVector::Zero(s.b.size());
  const auto summary = gmres(s.product(), nothing, s.b, x, {1e-5, 400}, 200);
  EXPECT_TRUE(summary.converged);
  EXPECT_LE(summary.reduction, 1e-5);
  EXPECT_LT((x - s.exact()).norm(), 1e-5f * x.norm());
}

TEST(Gmres, SaysTheReductionItReached) {
  const System s(star(6));
  for (const double tolerance : {1e-1, 1e-3, 1e-5}) {
    SingleVector x = SingleVector::Zero(s.b.size());
    const auto summary = gmres(s.product(), nothing, s.b, x, {tolerance, 400}, 60);
    EXPECT_TRUE(summary.converged);
    EXPECT_LE(summary.reduction, tolerance);
    EXPECT_NEAR(summary.reduction, s.reduction(x), 2e-7);
    EXPECT_GT(summary.iterations, 0);
  }
}

// In exact arithmetic as many steps as unknowns suffice (Saad & Schultz 1986, sec. 3.4).
TEST(Gmres, EndsWithinAsManyStepsAsUnknowns) {
  const System s(tridiagonal(3), 2.0);
  SingleVector x = SingleVector::Zero(12);
  const auto summary = gmres(s.product(), nothing, s.b, x, {1e-5, 100}, 100);
  EXPECT_TRUE(summary.converged);
  EXPECT_LE(summary.iterations, 12);
}

TEST(Gmres, TakesOneStepWithTheInverseAsPreconditioner) {
  const System s(star(4));
  const Eigen::PartialPivLU<Eigen::MatrixXd> lu(dense(s.matrix));
  SingleVector x = SingleVector::Zero(s.b.size());
  const auto summary = gmres(
      s.product(),
      [&](const SingleVector& r, SingleVector& y) { y = lu.solve(r.cast<double>()).cast<float>(); },
      s.b, x, {1e-5, 50}, 50);
  EXPECT_TRUE(summary.converged);
  EXPECT_EQ(summary.iterations, 1);
}

TEST(Gmres, NeedsFewerStepsWithIncompleteFactors) {
  const System s(star(12), 5.0);
  IncompleteLu lu(s.matrix, 1);
  lu.factor(s.matrix);
  SingleVector plain = SingleVector::Zero(s.b.size()), helped = plain;
  const auto slow = gmres(s.product(), nothing, s.b, plain, {1e-5, 500}, 500);
  const auto fast = gmres(
      s.product(), [&](const SingleVector& r, SingleVector& y) { lu.solve(r, y); }, s.b, helped,
      {1e-5, 500}, 500);
  ASSERT_TRUE(slow.converged && fast.converged);
  EXPECT_LT(2 * fast.iterations, slow.iterations);
  EXPECT_LT((plain - helped).norm(), 1e-3f * plain.norm());
}

TEST(Gmres, StopsAtTheLimitAndSaysSo) {
  const System s(star(6));
  SingleVector x = SingleVector::Zero(s.b.size());
  const auto summary = gmres(s.product(), nothing, s.b, x, {1e-14, 7}, 3);
  EXPECT_FALSE(summary.converged);
  EXPECT_EQ(summary.iterations, 7);
  EXPECT_GT(summary.reduction, 1e-14);
  EXPECT_LT(summary.reduction, 1.0);
  EXPECT_NEAR(summary.reduction, s.reduction(x), 2e-7);
}

TEST(Gmres, GoesOnAfterARestart) {
  const System s(star(6));
  SingleVector x = SingleVector::Zero(s.b.size());
  const auto summary = gmres(s.product(), nothing, s.b, x, {1e-5, 2000}, 5);
  EXPECT_TRUE(summary.converged);
  EXPECT_GT(summary.iterations, 5);
  EXPECT_LT((x - s.exact()).norm(), 1e-4f * x.norm());
}

TEST(Gmres, StartsFromTheGuess) {
  const System s(star(4));
  SingleVector x = s.exact();
  const SingleVector before = x;
  const auto summary = gmres(s.product(), nothing, s.b, x, {1e-5, 50}, 50);
  EXPECT_TRUE(summary.converged);
  EXPECT_EQ(summary.iterations, 0);
  EXPECT_EQ(x, before);
}

TEST(Gmres, AnswersZeroForZero) {
  const System s(tridiagonal(3));
  SingleVector x = SingleVector::Ones(12);
  const auto summary = gmres(s.product(), nothing, SingleVector::Zero(12), x, {}, 10);
  EXPECT_TRUE(summary.converged);
  EXPECT_EQ(summary.iterations, 0);
  EXPECT_EQ(summary.reduction, 0.0);
  EXPECT_EQ(x, SingleVector::Zero(12));
}

TEST(Gmres, GivesUpOnWhatIsNotFinite) {
  SingleVector x = SingleVector::Zero(4);
  const auto summary = gmres([](const SingleVector& v, SingleVector& y) { y = v * std::nanf(""); },
                             nothing, SingleVector::Ones(4), x, {1e-6, 50}, 50);
  EXPECT_FALSE(summary.converged);
  EXPECT_LE(summary.iterations, 1);
}

}  // namespace
}  // namespace falcate::solver
