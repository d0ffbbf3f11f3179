/// A mesh of one passage whose boundary edges know the curves they lie on: what is smoothed and
/// split before it becomes a PassageMesh. Nodes of the boundary come first, in boundary order.
/// Units: metres. Errors: `MeshError` where the mesher's answer does not fit its request.
#pragma once
#include <array>
#include <vector>

#include "mesh/mesher_process.h"
#include "mesh/passage_boundary.h"

namespace falcate::mesh {

/// The boundary curves cut into edges: parameters and points, ends included.
struct BoundaryNodes {
  std::vector<std::vector<double>> parameters;
  std::vector<std::vector<Point>> points;
};

/// An even number of edges on every curve, as long as the field asks; upper periodic nodes are the
/// lower ones plus the pitch to the last bit.
BoundaryNodes discretised(const PassageBoundary& boundary, const SizeField& size);

struct CurvedMesh {
  struct Edge {
    int first, second;  ///< along the boundary, fluid on the left
    int curve;
    double from, to;  ///< parameters on the curve
  };
  double pitch = 0.0;
  std::vector<Point> nodes;
  std::vector<std::array<int, 4>> cells;  ///< a triangle ends with -1
  std::vector<Edge> edges;
  std::vector<std::array<int, 2>> periodic;  ///< {lower, upper}
};

/// The mesher's cells with the boundary nodes back on their curves, in an order that does not
/// depend on the mesher's.
CurvedMesh curved_mesh(const PassageBoundary& boundary, const BoundaryNodes& nodes,
                       const MesherAnswer& answer, double pitch);

/// Every cell split in four (children of cell c at 4c to 4c + 3), new wall nodes on the true curve.
CurvedMesh split_in_four(const CurvedMesh& mesh, const PassageBoundary& boundary);

/// Least corner quality of a cell: det/(|a||b|) of its corner vectors (scaled Jacobian; 1 for a
/// rectangle; a triangle's is divided by that of the equilateral one). <= 0: folded.
double scaled_jacobian(const std::vector<Point>& nodes, const std::array<int, 4>& cell);

/// Moves inner and periodic nodes (wall, inlet and outlet nodes stay) where that makes the worst
/// cell around them better: a guarded pattern search, which also unfolds cells.
void smooth(CurvedMesh& mesh, const PassageBoundary& boundary);

RawMesh raw_mesh(const CurvedMesh& mesh, const PassageBoundary& boundary);

}  // namespace falcate::mesh
