/// What is solved: one periodic passage with its in- and outflow, SI units.
/// Angles are from the plane of rotation (y axis), radians, 0 to pi: u = w sin(angle), v = w
/// cos(angle).
#pragma once
#include <functional>
#include <optional>

#include "mesh/passage_mesh.h"
#include "solver/flow_solution.h"
#include "solver/gas.h"

namespace falcate::solver {

/// State at rest and direction of the (relative) inflow. With `mach` the full inlet state is given:
/// it starts the flow and, where the relative flow is supersonic and its axial part subsonic, sets
/// the simple-wave invariant |theta| + nu(M) that enters the row (unique incidence stays free).
struct InletCondition {
  double total_pressure = 0.0;     ///< Pa
  double total_temperature = 0.0;  ///< K
  double angle = 0.0;              ///< rad from the plane of rotation
  std::optional<double> mach;
  /// The row does not swallow the supersonic stream: it enters subsonic, behind a normal shock at
  /// `mach`, at the same angle, and what is not swallowed spills past.
  bool behind_shock = false;
};

/// Total pressure that enters the row, Pa: behind the normal shock where there is one.
double entering_total_pressure(const InletCondition& inlet, const Gas& gas);

struct FlowProblem {
  const mesh::PassageMesh* mesh = nullptr;
  Gas gas;
  InletCondition inlet;
  double exit_pressure = 0.0;  ///< Pa, static, mixed out
  /// State on `prescribed` patches; needed only where the mesh has one.
  std::function<Primitive(const mesh::Point&)> prescribed;
};

}  // namespace falcate::solver
