/// Weighted least-squares gradients: grad q_i = sum_j w_ij (q_j - q_i) over the stencil of cell i,
/// exact on linear fields. Weights 1/distance^2. Stencil: the face neighbours (periodic images
/// included); where these are fewer than four (triangles, boundary cells) or nearly in line, their
/// neighbours as well: with three alone second-order schemes on triangles are unstable.
/// Sources: Barth, AGARD R-787 (1992), sec. 4; Haider, Croisille & Courbet, Numer. Math. 113 (2009)
/// 555-600 (stability).
#pragma once
#include <span>
#include <vector>

#include "mesh/passage_mesh.h"

namespace falcate::solver {

class GradientStencil {
 public:
  struct Neighbour {
    int cell;
    mesh::Point weight;  ///< 1/m
  };
  explicit GradientStencil(const mesh::PassageMesh& mesh);
  std::span<const Neighbour> of(int cell) const {
    const auto i = static_cast<std::size_t>(cell);
    return {neighbours_.data() + start_[i], start_[i + 1] - start_[i]};
  }

 private:
  std::vector<std::size_t> start_;
  std::vector<Neighbour> neighbours_;
};

}  // namespace falcate::solver
