// The impulse stage of the handbooks: forces, thrust, diagram efficiency and best speed ratio from
// given velocity triangles, without a flow solution.
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <vector>

#include "mesh/structured.h"
#include "post/passage_figures.h"
#include "post/speed_line.h"
#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

using mesh::PatchKind;
using mesh::Point;

constexpr double degree = std::numbers::pi / 180.0;
constexpr double pitch = 0.01, pressure = 1e5, temperature = 400.0;
const solver::Gas air;

mesh::PassageMesh channel() {
  mesh::RawMesh raw = mesh::structured(
      4, 2, mesh::CellKind::quads,
      [](double xi, double eta) { return Point(0.02 * xi, pitch * eta); },
      {PatchKind::suction_wall, PatchKind::outlet, PatchKind::pressure_wall, PatchKind::inlet});
  raw.pitch = pitch;
  return mesh::PassageMesh::build(raw);
}

struct Stage {
  double jet_velocity, jet_angle_deg, blade_speed;
  double velocity_ratio;  ///< k = w2/w1
  double exit_angle_deg;  ///< as in steam practice, acute; 0: symmetric blade
};

solver::BoundaryFlux flux(const solver::Primitive& s, const Point& normal) {
  const double mass = s.density * (s.u * normal.x() + s.v * normal.y());
  const double enthalpy = heat_capacity(air) * s.pressure / (s.density * air.gas_constant) +
                          0.5 * (s.u * s.u + s.v * s.v);
  return {mass, mass * s.u + s.pressure * normal.x(), mass * s.v + s.pressure * normal.y(),
          mass * enthalpy};
}

/// Streams by the triangles at equal pressure and equal mass flow; the force the walls feel is what
/// the streams lose.
PassageFigures figures(const Stage& stage, double mass_flow) {
  const VelocityTriangle t =
      inlet_triangle(stage.jet_velocity, stage.jet_angle_deg, stage.blade_speed);
  const double b1 = t.relative_angle_deg * degree;
  const double b2 = stage.exit_angle_deg > 0.0 ? stage.exit_angle_deg * degree : b1;
  const double w1 = t.relative_velocity, w2 = stage.velocity_ratio * w1;
  const double density = pressure / (air.gas_constant * temperature);
  const solver::Primitive in{density, w1 * std::sin(b1), w1 * std::cos(b1), pressure};
  const solver::Primitive out{density * in.u / (w2 * std::sin(b2)), w2 * std::sin(b2),
                              -w2 * std::cos(b2), pressure};
  const mesh::PassageMesh mesh = channel();
  solver::FlowSolution solution;
  solution.cells.assign(static_cast<std::size_t>(mesh.cell_count()), in);
  solver::BoundaryFlux rest;
  for (int i = mesh.interior_face_count(); i < mesh.face_count(); ++i) {
    const auto& face = mesh.faces()[static_cast<std::size_t>(i)];
    const bool ends = std::abs(face.normal.x()) > std::abs(face.normal.y());
    solution.boundary.push_back(ends ? flux(face.normal.x() < 0.0 ? in : out, face.normal)
                                     : solver::BoundaryFlux{});
    rest.momentum_x += solution.boundary.back().momentum_x;
    rest.momentum_y += solution.boundary.back().momentum_y;
  }
  for (const auto& patch : mesh.patches()) {
    if (patch.kind != PatchKind::pressure_wall) continue;
    auto& wall =
        solution.boundary[static_cast<std::size_t>(patch.first_face - mesh.interior_face_count())];
    wall = {0.0, -rest.momentum_x, -rest.momentum_y, 0.0};
  }
  solver::FlowProblem problem;
  problem.mesh = &mesh;
  problem.gas = air;
  WheelDuty duty;
  duty.blade_speed = stage.blade_speed;
  duty.mean_radius = 0.59;
  duty.jet_angle_deg = stage.jet_angle_deg;
  duty.jet.jet_velocity = duty.jet.spouting_velocity = stage.jet_velocity;
  duty.jet.jet_density = density;
  duty.jet.mass_flow = mass_flow;
  return passage_figures(problem, solution, duty);
}

// Impulse-stage example of Eastop & McConkey, Applied Thermodynamics, 1 kg/s: 927 N, 278 kW, axial
// thrust 92.3 N, diagram efficiency 68.7 % (answers from memory; recomputed to more digits).
TEST(ImpulseStageHandbook, ForcePowerThrustAndEfficiency) {
  const PassageFigures f = figures({900.0, 20.0, 300.0, 0.7, 0.0}, 1.0);
  EXPECT_NEAR(f.inlet.angle_deg, 29.43, 0.005);
  EXPECT_NEAR(f.tangential_force_n, 927.7, 0.05);
  EXPECT_NEAR(f.power_w, 278.3e3, 50.0);
  EXPECT_NEAR(f.axial_force_n, 92.35, 0.005);
  EXPECT_NEAR(f.blade_efficiency, 0.68721, 5e-6);
  EXPECT_NEAR(f.wheel_efficiency, 0.68721, 5e-6);
}

