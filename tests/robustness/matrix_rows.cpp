#include "robustness/matrix_rows.h"

#include <fmt/format.h>

#include <algorithm>
#include <chrono>
#include <cmath>
#include <exception>
#include <numbers>

#include "cases/blade_row.h"
#include "cases/point_solver.h"
#include "cases/runner.h"
#include "mesh/mesh_levels_maker.h"
#include "solver/gas_dynamics.h"

namespace falcate::robustness {
namespace {

constexpr double degree = std::numbers::pi / 180.0, width = 0.006;
constexpr int blades = 48;

const std::vector<double> blade_angles{15.0, 20.0, 25.0, 30.0, 35.0, 40.0};
const std::vector<double> pitches{0.3, 0.45, 0.6, 0.8, 1.0, 1.2};
const std::vector<double> jet_machs{0.3, 0.6, 0.9, 1.2, 1.5, 1.8, 2.1, 2.6};
const std::vector<double> speed_ratios{0.0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.65, 0.8, 1.0};
const std::vector<double> rig_machs{0.1, 0.3, 0.5, 0.7, 0.85, 1.0, 1.15, 1.3, 1.6, 2.0, 2.5};
const std::vector<double> incidences{0.0, 4.0, -3.0};      ///< deg, of the rig's stream
const std::vector<double> exit_pressures{1.0, 0.9, 1.05};  ///< over the inlet's, of the rig

/// Pitch over width that leaves room for the bend of a channel blade: the passage must not be wider
/// than the radius of its bend.
double fitting_pitch(const std::string& shape, double angle_deg, double pitch_over_width) {
  constexpr double widest_passage = 0.52;
  return shape == "channel"
             ? std::min(pitch_over_width, widest_passage / std::sin(angle_deg * degree))
             : pitch_over_width;
}

/// A blade of this angle that fits the pitch: walls thin enough for steep spacing, a passage narrow
/// enough for its bend.
void set_blade(cases::Case& input, const std::string& shape, double angle, double pitch) {
  input.shape = shape;
  input.inlet_angle = angle;
  input.exit_angle = std::numbers::pi - angle;
  const double open = pitch * std::sin(angle);
  if (shape == "cup") {
    input.wall_thickness = std::min(0.06 * width, 0.25 * open);
    return;
  }
  input.edge_radius = std::min(0.01 * width, 0.05 * open);
  const double bend = 0.5 * width / std::cos(angle);
  input.passage_width = std::min(open - 2.0 * *input.edge_radius, 0.5 * bend);
}

MatrixRow common(cases::CaseKind kind, const std::string& name, const std::string& shape,
                 double angle, double pitch_over_width, int cells) {
  MatrixRow row;
  row.name = name;
  row.blade_angle_deg = angle;
  row.pitch_over_width = pitch_over_width;
  cases::Case& input = row.input;
  input.kind = kind;
  input.title = name;
  input.gas_name = "air";
  input.atmospheric_pressure = 101325.0;
  input.cells = cells;
  input.upstream = input.downstream = 1.0;
  input.max_steps = 150;
  input.averaging_steps = 160;
  input.residual_drop = 1e-10;
  set_blade(input, shape, angle * degree, pitch_over_width * width);
  return row;
}

/// Supply pressure at which the jet, slowed by its coefficient, has the wanted Mach number.
double supply_pressure_for(double jet_mach, double coefficient, double exhaust) {
  // T1/T0 = 1 - phi^2 (1 - Ts/T0), M1^2 = 5 phi^2 (1 - Ts/T0) / (T1/T0), gamma 1.4.
  const double m2 = jet_mach * jet_mach / 5.0;
  const double fall = m2 / (1.0 + m2) / (coefficient * coefficient);
  return exhaust * std::pow(1.0 - fall, -3.5);
}

MatrixRow wheel_row(const std::string& shape, double angle, double pitch_over_width,
                    double jet_mach, int cells) {
  MatrixRow row = common(cases::CaseKind::wheel,
                         fmt::format("wheel {} {:.0f} deg, pitch {:.2f} widths, jet Mach {:.1f}",
                                     shape, angle, pitch_over_width, jet_mach),
                         shape, angle, pitch_over_width, cells);
  cases::Case& input = row.input;
  input.exhaust_pressure = 101325.0;
  input.supply_temperature = 293.15;
  input.velocity_coefficient = 0.97;
  input.discharge_coefficient = 0.9;
  input.supply_pressure =
      supply_pressure_for(jet_mach, input.velocity_coefficient, input.exhaust_pressure);
  input.nozzle_angle = 20.0 * degree;
  input.nozzle_count = 1;
  input.throat_diameter = 0.002;
  const double spouting = solver::mach_from_pressure_ratio(
      input.exhaust_pressure / input.supply_pressure, input.gas.heat_capacity_ratio);
  input.nozzle_exit_diameter =
      input.throat_diameter *
      std::sqrt(spouting > 1.0 ? solver::area_ratio(spouting, input.gas.heat_capacity_ratio) : 1.0);
  input.blade_height = 0.004;
  input.blade_width = width;
  input.blade_count = blades;
  input.mean_diameter = blades * pitch_over_width * width / std::numbers::pi;
  input.rim = "ringed";
  input.speed_ratios = speed_ratios;
  row.points = cases::operating_points(input);
  return row;
}

/// Streams of rising Mach number onto one row; incidence and exit pressure change from one to the
/// next.
MatrixRow rig_row(const std::string& shape, double angle, double pitch_over_width, std::size_t turn,
                  int cells) {
  MatrixRow row =
      common(cases::CaseKind::rig,
             fmt::format("rig {} {:.0f} deg, pitch {:.2f} widths", shape, angle, pitch_over_width),
             shape, angle, pitch_over_width, cells);
  cases::Case& input = row.input;
  input.row_width = width;
  input.row_pitch = pitch_over_width * width;
  input.stream_total_pressure = 2e5;
  input.stream_total_temperature = 300.0;
  for (std::size_t i = 0; i < rig_machs.size(); ++i) {
    const double mach = rig_machs[i];
    input.stream_mach = mach;
    input.stream_angle = (angle + incidences[(i + turn) % incidences.size()]) * degree;
    const double level = exit_pressures[(i + turn / 3) % exit_pressures.size()];
    const double fall = 1.0 - solver::pressure_ratio(mach, input.gas.heat_capacity_ratio);
    // Below Mach 1 the fall of pressure varies, so that there always is one.
    const double ratio = mach < 1.0 ? 1.0 - fall * (2.0 - level) : (1.0 - fall) * level;
    input.stream_exit_pressure = input.stream_total_pressure * ratio;
    cases::OperatingPoint point = cases::operating_points(input).front();
    point.id = fmt::format("point-{:02}", i + 1);
    row.points.push_back(point);
  }
  return row;
}

std::vector<Answer> solve_points(const MatrixRow& row, const mesh::MeshLevels& meshes) {
  std::vector<Answer> answers;
  cases::RunObserver silent;
  const bool wheel = row.input.kind == cases::CaseKind::wheel;
  // The streams of a rig row are cases of their own.
  const auto parts = wheel ? cases::chains(static_cast<int>(row.points.size()))
                           : std::vector<std::pair<int, int>>{};
  cases::LevelStates before;
  for (std::size_t i = 0; i < row.points.size(); ++i) {
    const bool first = std::any_of(parts.begin(), parts.end(), [&](const auto& part) {
      return part.first == static_cast<int>(i);
    });
    if (!wheel || first) before.clear();
    const auto began = std::chrono::steady_clock::now();
    cases::SolvedPoint solved =
        cases::solve_point(row.input, meshes, row.points[i], before, silent);
    const auto& inlet = row.points[i].inlet;
    answers.push_back(
        {row.name, row.input.shape, row.blade_angle_deg, row.pitch_over_width,
         row.points[i].inlet_mach, inlet.angle / degree, wheel, solved.result,
         std::chrono::duration<double>(std::chrono::steady_clock::now() - began).count()});
    if (solved.result.failure.empty()) before = std::move(solved.states);
  }
  return answers;
}

}  // namespace

std::vector<MatrixRow> matrix_rows(int cells) {
  std::vector<MatrixRow> rows;
  std::size_t turn = 0;
  for (const char* shape : {"channel", "cup"})
    for (std::size_t a = 0; a < blade_angles.size(); ++a)
      for (std::size_t k = 0; k < 2; ++k, ++turn)
        // Steps that share no divisor with the lengths: every pitch meets every shape, and Mach
        // numbers go through the angles.
        rows.push_back(
            wheel_row(shape, blade_angles[a],
                      fitting_pitch(shape, blade_angles[a], pitches[(5 * a + 3 * k + 1) % 6]),
                      jet_machs[(3 * turn + turn / 8) % 8], cells));
  for (const char* shape : {"channel", "cup"})
    for (std::size_t a = 0; a < blade_angles.size(); ++a, ++turn)
      rows.push_back(rig_row(shape, blade_angles[a],
                             fitting_pitch(shape, blade_angles[a], pitches[(a + turn / 5) % 6]),
                             turn, cells));
  return rows;
}

std::vector<Answer> solve_row(const MatrixRow& row) {
  const cases::BladeRow blades_of_row = cases::make_blade_row(row.input);
  mesh::MeshOptions options;
  options.cells = row.input.cells;
  options.upstream = row.input.upstream;
  options.downstream = row.input.downstream;
  const auto meshes =
      mesh::make_mesh_levels(blades_of_row.outline, blades_of_row.pitch, blades_of_row.inlet_angle,
                             blades_of_row.exit_angle, options);
  return solve_points(row, meshes);
}

bool has_error_bars(const post::PointResult& result) {
  const auto& rows = post::figure_rows();
  return std::all_of(rows.begin(), rows.end(), [&](const post::FigureRow& row) {
    if (row.wheel_only && !result.wheel) return true;
    return std::isfinite(post::figure_value(row, result.figures)) &&
           std::isfinite(post::figure_value(row, result.numerical_error));
  });
}

bool answered(const Answer& answer) {
  return answer.result.failure.empty() &&
         answer.result.solution.status != solver::SolutionStatus::failed &&
         has_error_bars(answer.result);
}

}  // namespace falcate::robustness
