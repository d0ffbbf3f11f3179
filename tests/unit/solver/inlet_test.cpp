// The inflow plane of a stream faster than sound with strong waves on it. Source of the conditions:
// conservation of mass, momentum and energy between the plane and the uniform stream far ahead;
// simple waves: NACA Report 1135 (1953).
#include "solver/inlet.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "mesh/structured.h"
#include "solver/scaled_problem.h"

namespace falcate::solver {
namespace {

constexpr double gamma = 1.4, degree = std::numbers::pi / 180.0;

struct Stream {
  const char* name;
  double mach, angle_deg;  ///< from the plane of rotation
};
const Stream streams[] = {{"rising", 1.6, 25}, {"falling", 2.2, 157}};

class InletWithWaves : public testing::TestWithParam<Stream> {
 protected:
  static constexpr int faces = 32;
  static constexpr double pitch = 0.4;

  InletWithWaves() {
    const double mach = GetParam().mach, angle = GetParam().angle_deg * degree;
    stream_.gamma = gamma;
    stream_.regime = InletRegime::simple_wave;
    stream_.cotangent = 1.0 / std::tan(angle);
    stream_.simple_wave = std::abs(std::acos(0.0) - angle) + prandtl_meyer(mach * mach, gamma);
    std::vector<double> centres;
    for (int i = 0; i < faces; ++i) centres.push_back(pitch * (i + 0.5) / faces);
    waves_ = PlaneWaves(std::vector<double>(faces, pitch / faces), centres, pitch);
    for (const double y : centres) cells_.push_back(with_wave(y));
  }

  /// Simple waves of a sawtooth: turned by up to 3 degrees, |theta| + nu as set.
  State<double> with_wave(double y) const {
    const double turn = 6.0 * degree * (y / pitch - 0.5);
    const double side = stream_.cotangent < 0.0 ? -1.0 : 1.0;
    const double theta =
        side * (std::acos(0.0) - GetParam().angle_deg * degree) + turn + 1.0 * degree;
    const auto q =
        unit_stream(mach_squared_from_prandtl_meyer(stream_.simple_wave - theta, gamma), gamma);
    return {q.density, q.speed * std::cos(theta), side * q.speed * std::sin(theta), q.pressure};
  }

  State<double> mixed_out(const std::vector<State<double>>& states) const {
    State<double> sum{};
    for (std::size_t i = 0; i < states.size(); ++i) {
      const auto f = physical_flux(states[i], mesh::Point(1.0, 0.0), gamma);
      for (std::size_t k = 0; k < 4; ++k) sum[k] += f[k] / faces;
    }
    return mixed_out_state(sum, gamma, Branch::subsonic);
  }

  static double mach_squared(const State<double>& q) {
    return (q[1] * q[1] + q[2] * q[2]) * q[0] / (gamma * q[3]);
  }

