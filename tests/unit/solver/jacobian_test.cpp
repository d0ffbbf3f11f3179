// Products of the Jacobian against the residual's own derivative, taken by running the residual
// itself on dual numbers: two independent ways through the chain rule, equal to round-off.
#include "solver/jacobian.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <random>

#include "mesh/structured.h"

namespace falcate::solver {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double degree = std::numbers::pi / 180.0;

struct Setting {
  const char* name;
  mesh::CellKind cells;
  bool periodic;
  std::array<PatchKind, 4> sides;
  double angle;  ///< deg from the plane of rotation
  double mach;   ///< of the flow
  bool given;    ///< whether the inlet condition states the Mach number
  FluxKind flux;
};

const PatchKind in = PatchKind::inlet, out = PatchKind::outlet, wall = PatchKind::wall,
                fixed = PatchKind::prescribed;

const Setting settings[] = {
    {"subsonic_periodic",
     mesh::CellKind::quads,
     true,
     {wall, out, wall, in},
     50,
     0.4,
     false,
     FluxKind::slau2},
    {"supersonic_periodic",
     mesh::CellKind::mixed,
     true,
     {wall, out, wall, in},
     25,
     2.0,
     true,
     FluxKind::slau2},
    {"downward_periodic",
     mesh::CellKind::quads,
     true,
     {wall, out, wall, in},
     150,
     1.7,
     true,
     FluxKind::hllc},
    {"axially_supersonic",
     mesh::CellKind::quads,
     true,
     {wall, out, wall, in},
     80,
     2.0,
     true,
     FluxKind::roe},
    {"channel",
     mesh::CellKind::triangles,
     false,
     {wall, out, wall, in},
     90,
     0.3,
     false,
     FluxKind::slau2},
    {"prescribed",
     mesh::CellKind::mixed,
     false,
     {fixed, fixed, wall, fixed},
     80,
     0.8,
     false,
     FluxKind::hllc},
};

class JacobianOf : public testing::TestWithParam<Setting> {};

mesh::PassageMesh mesh_of(const Setting& s) {
  const auto map = [](double xi, double eta) {
    return Point(2.0 * xi, 0.8 * eta + 0.1 * std::sin(3.0 * xi));
  };
  return mesh::PassageMesh::build(
      mesh::structured(9, 7, s.cells, map, s.sides, s.periodic ? 0.8 : 0.0, 0.15));
}

FlowProblem problem_of(const Setting& s, const mesh::PassageMesh& mesh) {
  FlowProblem p;
  p.mesh = &mesh;
  p.gas = {1.4, 287.0};
  p.inlet = {2e5, 300.0, s.angle * degree, {}};
  if (s.given) p.inlet.mach = s.mach;
  p.exit_pressure = 2e5 * std::pow(1.0 + 0.2 * s.mach * s.mach, -3.5);
  p.prescribed = [](const Point& x) {
    return Primitive{2.0, 200.0 + 10.0 * x.x(), 30.0, 1.2e5 + 1e3 * x.y()};
  };
  return p;
}

/// The cold start, stirred by a tenth: the limiter and every branch are at work.
std::vector<State<double>> stirred(const FlowProblem& problem, const ScaledProblem& scaled) {
  auto cells = cold_start(problem, scaled);
  std::mt19937 random(7);
  std::uniform_real_distribution<double> part(-0.05, 0.05);
  for (auto& q : cells)
    for (auto& value : q) value *= 1.0 + part(random);
  return cells;
}

/// The residual of a setting and its derivative at the stirred cells.
struct Linearised {
  mesh::PassageMesh mesh;
  FlowProblem problem;
  ScaledProblem scaled;
  std::vector<State<double>> cells;
  Residual residual;
  Jacobian jacobian;

  explicit Linearised(const Setting& s)
      : mesh(mesh_of(s)),
        problem(problem_of(s, mesh)),
        scaled(scale(problem)),
        cells(stirred(problem, scaled)),
        residual(scaled, {s.flux, 2.0}),
        jacobian(residual) {
    refresh_planes(scaled, cells);
    jacobian.linearise(cells);
  }
};

TEST_P(JacobianOf, EqualsTheDerivativeOfTheResidual) {
  const Linearised at(GetParam());
  const auto& cells = at.cells;
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
  at.residual.evaluate<Dual<1>>(dual, fluxes, sums);
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
    const Vector x = Vector::Random(4 * static_cast<Eigen::Index>(at.cells.size()));
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
