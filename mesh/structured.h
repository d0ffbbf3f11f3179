/// Meshes of mapped squares, for verification: quadrilaterals, triangles or both.
///
/// Cells are laid out on the unit square (xi along i, eta along j) and carried to the plane by a
/// mapping, which must keep orientation. Boundary midpoints are the mapping of the parameter
/// middle, hence on the true curve. Errors: `MeshError` (from PassageMesh::build) where the mapping
/// folds; `assert` for counts below one.
#pragma once
#include <array>
#include <functional>

#include "mesh/passage_mesh.h"

namespace falcate::mesh {

enum class CellKind { quads, triangles, mixed };  ///< mixed: blocks of 2 x 2 in turn

/// `sides` are south (eta = 0), east (xi = 1), north (eta = 1), west (xi = 0). A `pitch` above zero
/// makes north the periodic image of south: its nodes are set to south + (0, pitch). `perturbation`
/// moves the interior nodes at random (the same on every run), as a fraction of the spacing.
RawMesh structured(int ni, int nj, CellKind kind, const std::function<Point(double, double)>& map,
                   const std::array<PatchKind, 4>& sides, double pitch = 0.0,
                   double perturbation = 0.0);

}  // namespace falcate::mesh
