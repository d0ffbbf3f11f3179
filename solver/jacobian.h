/// Exact derivative of the second-order residual with respect to the primitive variables of every
/// cell, in double precision: limiter, gradients, walls and the non-local planes included. It is
/// applied, not assembled: each face keeps its derivatives (flux_derivative.h); a product runs the
/// gradients and faces on the vector, a transposed one runs them backwards, as adjoints need.
/// Source: Griewank & Walther, Evaluating Derivatives, SIAM 2008, ch. 3.
#pragma once
#include "solver/block_matrix.h"
#include "solver/flux_derivative.h"

namespace falcate::solver {

class Jacobian {
 public:
  explicit Jacobian(const Residual& residual);
  /// Sets the point at which the derivative is taken.
  void linearise(CellStates cells);
  /// y = dR/dq x; the same bits for every number of threads.
  void multiply(const Vector& x, Vector& y) const;
  /// y = (dR/dq)^T x
  void multiply_transposed(const Vector& x, Vector& y) const;

 private:
  void interior_products(CellStates x, std::span<State<double>> fluxes) const;
  void boundary_products(CellStates x, std::span<State<double>> fluxes) const;
  void planes_transposed(const Vector& x, Vector& y) const;

  const Residual& residual_;
  std::vector<State<double>> cells_;
  std::vector<FaceDerivative> faces_;
  std::vector<SideDerivative> boundary_;       ///< walls and prescribed patches
  mutable CellGradients slopes_;               ///< of the vector multiplied
  mutable std::vector<State<double>> fluxes_;  ///< products face by face
};

}  // namespace falcate::solver
