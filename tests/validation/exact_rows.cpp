#include "tests/validation/exact_rows.h"

#include <fmt/format.h>

#include <array>
#include <cmath>
#include <memory>
#include <mutex>
#include <numbers>
#include <stdexcept>

#include "mesh/blade_shapes.h"
#include "tests/validation/solved_passage.h"

namespace falcate::validation {
namespace {

constexpr double degree = std::numbers::pi / 180.0;

struct ExactRow {
  const char* name;
  const char* words;
  const char* source;
  const char* file;
  double pitch;  ///< over width
  double mach;   ///< supersonic rows; 0: a cascade at low Mach number
  double inlet_deg, exit_deg;
};

const char* const impulse_source =
    "Boxer, Sterrett, Wlodarski, NACA RM L52B06, 1952; Goldman, Scullin, NASA TN D-4421, 1968";
const char* const cascade_source = "conformal map of a circle, potential flow";

const ExactRow rows[] = {
    {"S1", "impulse row without shocks, Mach 2, turning 130 deg", impulse_source,
     "exact_supersonic_impulse_S1_M2.0_b65.csv", 0.3002776851, 2.0, 25.0, 155.0},
    {"S3", "impulse row without shocks, Mach 2.5, turning 140 deg", impulse_source,
     "exact_supersonic_impulse_S3_M2.5_b70.csv", 0.2548557998, 2.5, 20.0, 160.0},
    {"I1", "incompressible cascade, turning 83 deg", cascade_source,
     "exact_incompressible_cascade_I1_turn83.csv", 0.7384864051, 0.0, 50.0, 90.0 + 42.80286004},
    {"I3", "incompressible cascade, turning 31 deg", cascade_source,
     "exact_incompressible_cascade_I3_turn31.csv", 0.7507737395, 0.0, 75.0, 90.0 + 15.51856456},
};

/// What may differ and leaves the exact answer known. Lengths over the width.
struct RowCondition {
  int cells;
  double upstream, downstream;
  double cascade_mach;
  double width;  ///< m
  double total_pressure, total_temperature, gas_constant;
};

const std::array<RowCondition, 10> row_conditions = {{
    {3000, 1.0, 1.0, 0.10, 0.010, 1.0e6, 300.0, 287.05},
    {3500, 0.8, 1.2, 0.05, 0.004, 6.0e5, 288.0, 287.05},
    {4100, 1.2, 0.8, 0.06, 0.012, 3.0e5, 350.0, 296.8},
    {4800, 1.5, 1.5, 0.08, 0.050, 1.2e5, 280.0, 287.05},
    {5600, 1.0, 0.7, 0.12, 0.006, 8.0e5, 400.0, 287.05},
    {6500, 0.7, 1.0, 0.09, 0.020, 2.5e6, 310.0, 259.8},
    {7600, 1.0, 1.3, 0.07, 0.008, 5.0e5, 293.0, 287.05},
    {8000, 1.0, 1.0, 0.10, 0.010, 7.0e5, 293.0, 287.05},
    {10000, 1.3, 1.0, 0.11, 0.015, 1.0e6, 500.0, 296.8},
    {12000, 1.0, 1.0, 0.08, 0.010, 4.0e5, 300.0, 287.05},
}};

SolvedPassage solved(const ExactRow& row, const RowCondition& c, double mach) {
  PassageTask task;
  task.pitch = row.pitch * c.width;
  task.exit_angle = row.exit_deg * degree;
  task.problem.gas.gas_constant = c.gas_constant;
  task.problem.inlet = {c.total_pressure, c.total_temperature, row.inlet_deg * degree, {}};
  if (row.mach > 0.0) task.problem.inlet.mach = row.mach;
  task.problem.exit_pressure = c.total_pressure * std::pow(1.0 + 0.2 * mach * mach, -3.5);
  task.mesh.cells = c.cells;
  task.mesh.upstream = c.upstream;
  task.mesh.downstream = c.downstream;
  const std::string file = std::string(FALCATE_SOURCE_DIR "/tests/data/") + row.file;
  return {mesh::coordinates_blade(file, c.width), task};
}

/// Uniform stream of a supply.
struct Stream {
  double pressure, velocity, density, angle;

