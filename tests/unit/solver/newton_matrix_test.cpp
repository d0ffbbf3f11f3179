// The assembled matrix of a Newton step against the derivative applied face by face, which
// jacobian_test.cpp holds against dual numbers run through the residual.
#include "solver/newton_matrix.h"

#include <gtest/gtest.h>
#include <omp.h>

#include "solver/jacobian.h"
#include "tests/unit/solver/stirred_flow.h"

namespace falcate::solver {
namespace {

class NewtonMatrixOf : public testing::TestWithParam<Setting> {};

SingleVector random_direction(const StirredFlow& flow) {
  std::srand(3);
  return SingleVector::Random(4 * static_cast<Eigen::Index>(flow.cells.size()));
}

TEST_P(NewtonMatrixOf, EqualsTheExactDerivativeToSinglePrecision) {
  const StirredFlow flow(GetParam());
  NewtonMatrix matrix(flow.residual);
  Jacobian jacobian(flow.residual);
  // The second time on the same memory, as in the steps of a march.
  for (int time = 0; time < 2; ++time) matrix.assemble(flow.cells);
  jacobian.linearise(flow.cells);
  const SingleVector x = random_direction(flow);
  SingleVector y;
  Vector exact;
  matrix.multiply(x, y);
  jacobian.multiply(x.cast<double>(), exact);
  EXPECT_LT((y.cast<double>() - exact).lpNorm<Eigen::Infinity>(),
            2e-6 * exact.lpNorm<Eigen::Infinity>());
}

TEST_P(NewtonMatrixOf, AddsARateTimesTheDerivativeOfTheConservedVariables) {
  const StirredFlow flow(GetParam());
  NewtonMatrix matrix(flow.residual);
  matrix.assemble(flow.cells);
  const SingleVector x = random_direction(flow);
  SingleVector before, after;
  matrix.multiply(x, before);
  std::vector<double> rates(flow.cells.size());
  for (std::size_t i = 0; i < rates.size(); ++i) rates[i] = 0.01 * static_cast<double>(i);
  matrix.add_rates(rates);
  matrix.multiply(x, after);
  for (std::size_t i = 0; i < rates.size(); ++i) {
    State<Dual<1>> q;
    for (std::size_t k = 0; k < 4; ++k) {
      q[k] = Dual<1>(flow.cells[i][k]);
      q[k].derivative[0] = x(static_cast<Eigen::Index>(4 * i + k));
    }
    const auto change = conserved(q, flow.scaled.gamma);
    for (std::size_t k = 0; k < 4; ++k) {
      const auto at = static_cast<Eigen::Index>(4 * i + k);
      EXPECT_NEAR(after(at) - before(at), rates[i] * change[k].derivative[0], 2e-5);
    }
  }
}

// A uniform change of a uniform stream changes no flux difference inside; the compact matrix keeps
// this because its rows are those of a conservative scheme.
TEST_P(NewtonMatrixOf, CompactRowsAnswerUniformChangesAsTheWideOnes) {
  const StirredFlow flow(GetParam());
  std::vector<State<double>> uniform(flow.cells.size(), flow.cells.front());
  NewtonMatrix matrix(flow.residual);
  matrix.assemble(uniform);
  SingleVector x = SingleVector::Zero(4 * static_cast<Eigen::Index>(uniform.size())), wide, compact;
  for (Eigen::Index k = 0; k < 4; ++k) {
    x.setZero();
    for (Eigen::Index i = k; i < x.size(); i += 4) x(i) = 1.0f;
    matrix.wide().multiply(x, wide);
    matrix.compact().multiply(x, compact);
    EXPECT_LT((wide - compact).lpNorm<Eigen::Infinity>(), 2e-5f) << "variable " << k;
  }
}

TEST(NewtonMatrix, GivesTheSameBitsOnEveryNumberOfThreads) {
  const StirredFlow flow(settings[1]);
  const SingleVector x = random_direction(flow);
  const int before = omp_get_max_threads();
  std::vector<SingleVector> y(2);
  for (const int threads : {1, 2}) {
    omp_set_num_threads(threads);
    NewtonMatrix matrix(flow.residual);
    matrix.assemble(flow.cells);
    matrix.multiply(x, y[static_cast<std::size_t>(threads - 1)]);
  }
  omp_set_num_threads(before);
  EXPECT_EQ(y[0], y[1]);
}

INSTANTIATE_TEST_SUITE_P(Settings, NewtonMatrixOf, testing::ValuesIn(settings),
                         [](const auto& info) { return std::string(info.param.name); });

}  // namespace
}  // namespace falcate::solver
