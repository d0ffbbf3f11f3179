#include "post/passage_figures.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "mesh/structured.h"
#include "post/mixed_out.h"
#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double degree = std::numbers::pi / 180.0;
constexpr double pitch = 0.012, chord = 0.016;
const solver::Gas air;

/// Mean line of an arc-like blade of no thickness between x = 0 and chord, straight outside.
double line(double x) {
  const double s = std::clamp(x / chord, 0.0, 1.0);
  return 0.008 * 4.0 * s * (1.0 - s);
}

/// A channel between two such blades with open, periodic parts up- and downstream. South is the
/// suction side of the lower blade, north the pressure side of the upper one.
mesh::PassageMesh passage(int ni = 24) {
  const auto map = [](double xi, double eta) {
    const double x = chord * (3.0 * xi - 1.0);
    return Point(x, line(x) + pitch * eta);
  };
  mesh::RawMesh raw = mesh::structured(
      ni, 6, mesh::CellKind::quads, map,
      {PatchKind::suction_wall, PatchKind::outlet, PatchKind::pressure_wall, PatchKind::inlet});
  raw.pitch = pitch;
  std::erase_if(raw.boundary, [](const auto& edge) {
    return is_wall(edge.kind) && (edge.midpoint.x() < 0.0 || edge.midpoint.x() > chord);
  });
  for (int i = 0; i <= ni; ++i) {
    const double x = raw.nodes[static_cast<std::size_t>(i)].x();
    if (x < 1e-9 || x > chord - 1e-9) raw.periodic.push_back({i, 6 * (ni + 1) + i});
  }
  return mesh::PassageMesh::build(raw);
}

solver::Primitive stream(double mach, double angle_deg, double pressure, double temperature) {
  const double w = mach * std::sqrt(air.heat_capacity_ratio * air.gas_constant * temperature);
  return {pressure / (air.gas_constant * temperature), w * std::sin(angle_deg * degree),
          w * std::cos(angle_deg * degree), pressure};
}

/// Flux of a state through a face, out of the domain.
solver::BoundaryFlux flux(const solver::Primitive& s, const Point& normal) {
  const double mass = s.density * (s.u * normal.x() + s.v * normal.y());
  const double enthalpy = heat_capacity(air) * s.pressure / (s.density * air.gas_constant) +
                          0.5 * (s.u * s.u + s.v * s.v);
  return {mass, mass * s.u + s.pressure * normal.x(), mass * s.v + s.pressure * normal.y(),
          mass * enthalpy};
}

/// Inlet and outlet states given; pressure on the walls as a function of kind and place.
template <class WallPressure>
solver::FlowSolution solution(const mesh::PassageMesh& mesh, const solver::Primitive& in,
                              const solver::Primitive& out, const WallPressure& wall) {
  solver::FlowSolution s;
  s.cells.assign(static_cast<std::size_t>(mesh.cell_count()), in);
  s.boundary.resize(static_cast<std::size_t>(mesh.face_count() - mesh.interior_face_count()));
  for (const auto& patch : mesh.patches()) {
    for (int i = patch.first_face; i < patch.first_face + patch.face_count; ++i) {
      const auto& face = mesh.faces()[static_cast<std::size_t>(i)];
      auto& f = s.boundary[static_cast<std::size_t>(i - mesh.interior_face_count())];
      if (patch.kind == PatchKind::inlet) f = flux(in, face.normal);
      if (patch.kind == PatchKind::outlet) {
        f = flux(out, face.normal);
        s.cells[static_cast<std::size_t>(face.left)] = out;
      }
      if (is_wall(patch.kind)) {
        const double p = wall(patch.kind, face.midpoint);
        f = {0.0, p * face.normal.x(), p * face.normal.y(), 0.0};
      }
    }
  }
  return s;
}

solver::FlowProblem problem(const mesh::PassageMesh& mesh) {
  solver::FlowProblem p;
  p.mesh = &mesh;
  return p;
}

double one_bar(PatchKind, const Point&) { return 1e5; }

