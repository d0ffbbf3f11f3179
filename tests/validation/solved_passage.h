/// A blade passage solved on its nested meshes, coarse to fine, with what tests compare: figures,
/// total-pressure loss, entropy error and surface Mach number on every mesh.
#pragma once
#include <string>
#include <vector>

#include "mesh/blade_outline.h"
#include "mesh/mesh_levels_maker.h"
#include "post/passage_figures.h"
#include "solver/steady_solver.h"

namespace falcate::validation {

struct PassageTask {
  double pitch = 0.0;           ///< m
  double exit_angle = 0.0;      ///< rad, of the metal; for the mesh
  solver::FlowProblem problem;  ///< mesh not yet set
  mesh::MeshOptions mesh;
  solver::SteadyOptions solver;
};

class SolvedPassage {
 public:
  SolvedPassage(const mesh::BladeOutline& outline, const PassageTask& task);

  int level_count() const { return static_cast<int>(solutions_.size()); }
  int finest() const { return level_count() - 1; }
  const mesh::PassageMesh& mesh(int level) const { return meshes_.levels[at(level)]; }
  const solver::FlowSolution& solution(int level) const { return solutions_[at(level)]; }
  solver::FlowProblem problem(int level) const;

  post::PassageFigures figures(int level) const;
  post::SurfaceDistribution surface(int level) const;
  /// Root of the area mean of (p/rho^gamma over that of the supply, less 1)^2.
  double entropy_error(int level) const;

 private:
  static std::size_t at(int level) { return static_cast<std::size_t>(level); }
  PassageTask task_;
  mesh::MeshLevels meshes_;
  std::vector<solver::FlowSolution> solutions_;
};

/// Least-squares slope of log2(error) over the meshes, spacing halved from one to the next.
double observed_order(const std::vector<double>& errors);

/// Rows of a CSV file ('#' comments, first line of words names the columns) as text.
struct CsvTable {
  std::vector<std::string> columns;
  std::vector<std::vector<std::string>> rows;
  std::size_t column(const std::string& name) const;
  double number(std::size_t row, const std::string& column) const;
};
/// `name` of a file in tests/data. Throws std::runtime_error where it cannot be read.
CsvTable read_data(const std::string& name);

}  // namespace falcate::validation
