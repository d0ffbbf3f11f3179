#include "solver/scaled_problem.h"

#include <gtest/gtest.h>

#include <cmath>

#include "mesh/structured.h"

namespace falcate::solver {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double gamma = 1.4;

class RefreshedPlanes : public testing::Test {
 protected:
  RefreshedPlanes()
      : mesh_(mesh::PassageMesh::build(mesh::structured(
            4, 6, mesh::CellKind::quads,
            [](double xi, double eta) { return Point(0.03 * xi, 0.02 * eta); },
            {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, 0.02))) {
    problem_.mesh = &mesh_;
    problem_.gas = {gamma, 287.0};
    problem_.inlet = {3e5, 290.0, 1.0, {}};
    problem_.exit_pressure = 2e5;
    scaled_ = scale(problem_);
  }
  std::vector<State<double>> cells(const State<double>& q) const {
    return std::vector<State<double>>(static_cast<std::size_t>(mesh_.cell_count()), q);
  }
  mesh::PassageMesh mesh_;
  FlowProblem problem_;
  ScaledProblem scaled_;
};

// Speed of sound 1 in both streams: velocities are Mach numbers.
const State<double> slow{1.0, 0.3, 0.4, 1.0 / gamma}, fast{2.0, 0.5, 0.2, 2.0 / gamma};

TEST_F(RefreshedPlanes, TakeTheMeanOfTheirCells) {
  refresh_planes(scaled_, cells(slow));
  EXPECT_NEAR(scaled_.inlet.u, 0.3, 1e-14);
  EXPECT_NEAR(scaled_.inlet.v, 0.4, 1e-14);
  EXPECT_NEAR(scaled_.inlet.impedance, 1.0, 1e-14);
  EXPECT_NEAR(scaled_.inlet.beta, std::sqrt(0.75), 1e-14);
  EXPECT_NEAR(scaled_.outlet.mach_squared, 0.25, 1e-14);
}

TEST_F(RefreshedPlanes, GoAShareOfTheWay) {
  refresh_planes(scaled_, cells(slow));
  refresh_planes(scaled_, cells(fast), 0.1);
  EXPECT_NEAR(scaled_.outlet.u, 0.32, 1e-14);
  EXPECT_NEAR(scaled_.outlet.v, 0.38, 1e-14);
  EXPECT_NEAR(scaled_.outlet.impedance, 1.1, 1e-14);
  EXPECT_NEAR(scaled_.outlet.mach_squared, 0.25 + 0.1 * (0.29 - 0.25), 1e-14);
  EXPECT_NEAR(scaled_.inlet.u, 0.32, 1e-14);
  EXPECT_NEAR(scaled_.inlet.beta, std::sqrt(0.75) + 0.1 * (std::sqrt(0.71) - std::sqrt(0.75)),
              1e-14);
}

// Pressure behind a shock along the plane: p (1 + 2 gamma/(gamma+1) (M^2 - 1)) with the axial Mach
// number M (NACA Report 1135, eq. 93). Below it the shock is swept away, above it runs into the
// row.
TEST_F(RefreshedPlanes, LetAllOutWhereTheSetPressureIsBelowThatBehindAShock) {
  const double p = 0.2, mach = 1.4, tangential = -0.9;
  const State<double> leaving{gamma * p, mach, tangential, p};
  const double behind = p * (1.0 + 2.0 * gamma / (gamma + 1.0) * (mach * mach - 1.0));
  for (const double set : {0.5 * p, 1.5 * p, 0.999 * behind, 1.001 * behind, 2.0 * behind}) {
    scaled_.outlet.pressure = set;
    refresh_planes(scaled_, cells(leaving));
    EXPECT_NEAR(scaled_.outlet.pressure_behind_shock, behind, 1e-12);
    EXPECT_EQ(scaled_.outlet.axially_supersonic, set < behind) << set / p;
  }
  scaled_.outlet.pressure = 0.5 * p;
  refresh_planes(scaled_, cells({gamma * p, 0.95, tangential, p}));
  EXPECT_FALSE(scaled_.outlet.axially_supersonic);
}

}  // namespace
}  // namespace falcate::solver
