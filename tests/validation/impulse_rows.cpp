#include "tests/validation/impulse_rows.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "mesh/blade_shapes.h"

namespace falcate::validation {
namespace {

constexpr double degree = std::numbers::pi / 180.0;
constexpr const char* s1 = "exact_supersonic_impulse_S1_M2.0_b65.csv";
constexpr const char* s3 = "exact_supersonic_impulse_S3_M2.5_b70.csv";
constexpr double s1_pitch = 0.3002776851, s3_pitch = 0.2548557998;

}  // namespace

// Where the wall's curvature jumps the exact Mach number along it has a kink, and the computed one
// swings about it for some ten faces: the worst face is off by 1.7 % on 8,000 cells and by 1.2 % on
// 20,000, always beside a kink; further than 0.03 widths from the kinks, by 1.1 % and 0.4 %.
const std::vector<ImpulseRow>& impulse_rows() {
  static const std::vector<ImpulseRow> rows = {
      {"S1_8000", s1, s1_pitch, 2.0, 25.0, 8000, 0.1, 0.002, 0.003, 0.011, 0.018},
      {"S1_20000", s1, s1_pitch, 2.0, 25.0, 20000, 0.05, 0.001, 0.0015, 0.01, 0.013},
      {"S3_8000", s3, s3_pitch, 2.5, 20.0, 8000, 0.1, 0.002, 0.003, 0.011, 0.018},
      {"S3_20000", s3, s3_pitch, 2.5, 20.0, 20000, 0.05, 0.001, 0.0015, 0.01, 0.013},
  };
  return rows;
}

SolvedPassage solved(const ImpulseRow& row) {
  PassageTask task;
  task.pitch = row.pitch * impulse_width;
  task.exit_angle = std::numbers::pi - row.inlet_deg * degree;
  task.problem.inlet = {impulse_total_pressure, 300.0, row.inlet_deg * degree, row.mach};
  task.problem.exit_pressure =
      impulse_total_pressure * std::pow(1.0 + 0.2 * row.mach * row.mach, -3.5);
  task.mesh.cells = row.cells;
  const std::string file = std::string(FALCATE_SOURCE_DIR "/tests/data/") + row.file;
  return {mesh::coordinates_blade(file, impulse_width), task};
}

ExactSide::ExactSide(const ImpulseRow& row, const std::string& side) {
  const CsvTable table = read_data(row.file);
  for (std::size_t i = 0; i < table.rows.size(); ++i) {
    if (table.rows[i][table.column("side")] != side) continue;
    x.push_back(table.number(i, "x_cax"));
    mach.push_back(table.number(i, "M"));
  }
  const auto slope = [&](std::size_t i) { return (mach[i + 1] - mach[i]) / (x[i + 1] - x[i]); };
  for (std::size_t i = 1; i + 1 < x.size(); ++i)
    if (std::abs(slope(i) - slope(i - 1)) > 1.0) kinks.push_back(x[i]);
}

double ExactSide::at(double place) const {
  const auto next = std::upper_bound(x.begin() + 1, x.end() - 1, place) - x.begin();
  const auto i = static_cast<std::size_t>(next) - 1;
  return mach[i] + (mach[i + 1] - mach[i]) * (place - x[i]) / (x[i + 1] - x[i]);
}

double ExactSide::from_kink(double place) const {
  double least = 1.0;
  for (const double kink : kinks) least = std::min(least, std::abs(place - kink));
  return least;
}

SurfaceError surface_error(const ImpulseRow& row, const SolvedPassage& passage, int level) {
  const auto surface = passage.surface(level);
  SurfaceError error;
  double sum = 0.0, faces = 0.0;
  const auto take = [&](const std::vector<post::SurfacePoint>& wall, const ExactSide& exact) {
    for (const auto& face : wall) {
      const double x = face.x / impulse_width;
      if (x < 0.05 || x > 0.95) continue;
      const double share = std::abs(face.isentropic_mach / exact.at(x) - 1.0);
      error.worst = std::max(error.worst, share);
      if (exact.from_kink(x) > 0.03) error.between_kinks = std::max(error.between_kinks, share);
      sum += share * share;
      faces += 1.0;
    }
  };
  take(surface.suction, ExactSide(row, "suction"));
  take(surface.pressure, ExactSide(row, "pressure"));
  error.root_mean_square = std::sqrt(sum / faces);
  return error;
}

}  // namespace falcate::validation