// Textbook exercise: 600 m/s at 20 degrees, 3000 rpm on 0.59 m, 164 m/s axial at the exit of a
// symmetric blade: k 0.7992, 126.21 kJ/kg, efficiency 0.70117 (recomputed).
TEST(ImpulseStageHandbook, WorkPerKilogram) {
  const double u = 3000.0 * std::numbers::pi / 30.0 * 0.59;
  const double w1x = 600.0 * std::sin(20.0 * degree);
  const PassageFigures f = figures({600.0, 20.0, u, 164.0 / w1x, 0.0}, 1.0);
  EXPECT_NEAR(f.inlet.angle_deg, 28.47, 0.005);
  EXPECT_NEAR(f.exit.velocity_m_s / f.inlet.velocity_m_s, 0.7992, 5e-5);
  EXPECT_NEAR(f.power_w, 126.21e3, 5.0);
  EXPECT_NEAR(f.torque_n_m, f.power_w / (3000.0 * std::numbers::pi / 30.0), 1e-9);
  EXPECT_NEAR(f.blade_efficiency, 0.70117, 5e-6);
}

// Textbook exercises without friction: c2 = 246.3 m/s; absolute exit angle 51 degrees.
TEST(ImpulseStageHandbook, AbsoluteExitVelocity) {
  EXPECT_NEAR(figures({700.0, 20.0, 300.0, 1.0, 0.0}, 1.0).absolute_exit_velocity_m_s, 246.29,
              0.005);
  const PassageFigures f = figures({900.0, 20.0, 300.0, 1.0, 0.0}, 1.0);
  const double axial = f.exit.velocity_m_s * std::sin(f.exit.angle_deg * degree);
  EXPECT_NEAR(std::asin(axial / f.absolute_exit_velocity_m_s) / degree, 51.40, 0.005);
}

// Textbook exercise: 600 m/s at 25 degrees, u = 200 m/s, k = 0.8, blade exit angle 54.18 degrees
// makes the absolute exit velocity axial.
TEST(ImpulseStageHandbook, AxialExit) {
  const PassageFigures f = figures({600.0, 25.0, 200.0, 0.8, 54.18}, 1.0);
  EXPECT_NEAR(f.inlet.velocity_m_s, 427.18, 0.005);
  const double swirl = f.exit.velocity_m_s * std::cos(f.exit.angle_deg * degree) + 200.0;
  EXPECT_NEAR(swirl, 0.0, 0.05);
}

// Best speed ratio cos(a1)/2 and greatest diagram efficiency (cos^2 a1/2)(1 + K): Stodola, Steam
// and Gas Turbines; any steam-turbine text. Values recomputed.
TEST(ImpulseStageHandbook, BestSpeedRatioAndGreatestEfficiency) {
  struct Row {
    double angle_deg, best_ratio, efficiency, with_friction;
  };
  const Row rows[] = {{12, 0.489074, 0.956773, 0.885015},
                      {15, 0.482963, 0.933013, 0.863037},
                      {18, 0.475528, 0.904508, 0.836670},
                      {20, 0.469846, 0.883022, 0.816796},
                      {25, 0.453154, 0.821394, 0.759789}};
  for (const Row& row : rows) {
    for (const double k : {1.0, 0.85}) {
      std::vector<PointResult> points;
      for (double ratio = 0.08; ratio < 0.96; ratio += 0.08) {
        PointResult point;
        point.wheel = true;
        point.speed_ratio = ratio;
        point.speed_rpm = 1e5 * ratio;
        point.figures = figures({500.0, row.angle_deg, 500.0 * ratio, k, 0.0}, 0.01);
        points.push_back(point);
      }
      const SpeedLine line = make_speed_line(points);
      const double expected = k == 1.0 ? row.efficiency : row.with_friction;
      EXPECT_NEAR(*line.best_speed_rpm / 1e5, row.best_ratio, 1e-6) << row.angle_deg;
      EXPECT_NEAR(*line.best_blade_efficiency, expected, 1e-6) << row.angle_deg;
      EXPECT_NEAR(*line.runaway_speed_rpm / 1e5, 2.0 * row.best_ratio, 2e-6) << row.angle_deg;
    }
  }
}

}  // namespace
}  // namespace falcate::post
