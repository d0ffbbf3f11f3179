/// Solves one operating point on nested meshes, coarse to fine, and draws its figures with error
/// bars. A level starts from the solution of the point before it on the same level, moved by the
/// change that the coarser level has seen; without one, from the coarser level. A level that does
/// not settle is tried once more from a cold start. Never throws for a flow that cannot be solved:
/// the result then carries a reason in `failure`.
#pragma once
#include <vector>

#include "cases/blade_row.h"
#include "cases/case.h"
#include "cases/operating_points.h"
#include "cases/run_observer.h"
#include "mesh/passage_mesh.h"
#include "post/point_result.h"

namespace falcate::cases {

/// Cell states of every level, coarse first; empty where there is no solution.
using LevelStates = std::vector<std::vector<solver::Primitive>>;

struct SolvedPoint {
  post::PointResult result;
  LevelStates states;
};

SolvedPoint solve_point(const Case& input, const mesh::MeshLevels& meshes,
                        const OperatingPoint& point, const LevelStates& before,
                        RunObserver& observer);

}  // namespace falcate::cases
