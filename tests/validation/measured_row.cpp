#include "tests/validation/measured_row.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <stdexcept>

#include "mesh/blade_shapes.h"

namespace falcate::validation {
namespace {

constexpr double degree = std::numbers::pi / 180.0;
// From the header of the geometry file; the coordinates are in axial chords and reach a little
// beyond them where the edges are round.
constexpr double axial_chord = 0.047614, pitch = 0.032950;
constexpr double metal_exit_angle = 53.8;
constexpr const char* geometry = "vki_spleen_c1_geometry.csv";

struct Extent {
  double least = std::numeric_limits<double>::infinity(), greatest = -least;
};

Extent extent_of_blade() {
  const CsvTable table = read_data(geometry);
  Extent extent;
  for (std::size_t i = 0; i < table.rows.size(); ++i) {
    extent.least = std::min(extent.least, table.number(i, "x_cax"));
    extent.greatest = std::max(extent.greatest, table.number(i, "x_cax"));
  }
  return extent;
}

/// Rows of a condition; the label's number, since one file writes 0.9 and the other 0.90.
std::vector<std::size_t> rows_of(const CsvTable& table, const MeasuredCondition& condition) {
  std::vector<std::size_t> rows;
  for (std::size_t i = 0; i < table.rows.size(); ++i)
    if (table.number(i, "Re2is_k") == std::stod(condition.reynolds_thousands) &&
        table.number(i, "M2is") == std::stod(condition.mach_label))
      rows.push_back(i);
  if (rows.empty()) throw std::runtime_error("no data at " + condition.mach_label);
  return rows;
}

/// Means over the last pitch of the traverse, trapezoids between its points.
void take_traverse(const CsvTable& table, const std::vector<std::size_t>& rows, Measurement& to) {
  const double last = table.number(rows.back(), "y_g");
  double width = 0.0, mass = 0.0, axial = 0.0, tangential = 0.0;
  for (std::size_t k = 0; k + 1 < rows.size(); ++k) {
    const double from = std::max(table.number(rows[k], "y_g"), last - 1.0);
    const double half = 0.5 * (table.number(rows[k + 1], "y_g") - from);
    if (half <= 0.0) continue;
    for (const std::size_t i : {rows[k], rows[k + 1]}) {
      const double speed = table.number(i, "V_ax"), flow = half * table.number(i, "rho") * speed;
      width += half;
      mass += flow;
      axial += flow * speed;
      tangential += flow * speed * std::tan(table.number(i, "exit_angle_deg") * degree);
      to.exit_pressure += half * table.number(i, "Ps6_P01");
      to.total_pressure += flow * table.number(i, "P06_P01");
    }
  }
  to.exit_angle = std::atan(tangential / axial) / degree;
  to.exit_pressure /= width;
  to.total_pressure /= mass;
}

std::vector<Tap> wall_of(const SolvedPassage& passage) {
  const double shift = extent_of_blade().least;
  const auto surface = passage.surface(passage.finest());
  std::vector<Tap> wall;
  for (const auto& face : surface.suction)
    wall.push_back({"suction", face.x / axial_chord + shift, face.isentropic_mach});
  for (const auto& face : surface.pressure)
    wall.push_back({"pressure", face.x / axial_chord + shift, face.isentropic_mach});
  return wall;
}

}  // namespace

const std::vector<MeasuredCondition>& measured_conditions() {
  static const std::vector<MeasuredCondition> all = {
      {"70", "0.70"}, {"70", "0.90"}, {"120", "0.90"}};
  return all;
}

Measurement measurement(const MeasuredCondition& condition) {
  Measurement m;
  const CsvTable traverse = read_data("vki_spleen_c1_exit_traverse.csv");
  take_traverse(traverse, rows_of(traverse, condition), m);
  const CsvTable summary = read_data("vki_spleen_c1_summary.csv");
  const std::size_t row = rows_of(summary, condition).front();
  m.inlet_angle = summary.number(row, "inlet_angle_deg");
  m.inlet_mach = summary.number(row, "M_inlet");
  const CsvTable taps = read_data("vki_spleen_c1_blade_pressure.csv");
  for (const std::size_t i : rows_of(taps, condition))
    m.taps.push_back(
        {taps.rows[i][taps.column("side")], taps.number(i, "x_cax"), taps.number(i, "Mis")});
  return m;
}

ComputedRow computed_row(const Measurement& measured, int cells) {
  const Extent extent = extent_of_blade();
  const auto outline =
      mesh::coordinates_blade(std::string(FALCATE_SOURCE_DIR "/tests/data/") + geometry,
                              (extent.greatest - extent.least) * axial_chord);
  PassageTask task;
  task.pitch = pitch;
  task.exit_angle = (90.0 + metal_exit_angle) * degree;
  task.problem.inlet = {1e5, 300.0, (90.0 - measured.inlet_angle) * degree, {}};
  task.problem.exit_pressure = 1e5 * measured.exit_pressure;
  task.mesh.cells = cells;
  const SolvedPassage passage(outline, task);
  const auto f = passage.figures(passage.finest());
  return {f.inlet.mach,
          f.exit.angle_deg - 90.0,
          f.exit.mach,
          f.exit.total_pressure_pa / task.problem.inlet.total_pressure,
          passage.mesh(passage.finest()).cell_count(),
          passage.solution(passage.finest()).summary,
          wall_of(passage)};
}

double mach_beside(const ComputedRow& computed, const Tap& tap) {
  const Tap *before = nullptr, *behind = nullptr;
  for (const Tap& face : computed.wall) {
    if (face.side != tap.side) continue;
    if (face.x <= tap.x && (!before || face.x > before->x)) before = &face;
    if (face.x > tap.x && (!behind || face.x < behind->x)) behind = &face;
  }
  if (!before || !behind) throw std::runtime_error("no wall beside the tap");
  const double part = (tap.x - before->x) / (behind->x - before->x);
  return before->mach + part * (behind->mach - before->mach);
}

WallAgreement wall_agreement(const Measurement& measured, const ComputedRow& computed,
                             bool attached) {
  WallAgreement result;
  for (const Tap& tap : measured.taps) {
    if (tap.x < 0.02 || attached != (tap.side == "pressure" || tap.x < 0.65)) continue;
    const double difference = mach_beside(computed, tap) - tap.mach;
    ++result.taps;
    result.root_mean_square += difference * difference;
    result.worst = std::max(result.worst, std::abs(difference));
  }
  result.root_mean_square = std::sqrt(result.root_mean_square / result.taps);
  return result;
}

}  // namespace falcate::validation
