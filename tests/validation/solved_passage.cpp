#include "tests/validation/solved_passage.h"

#include <algorithm>
#include <cmath>
#include <fstream>
#include <sstream>
#include <stdexcept>

namespace falcate::validation {

SolvedPassage::SolvedPassage(const mesh::BladeOutline& outline, const PassageTask& task)
    : task_(task),
      meshes_(mesh::make_mesh_levels(outline, task.pitch, task.problem.inlet.angle, task.exit_angle,
                                     task.mesh)) {
  for (std::size_t k = 0; k < meshes_.levels.size(); ++k) {
    std::vector<solver::Primitive> start;
    if (k > 0)
      start = solver::prolong(solutions_.back().cells, meshes_.levels[k - 1], meshes_.levels[k],
                              meshes_.parent[k]);
    solutions_.push_back(solver::solve_steady(problem(static_cast<int>(k)), task_.solver, start));
  }
}

solver::FlowProblem SolvedPassage::problem(int level) const {
  solver::FlowProblem problem = task_.problem;
  problem.mesh = &mesh(level);
  return problem;
}

post::PassageFigures SolvedPassage::figures(int level) const {
  return post::passage_figures(problem(level), solution(level), {});
}

post::SurfaceDistribution SolvedPassage::surface(int level) const {
  return post::surface_distribution(problem(level), solution(level),
                                    task_.problem.inlet.total_pressure);
}

double SolvedPassage::entropy_error(int level) const {
  const double gamma = task_.problem.gas.heat_capacity_ratio;
  const auto& inlet = task_.problem.inlet;
  const double density =
      inlet.total_pressure / (task_.problem.gas.gas_constant * inlet.total_temperature);
  double sum = 0.0, area = 0.0;
  for (int i = 0; i < mesh(level).cell_count(); ++i) {
    const auto& q = solution(level).cells[at(i)];
    const double entropy =
        q.pressure / inlet.total_pressure * std::pow(density / q.density, gamma) - 1.0;
    sum += mesh(level).areas()[at(i)] * entropy * entropy;
    area += mesh(level).areas()[at(i)];
  }
  return std::sqrt(sum / area);
}

double observed_order(const std::vector<double>& errors) {
  double sxx = 0.0, sxy = 0.0;
  const double middle = 0.5 * static_cast<double>(errors.size() - 1);
  for (std::size_t i = 0; i < errors.size(); ++i) {
    const double x = middle - static_cast<double>(i);
    sxx += x * x;
    sxy += x * std::log2(errors[i]);
  }
  return sxy / sxx;
}

namespace {
std::vector<std::string> fields_of(const std::string& line) {
  std::vector<std::string> fields;
  std::istringstream stream(line);
  for (std::string field; std::getline(stream, field, ',');) fields.push_back(field);
  return fields;
}
}  // namespace

std::size_t CsvTable::column(const std::string& name) const {
  const auto found = std::find(columns.begin(), columns.end(), name);
  if (found == columns.end()) throw std::runtime_error("no column " + name);
  return static_cast<std::size_t>(found - columns.begin());
}

double CsvTable::number(std::size_t row, const std::string& name) const {
  return std::stod(rows[row].at(column(name)));
}

CsvTable read_data(const std::string& name) {
  std::ifstream file(std::string(FALCATE_SOURCE_DIR "/tests/data/") + name);
  if (!file) throw std::runtime_error("cannot read " + name);
  CsvTable table;
  for (std::string line; std::getline(file, line);) {
    if (!line.empty() && line.back() == '\r') line.pop_back();
    if (line.empty() || line[0] == '#') continue;
    if (table.columns.empty())
      table.columns = fields_of(line);
    else
      table.rows.push_back(fields_of(line));
  }
  return table;
}

}  // namespace falcate::validation
