/// Exact derivative of the second-order residual with respect to the primitive variables of every
/// cell, as a block matrix: limiter, gradients, walls and the non-local planes included.
/// Each face gives dF/dq_left, dF/dq_right by dual numbers; the chain rule through reconstruction
/// and gradient stencils spreads them over the cells.
/// Source: Griewank & Walther, Evaluating Derivatives, SIAM 2008, ch. 3 (forward mode).
#pragma once
#include "solver/block_matrix.h"
#include "solver/residual.h"

namespace falcate::solver {

class Jacobian {
 public:
  explicit Jacobian(const Residual& residual);
  /// `matrix()` becomes dR/dq at `cells`.
  void assemble(std::span<const State<double>> cells);
  BlockMatrix& matrix() { return matrix_; }
  const BlockMatrix& matrix() const { return matrix_; }
  /// The same at the cells of the last assemble(), but with the derivative of face values moved
  /// towards that of the first-order scheme; `second_order_part` 1 gives matrix(). For
  /// preconditioners. `out` has the pattern of matrix().
  void assemble_blend(double second_order_part, BlockMatrix& out) const;

 private:
  /// dF/d(face value) and the derivatives of the face value, side by side.
  struct SideDerivative {
    Block flux;  ///< with respect to this side's face value
    State<double> own, other, along_difference, along_offset;
  };
  struct FaceDerivative {
    SideDerivative left, right;
  };
  struct PlaneBlock {
    int row, column;
    Block block;
  };

  void linearise_interior(std::span<const State<double>> cells);
  void linearise_boundary(std::span<const State<double>> cells);
  void linearise_planes(std::span<const State<double>> cells);
  void gather_interior(double part, BlockMatrix& out) const;
  void gather_boundary(double part, BlockMatrix& out) const;

  const Residual& residual_;
  BlockMatrix matrix_;
  std::vector<FaceDerivative> faces_;
  std::vector<SideDerivative> boundary_;  ///< walls and prescribed patches
  std::vector<PlaneBlock> planes_;
  std::vector<Gradient<double>> gradients_;
};

}  // namespace falcate::solver
