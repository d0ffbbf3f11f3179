/// Flows with exact solutions on families of meshes: errors, and the order at which they fall.
/// Units: density and speed of sound at rest (isentropic vortex: far away) 1, so pressure there
/// 1/gamma.
#pragma once
#include <functional>
#include <string>
#include <vector>

#include "mesh/structured.h"
#include "solver/steady_solver.h"

namespace falcate::verification {

inline constexpr double gamma_of_air = 1.4;

struct OrderCase {
  const char* name;
  mesh::CellKind cells;
  double perturbation;  ///< of the coarsest mesh; halved with the spacing, as on nested meshes
};

inline constexpr OrderCase order_cases[] = {{"quads", mesh::CellKind::quads, 0.0},
                                            {"stirred_quads", mesh::CellKind::quads, 0.15},
                                            {"triangles", mesh::CellKind::triangles, 0.0},
                                            {"mixed", mesh::CellKind::mixed, 0.0}};

struct ExactFlow {
  const char* name;
  const char* words;   ///< for a page
  const char* source;  ///< for a page
  int coarsest;        ///< cells across on the coarsest of three meshes
  solver::Primitive (*exact)(const mesh::Point&);
  /// Walls on the true curves, the exact state prescribed elsewhere.
  mesh::PassageMesh (*mesh)(int n, const OrderCase& c);
};
const std::vector<ExactFlow>& exact_flows();
const ExactFlow& exact_flow(const std::string& name);  ///< std::out_of_range where there is none

struct Errors {
  double entropy = 0.0, pressure = 0.0;  ///< area-weighted L2
  solver::SteadySummary summary;
};
Errors solved_errors(const ExactFlow& flow, int n, const OrderCase& c);

/// Least-squares slope of log(error) against log(h), h halved from one entry to the next.
double observed_order(const std::vector<double>& errors);

/// Three meshes, spacing halved from one to the next.
struct OrderStudy {
  std::vector<Errors> errors;
  double entropy_order = 0.0, pressure_order = 0.0;
};
OrderStudy order_study(const ExactFlow& flow, const OrderCase& c);

/// Point of Ringleb's streamline k with speed q; side +1 above the axis of symmetry, -1 below.
mesh::Point ringleb_point(double k, double q, double side);

}  // namespace falcate::verification
