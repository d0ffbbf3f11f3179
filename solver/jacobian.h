/// Exact derivative of the second-order residual with respect to the primitive variables of every
/// cell: limiter, gradients, walls and the non-local planes included. It is applied, not assembled:
/// each face keeps dF/dq_left, dF/dq_right and the derivatives of its face values, made by dual
/// numbers at linearise(); a product runs the gradients and faces on the vector.
/// Source: Griewank & Walther, Evaluating Derivatives, SIAM 2008, ch. 3 (forward mode).
#pragma once
#include "solver/block_matrix.h"
#include "solver/residual.h"

namespace falcate::solver {

class Jacobian {
 public:
  explicit Jacobian(const Residual& residual);
  /// Sets the point at which the derivative is taken.
  void linearise(std::span<const State<double>> cells);
  /// y = dR/dq x; the same bits for every number of threads.
  void multiply(const Vector& x, Vector& y) const;
  /// y = (dR/dq)^T x, for adjoints.
  void multiply_transposed(const Vector& x, Vector& y) const;

  /// A matrix that couples face neighbours only, for preconditioners: the flux derivatives as they
  /// are, face values between that of the own cell (upwind, as in the first-order scheme) and the
  /// mean of both; planes respond as to a uniform change.
  BlockMatrix compact_pattern() const;
  void assemble_compact(BlockMatrix& out) const;

 private:
  /// dF/d(face value) and the derivatives of the face value, side by side.
  struct SideDerivative {
    Eigen::Matrix4d flux;  ///< with respect to this side's face value
    Eigen::Array4d own, other, along_difference, along_offset;
  };
  struct FaceDerivative {
    SideDerivative left, right;
  };
  struct PlaneCell {
    std::size_t face;
    Eigen::Matrix4d block;  ///< response of the flux to a change of all cells of the plane alike
  };

  void linearise_interior(std::span<const State<double>> cells);
  void linearise_boundary(std::span<const State<double>> cells);
  void linearise_planes();
  void interior_products(std::span<const State<double>> x, std::span<State<double>> fluxes) const;
  void boundary_products(std::span<const State<double>> x, std::span<State<double>> fluxes) const;
  void plane_products(std::span<const State<double>> x, std::span<State<double>> fluxes) const;
  double mach_of(int cell) const;
  void planes_transposed(const Vector& x, Vector& y) const;

  const Residual& residual_;
  std::vector<State<double>> cells_;
  std::vector<FaceDerivative> faces_;
  std::vector<SideDerivative> boundary_;  ///< walls and prescribed patches
  std::vector<PlaneCell> planes_;
  std::vector<Gradient<double>> gradients_;
  mutable std::vector<Gradient<double>> slopes_;  ///< of the vector multiplied
  mutable std::vector<State<double>> fluxes_;     ///< products face by face
};

}  // namespace falcate::solver
