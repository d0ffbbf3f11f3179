// Shock-free supersonic vortex between circular walls, exact: Aftosmis, Gaitonde & Tavares,
// AIAA 94-0415 (1994); inner radius 1, outer 1.384, Mach 2.25 at the inner wall.
#include "tests/verification/exact_flow.h"

namespace falcate::verification {
namespace {

constexpr double gamma = 1.4, inner = 1.0, outer = 1.384, inner_mach = 2.25;

/// Clockwise vortex in units of the total state.
solver::Primitive vortex(const mesh::Point& x) {
  const double r = x.norm();
  // Speed of sound at rest 1: a_i from the energy equation at the inner wall.
  const double ai = 1.0 / std::sqrt(1.0 + 0.5 * (gamma - 1.0) * inner_mach * inner_mach);
  const double w = ai * inner_mach * inner / r;
  const double a2 = 1.0 - 0.5 * (gamma - 1.0) * w * w;
  const double rho = std::pow(a2, 1.0 / (gamma - 1.0));
  return {rho, w * x.y() / r, -w * x.x() / r, rho * a2 / gamma};
}

mesh::PassageMesh quarter_ring(int n, const OrderCase& c) {
  using mesh::PatchKind;
  const auto map = [](double xi, double eta) {
    const double r = inner + (outer - inner) * eta, angle = std::acos(0.0) * (1.0 - xi);
    return mesh::Point(r * std::cos(angle), r * std::sin(angle));
  };
  return mesh::PassageMesh::build(mesh::structured(
      4 * n, n, c.cells, map,
      {PatchKind::wall, PatchKind::prescribed, PatchKind::wall, PatchKind::prescribed}, 0.0,
      c.perturbation * 6.0 / n));
}

class SupersonicVortex : public testing::TestWithParam<OrderCase> {};

TEST_P(SupersonicVortex, ErrorsFallAtSecondOrder) {
  std::vector<double> entropy, pressure;
  for (const int n : {6, 12, 24}) {
    const auto e = solved_errors(quarter_ring(n, GetParam()), gamma, vortex);
    entropy.push_back(e.entropy);
    pressure.push_back(e.pressure);
    std::printf("%2d cells across: entropy %.3e pressure %.3e\n", n, e.entropy, e.pressure);
  }
  EXPECT_GT(observed_order(entropy), 1.9);
  EXPECT_GT(observed_order(pressure), 1.9);
}

INSTANTIATE_TEST_SUITE_P(Cells, SupersonicVortex, testing::ValuesIn(order_cases),
                         [](const auto& info) { return std::string(info.param.name); });

// Values at radii: density, pressure and speed relative to the inner wall, recomputed from the
// published formula (rho_i = a_i = 1).
TEST(SupersonicVortexFormula, MatchesTheTable) {
  const auto at_inner = vortex({0.0, inner});
  const double ai = std::sqrt(gamma * at_inner.pressure / at_inner.density);
  const auto q = vortex({0.0, 1.2});
  EXPECT_NEAR(q.density / at_inner.density, 1.96182431, 1e-8);
  EXPECT_NEAR(q.pressure / (at_inner.density * ai * ai), 1.83483122, 1e-8);
  EXPECT_NEAR(q.u / ai, 1.875, 1e-12);
}

}  // namespace
}  // namespace falcate::verification
