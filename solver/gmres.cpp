#include "solver/gmres.h"

#include <algorithm>
#include <cmath>

namespace falcate::solver {
namespace {

/// Givens rotation that turns (a, b) into (r, 0).
struct Rotation {
  double c = 1.0, s = 0.0;
  Rotation() = default;
  Rotation(double a, double b) {
    const double r = std::hypot(a, b);
    if (r > 0.0) c = a / r, s = b / r;
  }
  void apply(double& a, double& b) const {
    const double t = c * a + s * b;
    b = -s * a + c * b;
    a = t;
  }
};

/// One Arnoldi cycle; adds its correction to x and returns the number of iterations spent.
class Cycle {
 public:
  Cycle(const LinearMap& multiply, const LinearMap& precondition, const Vector& residual,
        int length)
      : multiply_(multiply), precondition_(precondition), length_(length) {
    const double beta = residual.norm();
    basis_.push_back(residual / beta);
    hessenberg_ = Eigen::MatrixXd::Zero(length + 1, length);
    rhs_ = Vector::Zero(length + 1);
    rhs_(0) = beta;
  }

  int run(double target, Vector& x) {
    int k = 0;
    while (k < length_ && std::abs(rhs_(k)) > target) {
      expand(k);
      ++k;
      if (!std::isfinite(rhs_(k))) break;
    }
    correct(k, x);
    return k;
  }

 private:
  void expand(int k) {
    Vector direction, w;
    precondition_(basis_[static_cast<std::size_t>(k)], direction);
    multiply_(direction, w);
    for (int i = 0; i <= k; ++i) {
      hessenberg_(i, k) = w.dot(basis_[static_cast<std::size_t>(i)]);
      w -= hessenberg_(i, k) * basis_[static_cast<std::size_t>(i)];
    }
    const double norm = w.norm();
    basis_.push_back(norm > 0.0 ? Vector(w / norm) : w);
    double next = norm;
    for (int i = 0; i < k; ++i)
      rotations_[static_cast<std::size_t>(i)].apply(hessenberg_(i, k), hessenberg_(i + 1, k));
    rotations_.emplace_back(hessenberg_(k, k), next);
    rotations_.back().apply(hessenberg_(k, k), next);
    rotations_.back().apply(rhs_(k), rhs_(k + 1));
  }

  void correct(int k, Vector& x) {
    if (k == 0) return;
    const Vector y =
        hessenberg_.topLeftCorner(k, k).triangularView<Eigen::Upper>().solve(rhs_.head(k));
    Vector sum = Vector::Zero(x.size()), step;
    for (int i = 0; i < k; ++i) sum += y(i) * basis_[static_cast<std::size_t>(i)];
    precondition_(sum, step);
    x += step;
  }

  const LinearMap& multiply_;
  const LinearMap& precondition_;
  int length_;
  std::vector<Vector> basis_;
  Eigen::MatrixXd hessenberg_;
  Vector rhs_;
  std::vector<Rotation> rotations_;
};

}  // namespace

GmresSummary gmres(const LinearMap& multiply, const LinearMap& precondition, const Vector& b,
                   Vector& x, const GmresOptions& options) {
  GmresSummary summary;
  const double size = b.norm();
  if (size == 0.0) {
    x.setZero(b.size());
    return {true, 0, 0.0};
  }
  Vector product;
  while (true) {
    multiply(x, product);
    const Vector residual = b - product;
    summary.reduction = residual.norm() / size;
    summary.converged = summary.reduction <= options.tolerance;
    const int left = options.max_iterations - summary.iterations;
    if (summary.converged || left <= 0 || !std::isfinite(summary.reduction)) return summary;
    Cycle cycle(multiply, precondition, residual, std::min(left, options.restart));
    const int spent = cycle.run(0.9 * options.tolerance * size, x);
    summary.iterations += spent;
    if (spent == 0) return summary;
  }
}

}  // namespace falcate::solver
