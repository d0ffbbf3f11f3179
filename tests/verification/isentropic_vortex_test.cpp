// The isentropic vortex in the frame that travels with it, where it is steady, exact: Shu,
// NASA/CR-97- 206253 (1997); Yee, Sandham & Djomehri, J. Comput. Phys. 150 (1999) 199-238. The
// total enthalpy differs from streamline to streamline. Where streamlines are closed nothing but
// the scheme's own dissipation would settle their entropy, so the square lies beside the centre,
// and the exact state is given all round it: each streamline comes in from outside.
#include "tests/verification/exact_flow.h"

namespace falcate::verification {
namespace {

constexpr double gamma = 1.4, strength = 5.0;

/// Speed of sound and density far away 1.
solver::Primitive vortex(const mesh::Point& x) {
  const double pi = std::acos(-1.0), r2 = x.squaredNorm();
  const double temperature =
      1.0 - (gamma - 1.0) * strength * strength / (8.0 * gamma * pi * pi) * std::exp(1.0 - r2);
  const double turn = strength / (2.0 * pi) * std::exp(0.5 * (1.0 - r2)) / std::sqrt(gamma);
  const double rho = std::pow(temperature, 1.0 / (gamma - 1.0));
  return {rho, -turn * x.y(), turn * x.x(), rho * temperature / gamma};
}

mesh::PassageMesh square(int n, const OrderCase& c) {
  using mesh::PatchKind;
  const auto map = [](double xi, double eta) {
    return mesh::Point(0.2 + 1.6 * xi, -0.8 + 1.6 * eta);
  };
  return mesh::PassageMesh::build(mesh::structured(
      n, n, c.cells, map,
      {PatchKind::prescribed, PatchKind::prescribed, PatchKind::prescribed, PatchKind::prescribed},
      0.0, c.perturbation * 8.0 / n));
}

class IsentropicVortex : public testing::TestWithParam<OrderCase> {};

TEST_P(IsentropicVortex, ErrorsFallAtSecondOrder) {
  std::vector<double> entropy, pressure;
  for (const int n : {8, 16, 32}) {
    const auto e = solved_errors(square(n, GetParam()), gamma, vortex);
    entropy.push_back(e.entropy);
    pressure.push_back(e.pressure);
    std::printf("%2d cells across: entropy %.3e pressure %.3e\n", n, e.entropy, e.pressure);
  }
  EXPECT_GT(observed_order(entropy), 1.9);
  EXPECT_GT(observed_order(pressure), 1.9);
}

INSTANTIATE_TEST_SUITE_P(Cells, IsentropicVortex, testing::ValuesIn(order_cases),
                         [](const auto& info) { return std::string(info.param.name); });

// Values of the published formula (pressure over density^gamma 1, as printed there).
TEST(IsentropicVortexFormula, MatchesTheTable) {
  const auto centre = vortex({0.0, 0.0});
  EXPECT_NEAR(centre.density, 0.493807, 1e-6);
  EXPECT_NEAR(centre.pressure * gamma, 0.372375, 1e-6);
  EXPECT_NEAR(vortex({1.0, 0.0}).v * std::sqrt(gamma), 0.795775, 1e-6);
}

}  // namespace
}  // namespace falcate::verification
