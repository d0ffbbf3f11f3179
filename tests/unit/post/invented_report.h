/// An invented blade row, flow and speed line, smooth and of plausible size, to draw and to report.
/// No number here was computed by a flow solver or measured.
#pragma once
#include <fmt/format.h>

#include <cmath>
#include <memory>
#include <string>
#include <vector>

#include "mesh/passage_mesh.h"
#include "post/report.h"

namespace falcate::post::invented {

inline constexpr double width = 6e-3, pitch = 4.25e-3, slope = 2.1445;  // 25 deg at the edges

inline double camber(double x) {
  if (x < 0.0) return slope * x;
  if (x > width) return -slope * (x - width);
  return slope * x * (1.0 - x / width);
}

inline double half_thickness(double x) {
  return x <= 0.0 || x >= width ? 0.0 : 0.62e-3 * 4.0 * x / width * (1.0 - x / width);
}

/// Lens-shaped blades round a parabola; `n` cells across, 6n along.
inline mesh::PassageMesh passage(int n) {
  mesh::RawMesh raw;
  raw.pitch = pitch;
  const int along = 6 * n, first = 2 * n, last = 4 * n;  // the blade stands from first to last
  const auto node = [n](int i, int j) { return i * (n + 1) + j; };
  for (int i = 0; i <= along; ++i) {
    const double x = width * (i - first) / (last - first);
    for (int j = 0; j <= n; ++j) {
      const double eta = static_cast<double>(j) / n, t = half_thickness(x);
      raw.nodes.emplace_back(x, camber(x) + t + eta * (pitch - 2.0 * t));
    }
  }
  for (int i = 0; i < along; ++i) {
    for (int j = 0; j < n; ++j) {
      raw.cells.push_back({node(i, j), node(i + 1, j), node(i + 1, j + 1), node(i, j + 1)});
    }
  }
  const auto edge = [&](int a, int b, mesh::PatchKind kind) {
    const auto at = [&](int k) { return raw.nodes[static_cast<std::size_t>(k)]; };
    raw.boundary.push_back({a, b, kind, 0.5 * (at(a) + at(b))});
  };
  for (int j = 0; j < n; ++j) {
    edge(node(0, j), node(0, j + 1), mesh::PatchKind::inlet);
    edge(node(along, j), node(along, j + 1), mesh::PatchKind::outlet);
  }
  for (int i = first; i < last; ++i) {
    edge(node(i, 0), node(i + 1, 0), mesh::PatchKind::suction_wall);
    edge(node(i, n), node(i + 1, n), mesh::PatchKind::pressure_wall);
  }
  for (int i = 0; i <= along; ++i) {
    if (i <= first || i >= last) raw.periodic.push_back({node(i, 0), node(i, n)});
  }
  return mesh::PassageMesh::build(raw);
}

inline std::vector<mesh::Point> blade() {
  std::vector<mesh::Point> polygon;
  for (int i = 0; i <= 100; ++i) {
    const double x = width * i / 100.0;
    polygon.emplace_back(x, camber(x) - half_thickness(x));
  }
  for (int i = 99; i > 0; --i) {
    const double x = width * i / 100.0;
    polygon.emplace_back(x, camber(x) + half_thickness(x));
  }
  return polygon;
}

inline solver::Primitive state_at(const mesh::Point& p, double mach_in) {
  const double s = p.x() / width, turn = s > 0.0 && s < 1.0 ? std::sin(3.14159265 * s) : 0.0;
  const double eta = (p.y() - camber(p.x())) / pitch;
  const double mach =
      mach_in + 0.55 * turn * turn * (0.5 - eta) - 0.12 / (1.0 + std::exp(-9.0 * (s - 0.8)));
  const double ratio = 1.0 + 0.2 * mach * mach, temperature = 290.0 / ratio;
  solver::Primitive state;
  state.pressure = 3.2e5 / std::pow(ratio, 3.5);
  state.density = state.pressure / (287.05 * temperature);
  const double speed = mach * std::sqrt(1.4 * 287.05 * temperature);
  const double dy = s < 0.0 ? slope : s > 1.0 ? -slope : slope * (1.0 - 2.0 * s);
  state.u = speed / std::hypot(1.0, dy);
  state.v = state.u * dy;
  return state;
}

inline std::vector<solver::Primitive> flow(const mesh::PassageMesh& mesh, double mach_in) {
  std::vector<solver::Primitive> cells;
  for (const auto& c : mesh.centroids()) cells.push_back(state_at(c, mach_in));
  return cells;
}

inline void add_surfaces(PointResult& point, double mach_in) {
  for (int i = 0; i <= 60; ++i) {
    const double x = width * i / 60.0;
    for (const bool suction : {true, false}) {
      const double y = camber(x) + (suction ? 0.0 : pitch);
      const auto state = state_at({x, y}, mach_in);
      const double mach =
          std::hypot(state.u, state.v) / std::sqrt(1.4 * state.pressure / state.density);
      (suction ? point.suction : point.pressure).push_back({x, y, x, state.pressure, mach});
    }
  }
}

inline PointResult wheel_point(double rpm) {
  PointResult point;
  point.wheel = true;
  point.speed_rpm = rpm;
  point.id = fmt::format("{:.0f}rpm", rpm);
  point.shape = "invented lens";
  point.blade_speed_m_s = rpm * 3.14159265 / 30.0 * 0.023;
  point.speed_ratio = point.blade_speed_m_s / 430.0;
  const double r = point.speed_ratio;
  auto& f = point.figures;
  f.blade_efficiency = 2.0 * r * (std::cos(20.0 * 3.14159265 / 180.0) - r) * 1.86;
  f.wheel_efficiency = 0.83 * f.blade_efficiency;
  f.power_w = 160.0 * f.wheel_efficiency;
  f.torque_n_m = f.power_w / (rpm * 3.14159265 / 30.0);
  const auto triangle = inlet_triangle(430.0, 20.0, point.blade_speed_m_s);
  f.inlet = {triangle.relative_angle_deg,
             triangle.relative_velocity / 290.0,
             triangle.relative_velocity,
             1.2e5,
             3.2e5,
             290.0};
  f.exit = {151.3, 0.93 * f.inlet.mach, 0.95 * triangle.relative_velocity, 1.01e5, 2.9e5, 290.0};
  f.turning_deg = f.exit.angle_deg - f.inlet.angle_deg;
  f.mass_flow_kg_s_m = 0.8123;
  f.capacity_ratio = 0.97;
  f.tangential_force_n_m = 412.3;
  f.axial_force_n_m = -12.3;
  f.tangential_force_n = 1.7;
  f.total_pressure_loss = 0.087;
  f.mass_imbalance = 3e-13;
  PassageFigures& e = point.numerical_error;
  e = f;
  for (const FigureRow& row : figure_rows()) {
    const double error = 0.004 * std::abs(figure_value(row, f));
    (row.value != nullptr ? e.*row.value : e.*row.stream.*row.stream_value) = error;
  }
  point.cells = 8112;
  point.solution.status = solver::SolutionStatus::steady;
  point.solution.residual_drop = 6.2e-11;
  point.solution.newton_steps = 24;
  point.solution.residual_evaluations = 2113;
  for (int i = 0; i <= 24; ++i) {
    point.solution.history.push_back({i, std::pow(10.0, -10.2 * std::pow(i / 24.0, 1.7)), 5.0, 20});
  }
  add_surfaces(point, f.inlet.mach);
  return point;
}

/// The whole input of a report with its own meshes and fields.
struct Report {
  std::unique_ptr<mesh::PassageMesh> mesh;
  std::vector<std::unique_ptr<std::vector<solver::Primitive>>> fields;
  ReportInput input;
};

/// `speeds` points from 10 000 rpm up, the last but one of more than two a failure.
inline Report report(int speeds, int cells_across) {
  Report report;
  report.mesh = std::make_unique<mesh::PassageMesh>(passage(cells_across));
  ReportInput& in = report.input;
  in.title = "Invented deburring spindle, 46 mm ringed wheel";
  in.version = "0.1.0";
  in.case_text = "title = \"Invented\"\n[gas]\nname = \"air\"   # <invented> & marked so\n";
  in.derived = {{"Gas", "air, heat capacity ratio 1.400"},
                {"Supply", "7.013 bar(a), 20.0 degC"},
                {"Exhaust", "1.013 bar(a)"},
                {"Spouting velocity", "498 m/s"},
                {"Jet velocity", "430 m/s at 20.0 deg"},
                {"Pitch", "4.25 mm"},
                {"Nozzle flow", "5.9 g/s through 2 nozzles"}};
  in.cautions = {"Blow-off noise above 85 dB(A): wear hearing protection. (invented)",
                 "The runaway speed lies above the speed at which the ring reaches its allowable "
                 "stress. (invented)"};
  in.pitch = pitch;
  in.blade = blade();
  SpeedLine line;
  for (int k = 0; k < speeds; ++k) {
    const double rpm = 10000.0 + 13000.0 * k;
    PointResult point = wheel_point(rpm);
    in.triangles.push_back(inlet_triangle(430.0, 20.0, point.blade_speed_m_s));
    if (speeds > 2 && k == speeds - 2) {
      point.failure = "the flow did not settle: the residual rose after 200 steps (invented)";
    } else {
      line.speed_rpm.push_back(rpm);
      line.speed_ratio.push_back(point.speed_ratio);
      line.blade_efficiency.push_back(point.figures.blade_efficiency);
      line.blade_efficiency_error.push_back(point.numerical_error.blade_efficiency);
      line.wheel_efficiency.push_back(point.figures.wheel_efficiency);
      line.wheel_efficiency_error.push_back(point.numerical_error.wheel_efficiency);
      line.torque_n_m.push_back(point.figures.torque_n_m);
      line.torque_error_n_m.push_back(point.numerical_error.torque_n_m);
      line.power_w.push_back(point.figures.power_w);
      report.fields.push_back(std::make_unique<std::vector<solver::Primitive>>(
          flow(*report.mesh, point.figures.inlet.mach)));
      in.pictures.push_back({point.id, report.mesh.get(), report.fields.back().get()});
    }
    if (k == 1)
      point.remarks = {"The passage chokes: it swallows 97 % of the flow offered. (invented)"};
    in.points.push_back(std::move(point));
  }
  const std::size_t best = line.speed_rpm.size() > 6 ? 6 : line.speed_rpm.size() - 1;
  std::swap(in.pictures[0], in.pictures[best]);
  line.best_speed_rpm = line.speed_rpm[best];
  line.best_blade_efficiency = line.blade_efficiency[best];
  line.best_at_end = best + 1 == line.speed_rpm.size();
  line.stall_torque_n_m = 0.0607;
  line.runaway_speed_rpm = 167800.0;
  in.speed_line = line;
  return report;
}

}  // namespace falcate::post::invented
