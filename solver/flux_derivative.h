/// Exact derivatives of the face fluxes of the second-order residual, face by face.
///
/// A side's face value, variable by variable, is a function of its own cell, the other cell and the
/// own gradient along two directions; the flux is a function of both face values:
///   dF = sum over sides of flux * (own dq_own + other dq_other
///        + along_difference (dgrad . difference) + along_offset (dgrad . offset))
/// All taken by dual numbers. The states on an in- or outflow plane hang on all cells along it.
/// Source: Griewank & Walther, Evaluating Derivatives, SIAM 2008, ch. 3 (forward mode).
#pragma once
#include <Eigen/Core>

#include "solver/residual.h"

namespace falcate::solver {

/// dF/d(face value) and the derivatives of the face value, variable by variable.
struct SideDerivative {
  Eigen::Matrix4d flux;
  Eigen::Array4d own, other, along_difference, along_offset;
};
struct FaceDerivative {
  SideDerivative left, right;
};

using CellStates = std::span<const State<double>>;
using CellGradients = std::vector<Gradient<double>>;

FaceDerivative interior_derivative(const Residual& residual, CellStates cells,
                                   const CellGradients& gradients, std::size_t face);
/// Of a wall or a face with a prescribed state outside; `other` and `along_difference` are zero.
SideDerivative boundary_derivative(const Residual& residual, CellStates cells,
                                   const CellGradients& gradients, std::size_t face,
                                   mesh::PatchKind kind);

/// Calls visit(face, kind) for each face of walls and of patches with prescribed states.
template <class Visit>
void for_each_closed_face(const mesh::PassageMesh& mesh, const Visit& visit) {
  for (const auto& patch : mesh.patches()) {
    if (!mesh::is_wall(patch.kind) && patch.kind != mesh::PatchKind::prescribed) continue;
    for (int i = patch.first_face; i < patch.first_face + patch.face_count; ++i)
      visit(static_cast<std::size_t>(i), patch.kind);
  }
}

/// Response of the flux through each face of the planes to a change of all cells of its plane
/// alike.
struct PlaneResponse {
  std::size_t face;
  Eigen::Matrix4d block;
};
std::vector<PlaneResponse> plane_responses(const Residual& residual, CellStates cells);

/// Change of the fluxes through the faces of the planes; change(cell) is that of a cell's state,
/// and put(face, state) takes each answer.
template <class Change, class Put>
void plane_products(const Residual& residual, CellStates cells, const Change& change,
                    const Put& put) {
  residual.for_each_plane([&](const Plane& plane, bool inflow) {
    std::vector<State<Dual<1>>> beside(plane.waves.size());
    for (std::size_t i = 0; i < beside.size(); ++i) {
      const std::size_t cell = residual.cell_at(plane, i);
      const State<double> by = change(cell);
      for (std::size_t k = 0; k < 4; ++k) {
        beside[i][k] = Dual<1>(cells[cell][k]);
        beside[i][k].derivative[0] = by[k];
      }
    }
    const auto through = residual.through_plane<Dual<1>>(plane, inflow, beside);
    for (std::size_t i = 0; i < through.size(); ++i) {
      State<double> out;
      for (std::size_t k = 0; k < 4; ++k) out[k] = through[i][k].derivative[0];
      put(static_cast<std::size_t>(plane.first_face) + i, out);
    }
  });
}

/// Dual numbers with seeds first, first + 1, ... in the four variables, or with none.
template <int N>
State<Dual<N>> seeded(const State<double>& q, int first = 0) {
  return {Dual<N>::seeded(q[0], first), Dual<N>::seeded(q[1], first + 1),
          Dual<N>::seeded(q[2], first + 2), Dual<N>::seeded(q[3], first + 3)};
}
template <int N>
State<Dual<N>> constant(const State<double>& q) {
  return {Dual<N>(q[0]), Dual<N>(q[1]), Dual<N>(q[2]), Dual<N>(q[3])};
}
/// Derivatives with respect to seeds first, ..., first + 3; a row for each component.
template <int N>
Eigen::Matrix4d block_of(const State<Dual<N>>& f, int first = 0) {
  Eigen::Matrix4d block;
  for (int row = 0; row < 4; ++row)
    for (int col = 0; col < 4; ++col)
      block(row, col) =
          f[static_cast<std::size_t>(row)].derivative[static_cast<std::size_t>(first + col)];
  return block;
}

}  // namespace falcate::solver
