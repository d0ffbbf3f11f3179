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
  /// `matrix()` becomes dR/dq at `cells`; with a `second_order_part` below 1 the derivative of face
  /// values is moved that far towards those of the first-order scheme (for preconditioners).
  void assemble(std::span<const State<double>> cells, double second_order_part = 1.0);
  BlockMatrix& matrix() { return matrix_; }
  const BlockMatrix& matrix() const { return matrix_; }

 private:
  /// dF/d(face value) and the derivatives of the face value, side by side.
  struct SideDerivative {
    Block flux;  ///< with respect to this side's face value
    State<double> own, other, along_difference, along_offset;
  };
  struct FaceDerivative {
    SideDerivative left, right;
  };

  void interior(std::span<const State<double>> cells);
  void gather_interior();
  void walls(std::span<const State<double>> cells, const std::vector<Gradient<double>>& gradients);
  void prescribed(std::span<const State<double>> cells,
                  const std::vector<Gradient<double>>& gradients);
  void planes(std::span<const State<double>> cells);

  const Residual& residual_;
  BlockMatrix matrix_;
  std::vector<FaceDerivative> faces_;
  std::vector<Gradient<double>> gradients_;
  double part_ = 1.0;
};

}  // namespace falcate::solver
