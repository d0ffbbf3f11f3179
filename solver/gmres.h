/// GMRES with right preconditioning for A x = b, restarted.
/// Stops when |b - A x| <= tolerance |b| or after max_iterations. In single precision throughout:
/// for tolerances down to about 1e-5. Classical Gram-Schmidt, a second time where cancellation
/// calls for it. Sums run over chunks of fixed length in a fixed order: the same bits for every
/// number of threads. Sources: Saad & Schultz, SIAM J. Sci. Stat. Comput. 7(3) (1986) 856-869;
/// Daniel, Gragg, Kaufman & Stewart, Math. Comput. 30 (1976) 772-795 (second orthogonalisation).
#pragma once
#include <functional>

#include "solver/block_matrix.h"

namespace falcate::solver {

struct GmresOptions {
  double tolerance = 1e-2;
  int max_iterations = 120;
};

struct GmresSummary {
  bool converged = false;
  int iterations = 0;
  double reduction = 1.0;  ///< |b - A x| / |b|
};

using LinearMap = std::function<void(const SingleVector&, SingleVector&)>;

/// Holds the memory of the iteration, for many systems of one size.
class Gmres {
 public:
  Gmres(Eigen::Index size, int restart);
  /// `x` holds the first guess and receives the answer.
  GmresSummary solve(const LinearMap& multiply, const LinearMap& precondition,
                     const SingleVector& b, SingleVector& x, const GmresOptions& options);

 private:
  struct Rotation {
    double c = 1.0, s = 0.0;
  };
  int cycle(const LinearMap& multiply, const LinearMap& precondition, double target, int length,
            SingleVector& x);
  void expand(int k);
  double orthogonalise(int k);
  void correct(const LinearMap& precondition, int k, SingleVector& x);

  int restart_;
  Eigen::MatrixXf basis_;
  SingleVector residual_, direction_, next_;
  Eigen::MatrixXd hessenberg_;
  Vector rhs_;
  std::vector<Rotation> rotations_;
};

}  // namespace falcate::solver