  InletStream stream_;
  PlaneWaves waves_;
  std::vector<State<double>> cells_;
};

TEST_P(InletWithWaves, TheUniformStreamHasWhatIsSet) {
  std::vector<State<double>> boundary(cells_.size());
  inlet_states<double>(cells_, stream_, waves_, boundary);
  const auto q = mixed_out(boundary);
  const double m2 = mach_squared(q);
  EXPECT_NEAR(q[pressure] * std::pow(1.0 + 0.2 * m2, 3.5), 1.0, 1e-12);
  EXPECT_NEAR(std::abs(std::atan2(q[2], q[1])) + prandtl_meyer(m2, gamma), stream_.simple_wave,
              1e-12);
  for (const auto& face : boundary)
    EXPECT_NEAR(total_enthalpy(face, gamma), gamma / (gamma - 1.0), 1e-12);
}

// The waves of these cells, taken as they are, mix out to another total pressure: the difference
// is what shocks ahead of the plane have taken.
TEST_P(InletWithWaves, LowersTheTotalPressureByTheShocksAhead) {
  const auto as_they_are = mixed_out(cells_);
  const double gain =
      as_they_are[pressure] * std::pow(1.0 + 0.2 * mach_squared(as_they_are), 3.5) - 1.0;
  EXPECT_GT(gain, 5e-4);
  std::vector<State<double>> boundary(cells_.size());
  inlet_states<double>(cells_, stream_, waves_, boundary);
  for (const auto& face : boundary)
    EXPECT_NEAR(face[pressure] * std::pow(1.0 + 0.2 * mach_squared(face), 3.5), 1.0 - gain,
                0.1 * gain);
}

TEST_P(InletWithWaves, LetsTheOutgoingInvariantOut) {
  std::vector<State<double>> boundary(cells_.size());
  inlet_states<double>(cells_, stream_, waves_, boundary);
  for (std::size_t i = 0; i < cells_.size(); ++i)
    EXPECT_NEAR(inlet_detail::outgoing_invariant(boundary[i], stream_),
                inlet_detail::outgoing_invariant(cells_[i], stream_), 1e-12);
}

TEST_P(InletWithWaves, HasExactDerivatives) {
  constexpr double h = 1e-6;
  const auto moved = [&](double step) {
    auto cells = cells_;
    for (std::size_t i = 0; i < cells.size(); ++i)
      cells[i][i % 4] += step * (1.0 + 0.1 * static_cast<double>(i));
    return cells;
  };
  std::vector<State<double>> up(cells_.size()), down(cells_.size());
  inlet_states<double>(moved(h), stream_, waves_, up);
  inlet_states<double>(moved(-h), stream_, waves_, down);
  std::vector<State<Dual<1>>> cells(cells_.size()), boundary(cells_.size());
  for (std::size_t i = 0; i < cells.size(); ++i) {
    for (std::size_t k = 0; k < 4; ++k) cells[i][k] = Dual<1>(cells_[i][k]);
    cells[i][i % 4].derivative[0] = 1.0 + 0.1 * static_cast<double>(i);
  }
  inlet_states<Dual<1>>(cells, stream_, waves_, boundary);
  for (std::size_t i = 0; i < cells.size(); ++i)
    for (std::size_t k = 0; k < 4; ++k)
      EXPECT_NEAR(boundary[i][k].derivative[0], (up[i][k] - down[i][k]) / (2.0 * h), 2e-8);
}

// A first guess may run away to axially supersonic inflow, out of which no wave would lead back.
TEST_P(InletWithWaves, IsAtMostAxiallySonic) {
  mesh::PassageMesh mesh = mesh::PassageMesh::build(mesh::structured(
      2, 4, mesh::CellKind::quads,
      [](double xi, double eta) { return mesh::Point(xi, pitch * eta); },
      {mesh::PatchKind::wall, mesh::PatchKind::outlet, mesh::PatchKind::wall,
       mesh::PatchKind::inlet},
      pitch));
  FlowProblem problem;
  problem.mesh = &mesh;
  problem.inlet = {1e5, 300.0, GetParam().angle_deg * degree, GetParam().mach};
  problem.exit_pressure = 1e4;
  const InletStream stream = scale(problem).inlet;
  EXPECT_NEAR(stream.simple_wave, stream_.simple_wave, 1e-14);
  const double side = stream.cotangent < 0.0 ? -1.0 : 1.0, theta = 0.5, mach = 2.6;
  const auto q = unit_stream(mach * mach, gamma);
  ASSERT_GT(mach * std::cos(theta), 1.5);
  const std::vector<State<double>> cells(
      faces, {q.density, q.speed * std::cos(theta), side * q.speed * std::sin(theta), q.pressure});
  std::vector<State<double>> boundary(faces);
  inlet_states<double>(cells, stream, waves_, boundary);
  for (const auto& face : boundary) EXPECT_NEAR(face[1] / speed_of_sound(face, gamma), 1.0, 1e-6);
}

INSTANTIATE_TEST_SUITE_P(Streams, InletWithWaves, testing::ValuesIn(streams),
                         [](const auto& info) { return std::string(info.param.name); });

// Slower than sound: total enthalpy and total pressure are those at rest and J leaves as it is, up
// to sonic axial speed either way.
TEST(SubsonicInlet, KeepsTheInvariantUpToSonicAxialSpeed) {
  for (const double v : {-0.4, 0.0, 0.8})
    for (const double j : {-20.0, -5.6, -5.0, -4.5, 2.0}) {
      const auto q = inlet_detail::from_invariant(j, v, gamma);
      const double a = speed_of_sound(q, gamma), kept = q[1] - 5.0 * a;
      EXPECT_NEAR(total_enthalpy(q, gamma), gamma / (gamma - 1.0), 1e-12);
      EXPECT_NEAR(q[pressure], std::pow(q[density], gamma), 1e-12);
      EXPECT_LE(std::abs(q[1]), a * (1.0 + 1e-12));
      if (std::abs(q[1]) < 0.999 * a) {
        EXPECT_NEAR(kept, j, 1e-12);
      } else {
        EXPECT_LT((kept - j) * q[1], 1e-12 * a) << "sonic though J asks for less";
      }
    }
}

}  // namespace
}  // namespace falcate::solver
