// Helpers of the verification tests: solve a mesh with prescribed exact boundaries, measure errors.
#pragma once
#include <gtest/gtest.h>

#include <cmath>
#include <functional>

#include "mesh/structured.h"
#include "solver/steady_solver.h"

namespace falcate::verification {

struct Errors {
  double entropy = 0.0, pressure = 0.0;  ///< area-weighted L2
};

/// Least-squares slope of log(error) against log(h), h halved from one entry to the next.
inline double observed_order(const std::vector<double>& errors) {
  double sxx = 0.0, sxy = 0.0;
  const double middle = 0.5 * static_cast<double>(errors.size() - 1);
  for (std::size_t i = 0; i < errors.size(); ++i) {
    const double x = -(static_cast<double>(i) - middle) * std::log(2.0);
    sxx += x * x;
    sxy += x * std::log(errors[i]);
  }
  return sxy / sxx;
}

/// `exact` in units with total density 1 and total pressure 1/gamma (speed of sound at rest 1).
inline Errors solved_errors(const mesh::PassageMesh& mesh, double gamma,
                            const std::function<solver::Primitive(const mesh::Point&)>& exact) {
  solver::FlowProblem problem;
  problem.mesh = &mesh;
  problem.gas = {gamma, 1.0};
  problem.inlet = {1.0 / gamma, 1.0 / gamma, std::acos(0.0), {}};
  problem.exit_pressure = 0.5 / gamma;
  problem.prescribed = exact;
  std::vector<solver::Primitive> start;
  for (const auto& x : mesh.centroids()) start.push_back(exact(x));
  const auto solution = solver::solve_steady(problem, {}, start);
  EXPECT_EQ(solution.summary.status, solver::SolutionStatus::steady) << solution.summary.reason;
  Errors e;
  double area = 0.0;
  for (int i = 0; i < mesh.cell_count(); ++i) {
    const auto ui = static_cast<std::size_t>(i);
    const auto& q = solution.cells[ui];
    const double entropy = q.pressure * gamma / std::pow(q.density, gamma) - 1.0;
    const double dp = q.pressure - exact(mesh.centroids()[ui]).pressure;
    e.entropy += mesh.areas()[ui] * entropy * entropy;
    e.pressure += mesh.areas()[ui] * dp * dp;
    area += mesh.areas()[ui];
  }
  return {std::sqrt(e.entropy / area), std::sqrt(e.pressure / area)};
}

struct OrderCase {
  const char* name;
  mesh::CellKind cells;
  double perturbation;  ///< of the coarsest mesh; halved with the spacing, as on nested meshes
};

inline const OrderCase order_cases[] = {{"quads", mesh::CellKind::quads, 0.0},
                                        {"stirred_quads", mesh::CellKind::quads, 0.15},
                                        {"triangles", mesh::CellKind::triangles, 0.0},
                                        {"mixed", mesh::CellKind::mixed, 0.0}};

}  // namespace falcate::verification
