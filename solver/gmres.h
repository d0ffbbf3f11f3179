/// GMRES with right preconditioning for A x = b, restarted.
/// Stops when |b - A x| <= tolerance |b| or after max_iterations. Reductions run in a fixed order.
/// Source: Saad & Schultz, SIAM J. Sci. Stat. Comput. 7(3) (1986) 856-869.
#pragma once
#include <functional>

#include "solver/block_matrix.h"

namespace falcate::solver {

struct GmresOptions {
  double tolerance = 1e-2;
  int max_iterations = 120;
  int restart = 60;
};

struct GmresSummary {
  bool converged = false;
  int iterations = 0;
  double reduction = 1.0;  ///< |b - A x| / |b|
};

using LinearMap = std::function<void(const Vector&, Vector&)>;

/// `x` holds the first guess and receives the answer.
GmresSummary gmres(const LinearMap& multiply, const LinearMap& precondition, const Vector& b,
                   Vector& x, const GmresOptions& options);

}  // namespace falcate::solver