// A free stream on a blade of no thickness: no force, no turning, no loss (exact).
TEST(PassageFigures, FreeStream) {
  const mesh::PassageMesh mesh = passage();
  for (double mach : {0.4, 2.0}) {
    for (double angle : {25.0, 60.0, 120.0}) {
      const solver::Primitive s = stream(mach, angle, 1e5, 280.0);
      const PassageFigures f =
          passage_figures(problem(mesh), solution(mesh, s, s, one_bar), std::nullopt);
      EXPECT_NEAR(f.inlet.angle_deg, angle, 1e-8) << mach;
      EXPECT_NEAR(f.inlet.mach, mach, 1e-9);
      EXPECT_NEAR(f.turning_deg, 0.0, 1e-8);
      EXPECT_NEAR(f.total_pressure_loss, 0.0, 1e-9);
      EXPECT_NEAR(f.mass_flow_kg_s_m, s.density * s.u * pitch, 1e-12);
      EXPECT_NEAR(f.mass_imbalance, 0.0, 1e-13);
      EXPECT_NEAR(f.tangential_force_n_m, 0.0, 1e-9);
      EXPECT_NEAR(f.axial_force_n_m, 0.0, 1e-9);
      EXPECT_NEAR(f.momentum_tangential_n_m, 0.0, 1e-9);
      EXPECT_NEAR(f.momentum_axial_n_m, 0.0, 1e-9);
      EXPECT_EQ(f.blade_efficiency, 0.0);
      EXPECT_EQ(f.capacity_ratio, 0.0);
    }
  }
}

// Mirror-image turning at equal pressure: Euler's turbine equation, F_u = m (w1u - w2u).
TEST(PassageFigures, ForceOfAMirroredStream) {
  const mesh::PassageMesh mesh = passage();
  const solver::Primitive in = stream(1.5, 30.0, 1e5, 250.0), out = stream(1.5, 150.0, 1e5, 250.0);
  const PassageFigures f =
      passage_figures(problem(mesh), solution(mesh, in, out, one_bar), std::nullopt);
  EXPECT_NEAR(f.turning_deg, 120.0, 1e-8);
  EXPECT_NEAR(f.momentum_tangential_n_m, 2.0 * in.density * in.u * in.v * pitch, 1e-9);
  EXPECT_NEAR(f.momentum_axial_n_m, 0.0, 1e-9);
  EXPECT_NEAR(f.absolute_exit_velocity_m_s, f.exit.velocity_m_s, 1e-12);
}

// Constant overpressure on the concave side alone: force = dp x projected area, tangential +, and
// no axial force for a blade that ends where it began (exact).
TEST(PassageFigures, PressureForcePointsFromTheConcaveSide) {
  const mesh::PassageMesh mesh = passage();
  const solver::Primitive s = stream(0.5, 60.0, 1e5, 280.0);
  const auto wall = [](PatchKind kind, const Point&) {
    return kind == PatchKind::pressure_wall ? 1.3e5 : 1.0e5;
  };
  const PassageFigures f = passage_figures(problem(mesh), solution(mesh, s, s, wall), std::nullopt);
  EXPECT_NEAR(f.tangential_force_n_m, 0.3e5 * chord, 1e-8);
  EXPECT_NEAR(f.axial_force_n_m, 0.0, 1e-8);
}

TEST(PassageFigures, BackwardFlowIsRefused) {
  const mesh::PassageMesh mesh = passage();
  const solver::Primitive s = stream(0.5, -60.0, 1e5, 280.0);
  EXPECT_THROW(passage_figures(problem(mesh), solution(mesh, s, s, one_bar), std::nullopt),
               MixedOutError);
}

/// A duty whose jet meets the passage undisturbed: the passage takes in `share` of the offer.
struct Stage {
  WheelDuty duty;
  solver::FlowSolution flow;
};

