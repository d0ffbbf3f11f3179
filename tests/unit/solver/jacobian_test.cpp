// Products of the Jacobian against the residual's own derivative, taken by running the residual
// itself on dual numbers: two independent ways through the chain rule, equal to round-off.
#include "solver/jacobian.h"

#include <gtest/gtest.h>

#include "tests/unit/solver/stirred_flow.h"

namespace falcate::solver {
namespace {

class JacobianOf : public testing::TestWithParam<Setting> {};

struct Linearised {
  StirredFlow flow;
  Jacobian jacobian;
  explicit Linearised(const Setting& s) : flow(s), jacobian(flow.residual) {
    jacobian.linearise(flow.cells);
  }
};

TEST_P(JacobianOf, EqualsTheDerivativeOfTheResidual) {
  const Linearised at(GetParam());
  const auto& cells = at.flow.cells;
  std::mt19937 random(11);
  std::uniform_real_distribution<double> part(-1.0, 1.0);
  std::vector<State<Dual<1>>> dual(cells.size()), fluxes, sums(cells.size());
  Vector direction(4 * static_cast<Eigen::Index>(cells.size()));
  for (std::size_t i = 0; i < cells.size(); ++i)
    for (std::size_t k = 0; k < 4; ++k) {
      dual[i][k] = Dual<1>(cells[i][k]);
      dual[i][k].derivative[0] = part(random);
      direction(static_cast<Eigen::Index>(4 * i + k)) = dual[i][k].derivative[0];
    }
  at.flow.residual.evaluate<Dual<1>>(dual, fluxes, sums);
  Vector product;
  at.jacobian.multiply(direction, product);
  for (std::size_t i = 0; i < cells.size(); ++i)
    for (std::size_t k = 0; k < 4; ++k)
      ASSERT_NEAR(product(static_cast<Eigen::Index>(4 * i + k)), sums[i][k].derivative[0],
                  1e-12 * product.lpNorm<Eigen::Infinity>())
          << "cell " << i << " equation " << k;
}

// y.(J x) = x.(J^T y) for all x and y: the definition of the transpose.
TEST_P(JacobianOf, HasItsTranspose) {
  const Linearised at(GetParam());
  std::srand(5);
  for (int trial = 0; trial < 3; ++trial) {
    const Vector x = Vector::Random(4 * static_cast<Eigen::Index>(at.flow.cells.size()));
    const Vector y = Vector::Random(x.size());
    Vector forward, backward;
    at.jacobian.multiply(x, forward);
    at.jacobian.multiply_transposed(y, backward);
    EXPECT_NEAR(y.dot(forward), x.dot(backward), 1e-12 * forward.norm() * y.norm());
  }
}

INSTANTIATE_TEST_SUITE_P(Settings, JacobianOf, testing::ValuesIn(settings),
                         [](const auto& info) { return std::string(info.param.name); });

}  // namespace
}  // namespace falcate::solver
