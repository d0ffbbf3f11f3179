/// The blade rows that benchmarks solve, as a table, and their solution from a cold start.
/// Pressures are over the inlet's total pressure; angles in degrees from the plane of rotation.
/// Sources of the exact rows: the first line of their files in tests/data. Channels are invented.
#pragma once
#include <string>
#include <vector>

#include "mesh/passage_mesh.h"
#include "solver/flow_problem.h"
#include "tests/benchmarks/timing.h"

namespace falcate::benchmarks {

struct PassageRow {
  const char* name;
  const char* file;   ///< in tests/data; nullptr: a channel blade
  double pitch;       ///< over width
  double inlet_mach;  ///< of the stream; 0: free, set by the exit pressure
  double inlet_angle, exit_angle;
  double exit_mach;        ///< isentropic, gives the exit pressure
  double pressure_factor;  ///< on that exit pressure
  bool strong_shocks;
};

const std::vector<PassageRow>& passage_rows();
/// Throws std::out_of_range.
const PassageRow& passage_row(const std::string& name);

mesh::MeshLevels passage_meshes(const PassageRow& row, int cells);
/// Its mesh is not yet set.
solver::FlowProblem passage_problem(const PassageRow& row);

struct ColdSolve {
  Elapsed time;  ///< all meshes
  int steps = 0;
  long krylov_iterations = 0;
  solver::FlowSolution finest;
};

/// Coarse to fine to a residual drop of 1e-10, on as many threads as OpenMP is set to.
ColdSolve solve_from_cold(const PassageRow& row, const mesh::MeshLevels& meshes);

/// Wall time of one second-order residual evaluation, the unit REE (median_seconds).
double residual_seconds(const solver::FlowProblem& problem,
                        const std::vector<solver::Primitive>& cells);

}  // namespace falcate::benchmarks