  Stream(const RowCondition& c, double mach, double angle_deg) : angle(angle_deg * degree) {
    const double t = 1.0 + 0.2 * mach * mach, temperature = c.total_temperature / t;
    pressure = c.total_pressure * std::pow(t, -3.5);
    density = pressure / (c.gas_constant * temperature);
    velocity = mach * std::sqrt(1.4 * c.gas_constant * temperature);
  }
  double axial() const { return velocity * std::sin(angle); }
  double tangential() const { return velocity * std::cos(angle); }
  double flow() const { return density * axial(); }
};

/// Subsonic Mach number at which the stream carries `flow` (kg/s m2 through the plane).
double mach_of_flow(const RowCondition& c, double angle_deg, double flow) {
  double low = 0.0, high = 1.0;
  for (int i = 0; i < 60; ++i) {
    const double middle = 0.5 * (low + high);
    (Stream(c, middle, angle_deg).flow() < flow ? low : high) = middle;
  }
  return low;
}

struct ExactFigures {
  double exit_deg, exit_mach, flow, tangential_force, axial_force;
};

ExactFigures exact_figures(const ExactRow& row, const RowCondition& c, double mach,
                           double exit_deg) {
  const Stream out(c, mach, exit_deg);
  const double in_mach = row.mach > 0.0 ? mach : mach_of_flow(c, row.inlet_deg, out.flow());
  const Stream in(c, in_mach, row.inlet_deg);
  const double pitch = row.pitch * c.width, flow = out.flow() * pitch;
  return {exit_deg, mach, flow, flow * (in.tangential() - out.tangential()),
          flow * (in.axial() - out.axial()) + pitch * (in.pressure - out.pressure)};
}

/// Change of a cascade's exit angle with the square of the Mach number, deg.
double angle_change(const ExactRow& row) {
  RowCondition c = row_conditions[7];
  std::array<double, 2> angle{};
  const std::array<double, 2> mach = {0.05, 0.15};
  for (std::size_t i = 0; i < 2; ++i) {
    const SolvedPassage passage = solved(row, c, mach[i]);
    angle[i] = passage.figures(passage.finest()).exit.angle_deg;
  }
  return (angle[1] - angle[0]) / (mach[1] * mach[1] - mach[0] * mach[0]);
}

struct RowFigure {
  const char* words;
  const char* unit;
  double (*found)(const post::PassageFigures&);
  double (*exact)(const ExactFigures&);
};

const RowFigure row_figures[] = {
    {"exit angle", "deg", [](const post::PassageFigures& f) { return f.exit.angle_deg; },
     [](const ExactFigures& e) { return e.exit_deg; }},
    {"exit Mach number", "", [](const post::PassageFigures& f) { return f.exit.mach; },
     [](const ExactFigures& e) { return e.exit_mach; }},
    {"loss of total pressure", "",
     [](const post::PassageFigures& f) { return f.total_pressure_loss; },
     [](const ExactFigures&) { return 0.0; }},
    {"mass flow", "kg/(s m)", [](const post::PassageFigures& f) { return f.mass_flow_kg_s_m; },
     [](const ExactFigures& e) { return e.flow; }},
    {"tangential force", "N/m",
     [](const post::PassageFigures& f) { return f.tangential_force_n_m; },
     [](const ExactFigures& e) { return e.tangential_force; }},
    {"axial force", "N/m", [](const post::PassageFigures& f) { return f.axial_force_n_m; },
     [](const ExactFigures& e) { return e.axial_force; }},
};

/// The angle's change is wanted by every condition of a cascade and solved once.
struct AngleChange {
  std::once_flag known;
  double value = 0.0;
};

Condition solve_condition(const ExactRow& row, const RowCondition& c, AngleChange& change) {
  const bool cascade = row.mach == 0.0;
  if (cascade) std::call_once(change.known, [&] { change.value = angle_change(row); });
  const double mach = cascade ? c.cascade_mach : row.mach;
  const double exit_deg = row.exit_deg + (cascade ? change.value * mach * mach : 0.0);
  const SolvedPassage passage = solved(row, c, mach);
  Condition condition;
  condition.words = fmt::format("{} cells, planes at {} and {} widths, Mach {}", c.cells,
                                c.upstream, c.downstream, mach);
  const ExactFigures exact = exact_figures(row, c, mach, exit_deg);
  for (const RowFigure& figure : row_figures)
    condition.findings.push_back({figure.words, figure.unit, figure.exact(exact), {}, 0.0});
  for (int k = 0; k < passage.level_count(); ++k) {
    const auto& summary = passage.solution(k).summary;
    if (summary.status == solver::SolutionStatus::failed)
      throw std::runtime_error(row.name + (": " + summary.reason));
    condition.steady = condition.steady && summary.status == solver::SolutionStatus::steady;
    const auto figures = passage.figures(k);
    for (std::size_t i = 0; i < std::size(row_figures); ++i)
      condition.findings[i].found.push_back(row_figures[i].found(figures));
  }
  return condition;
}

}  // namespace

std::vector<ExactCase> exact_row_cases() {
  std::vector<ExactCase> cases;
  for (const ExactRow& row : rows) {
    auto change = std::make_shared<AngleChange>();
    cases.push_back({row.name, row.words, row.source, static_cast<int>(row_conditions.size()),
                     [&row, change](int i) {
                       return solve_condition(row, row_conditions[static_cast<std::size_t>(i)],
                                              *change);
                     }});
  }
  return cases;
}

}  // namespace falcate::validation