Stage stage(const mesh::PassageMesh& mesh, double speed_ratio, double share) {
  Stage s;
  Nozzle nozzle;
  nozzle.throat_diameter = nozzle.exit_diameter = 2e-3;
  s.duty.jet = nozzle_flow(air, {1.3e5, 300.0}, nozzle, 1e5);
  s.duty.jet_angle_deg = 20.0;
  s.duty.mean_radius = 0.023;
  s.duty.blade_speed = speed_ratio * s.duty.jet.jet_velocity;
  const VelocityTriangle t = inlet_triangle(s.duty.jet.jet_velocity, 20.0, s.duty.blade_speed);
  const double mach = t.relative_velocity / speed_of_sound(air, s.duty.jet.jet_temperature);
  solver::Primitive in = stream(mach, t.relative_angle_deg, 1e5, s.duty.jet.jet_temperature);
  in.u *= share;
  in.v *= share;
  solver::Primitive out = in;
  out.v = -in.v;
  s.flow = solution(mesh, in, out, one_bar);
  // The force as the momentum balance has it, put on one wall face.
  solver::BoundaryFlux rest;
  for (const auto& patch : mesh.patches()) {
    for (int i = 0; i < patch.face_count; ++i) {
      const auto& f = s.flow.boundary[static_cast<std::size_t>(patch.first_face + i -
                                                               mesh.interior_face_count())];
      rest.momentum_x += f.momentum_x;
      rest.momentum_y += f.momentum_y;
    }
  }
  for (const auto& patch : mesh.patches()) {
    if (patch.kind != PatchKind::pressure_wall) continue;
    auto& f =
        s.flow.boundary[static_cast<std::size_t>(patch.first_face - mesh.interior_face_count())];
    f.momentum_x -= rest.momentum_x;
    f.momentum_y -= rest.momentum_y;
  }
  return s;
}

// Frictionless symmetric impulse stage, k = 1: eta = 4 r (cos a1 - r), best at r = cos(a1)/2 where
// it is cos^2 a1 (Stodola, Steam and Gas Turbines; any steam-turbine text).
TEST(PassageFigures, DiagramEfficiencyOfTheImpulseStage) {
  const mesh::PassageMesh mesh = passage();
  const double cosine = std::cos(20.0 * degree);
  for (double r : {0.1, 0.3, 0.5 * cosine, 0.6, 0.8}) {
    const Stage s = stage(mesh, r, 1.0);
    const PassageFigures f = passage_figures(problem(mesh), s.flow, s.duty);
    EXPECT_NEAR(f.blade_efficiency, 4.0 * r * (cosine - r), 1e-10) << r;
    EXPECT_NEAR(f.capacity_ratio, 1.0, 1e-12);
    EXPECT_NEAR(f.tangential_force_n_m, f.momentum_tangential_n_m, 1e-10);
    const double coefficient = s.duty.jet.jet_velocity / s.duty.jet.spouting_velocity;
    EXPECT_NEAR(f.wheel_efficiency, coefficient * coefficient * f.blade_efficiency, 1e-12);
    EXPECT_NEAR(f.power_w, f.tangential_force_n * s.duty.blade_speed, 1e-12);
    EXPECT_NEAR(f.torque_n_m, f.tangential_force_n * 0.023, 1e-15);
    const double exit_axial = s.duty.jet.jet_velocity * std::sin(20.0 * degree);
    const double exit_swirl = s.duty.jet.jet_velocity * (2.0 * r - cosine);
    EXPECT_NEAR(f.absolute_exit_velocity_m_s, std::hypot(exit_axial, exit_swirl), 1e-8);
  }
}

TEST(PassageFigures, BestSpeedRatioIsHalfTheCosine) {
  const mesh::PassageMesh mesh = passage();
  const Stage s = stage(mesh, 0.5 * std::cos(20.0 * degree), 1.0);
  const PassageFigures f = passage_figures(problem(mesh), s.flow, s.duty);
  EXPECT_NEAR(f.blade_efficiency, 0.883022, 5e-7);  // cos^2 of 20 degrees
  EXPECT_NEAR(f.absolute_exit_velocity_m_s,
              f.exit.velocity_m_s * std::sin(f.exit.angle_deg * degree),
              1e-8);  // no exit swirl
}

TEST(PassageFigures, TorqueAtStandstill) {
  const mesh::PassageMesh mesh = passage();
  const Stage s = stage(mesh, 0.0, 1.0);
  const PassageFigures f = passage_figures(problem(mesh), s.flow, s.duty);
  const double force =
      2.0 * s.duty.jet.mass_flow * s.duty.jet.jet_velocity * std::cos(20.0 * degree);
  EXPECT_NEAR(f.torque_n_m, force * 0.023, 1e-12);
  EXPECT_EQ(f.power_w, 0.0);
  EXPECT_EQ(f.wheel_efficiency, 0.0);
}

// What the passage cannot swallow spills: the loaded flow is the nozzle flow times the capacity.
TEST(PassageFigures, SpilledFlowDoesNoWork) {
  const mesh::PassageMesh mesh = passage();
  const Stage s = stage(mesh, 0.3, 0.7);
  const PassageFigures f = passage_figures(problem(mesh), s.flow, s.duty);
  EXPECT_NEAR(f.capacity_ratio, 0.7, 1e-12);
  const double per_flow = f.tangential_force_n_m / f.mass_flow_kg_s_m;
  EXPECT_NEAR(f.tangential_force_n, 0.7 * s.duty.jet.mass_flow * per_flow, 1e-12);
}

// A passage that asks for more than is offered gets the nozzle flow and no more; and no momentum
// along the wheel beyond that of the jet (momentum theorem on the free jet ahead of the blades),
// though the stream that enters it at the angle of the jet is a tenth faster.
TEST(PassageFigures, NoMoreThanTheNozzleFlowIsLoaded) {
  const mesh::PassageMesh mesh = passage();
  const Stage s = stage(mesh, 0.3, 1.1);
  const PassageFigures f = passage_figures(problem(mesh), s.flow, s.duty);
  EXPECT_NEAR(f.capacity_ratio, 1.1, 1e-12);
  const double of_jet =
      s.duty.jet.jet_velocity * std::cos(20.0 * std::numbers::pi / 180.0) - s.duty.blade_speed;
  const double per_flow = f.tangential_force_n_m / f.mass_flow_kg_s_m - 0.1 * of_jet;
  EXPECT_NEAR(f.tangential_force_n, s.duty.jet.mass_flow * per_flow, 1e-12);
  EXPECT_NEAR(f.power_w, f.tangential_force_n * s.duty.blade_speed, 1e-12);
  const double c1 = s.duty.jet.jet_velocity;
  EXPECT_NEAR(f.blade_efficiency, per_flow * s.duty.blade_speed / (0.5 * c1 * c1), 1e-12);
}

// Pressure rising along x: both sides come out in the order of x, arc length that of the curve.
TEST(SurfaceDistribution, FollowsEachSideFromTheLeadingEdge) {
  const mesh::PassageMesh mesh = passage(96);
  const solver::Primitive s = stream(0.5, 60.0, 1e5, 280.0);
  const auto wall = [](PatchKind kind, const Point& at) {
    return (kind == PatchKind::pressure_wall ? 0.8e5 : 0.6e5) * (1.0 + at.x() / chord);
  };
  const SurfaceDistribution d =
      surface_distribution(problem(mesh), solution(mesh, s, s, wall), 1.28e5);
  // Length of the parabola y = 4 h s (1 - s): closed form.
  const double h = 0.008, q = 4.0 * h / chord;
  const double length = 0.5 * chord * (std::sqrt(1.0 + q * q) + std::asinh(q) / q);
  for (const auto* side : {&d.suction, &d.pressure}) {
    ASSERT_EQ(side->size(), 32u);
    const double base = side == &d.pressure ? 0.8e5 : 0.6e5;
    for (std::size_t i = 0; i < side->size(); ++i) {
      const SurfacePoint& p = (*side)[i];
      EXPECT_GT(p.arc_length, i > 0 ? (*side)[i - 1].arc_length : 0.0);
      EXPECT_NEAR(p.pressure_pa, base * (1.0 + p.x / chord), 1e-6);
      const double ratio = std::min(p.pressure_pa / 1.28e5, 1.0);
      EXPECT_NEAR(p.isentropic_mach, solver::mach_from_pressure_ratio(ratio, 1.4), 1e-12);
    }
    EXPECT_NEAR(side->front().x, 0.5 * chord / 32, 2e-5);
    EXPECT_NEAR(side->back().arc_length, length * (1.0 - 0.5 / 32), 0.01 * length);
  }
  EXPECT_EQ(d.pressure.back().isentropic_mach, 0.0);  // above the total pressure
}

}  // namespace
}  // namespace falcate::post
