#include "solver/gmres.h"

#include <algorithm>
#include <cmath>

namespace falcate::solver {
namespace {

constexpr Eigen::Index chunk = 4096;

Eigen::Index chunks(Eigen::Index size) { return (size + chunk - 1) / chunk; }

/// Calls visit(number, start, length) for each chunk, side by side.
template <class Visit>
void for_each_chunk(Eigen::Index size, const Visit& visit) {
#pragma omp parallel for schedule(static)
  for (Eigen::Index i = 0; i < chunks(size); ++i)
    visit(i, i * chunk, std::min(chunk, size - i * chunk));
}

/// Products of the first k columns with w, summed chunk after chunk.
Vector projections(const Eigen::MatrixXf& basis, int k, const SingleVector& w) {
  Eigen::MatrixXd parts(k, chunks(w.size()));
  for_each_chunk(w.size(), [&](Eigen::Index i, Eigen::Index start, Eigen::Index length) {
    const SingleVector part =
        basis.block(start, 0, length, k).transpose() * w.segment(start, length);
    parts.col(i) = part.cast<double>();
  });
  Vector sum = Vector::Zero(k);
  for (Eigen::Index i = 0; i < parts.cols(); ++i) sum += parts.col(i);
  return sum;
}

double norm(const SingleVector& w) {
  Vector parts(chunks(w.size()));
  for_each_chunk(w.size(), [&](Eigen::Index i, Eigen::Index start, Eigen::Index length) {
    parts(i) = w.segment(start, length).squaredNorm();
  });
  double sum = 0.0;
  for (Eigen::Index i = 0; i < parts.size(); ++i) sum += parts(i);
  return std::sqrt(sum);
}

/// w -= basis(:, 0..k-1) h
void subtract(const Eigen::MatrixXf& basis, const Vector& h, SingleVector& w) {
  const SingleVector factors = h.cast<float>();
  for_each_chunk(w.size(), [&](Eigen::Index, Eigen::Index start, Eigen::Index length) {
    w.segment(start, length).noalias() -= basis.block(start, 0, length, factors.size()) * factors;
  });
}

}  // namespace

Gmres::Gmres(Eigen::Index size, int restart)
    : restart_(restart),
      basis_(size, restart + 1),
      residual_(size),
      direction_(size),
      next_(size) {}

/// Takes the basis out of next_ and returns the length that is left; fills column k of H.
double Gmres::orthogonalise(int k) {
  constexpr double cancelled = 0.05;
  const double before = norm(next_);
  Vector h = projections(basis_, k + 1, next_);
  subtract(basis_, h, next_);
  double left = norm(next_);
  if (left < cancelled * before) {
    const Vector again = projections(basis_, k + 1, next_);
    subtract(basis_, again, next_);
    h += again;
    left = norm(next_);
  }
  hessenberg_.col(k).head(k + 1) = h;
  return left;
}

/// Adds column k to H, turned upper triangular by Givens rotations.
void Gmres::expand(int k) {
  double below = orthogonalise(k);
  if (below > 0.0) basis_.col(k + 1) = next_ / static_cast<float>(below);
  auto column = hessenberg_.col(k);
  for (int i = 0; i < k; ++i) {
    const Rotation& r = rotations_[static_cast<std::size_t>(i)];
    const double a = column(i), b = column(i + 1);
    column(i) = r.c * a + r.s * b;
    column(i + 1) = -r.s * a + r.c * b;
  }
  const double length = std::hypot(column(k), below);
  const Rotation r = length > 0.0 ? Rotation{column(k) / length, below / length} : Rotation{};
  rotations_.push_back(r);
  column(k) = length;
  rhs_(k + 1) = -r.s * rhs_(k);
  rhs_(k) *= r.c;
}

void Gmres::correct(const LinearMap& precondition, int k, SingleVector& x) {
  if (k == 0) return;
  const Vector y =
      hessenberg_.topLeftCorner(k, k).triangularView<Eigen::Upper>().solve(rhs_.head(k));
  next_.setZero();
  subtract(basis_, -y, next_);
  precondition(next_, direction_);
  x += direction_;
}

/// One Arnoldi cycle from residual_; adds its correction to x and returns the iterations spent.
int Gmres::cycle(const LinearMap& multiply, const LinearMap& precondition, double target,
                 int length, SingleVector& x) {
  const double beta = norm(residual_);
  basis_.col(0) = residual_ / static_cast<float>(beta);
  hessenberg_ = Eigen::MatrixXd::Zero(length + 1, length);
  rhs_ = Vector::Zero(length + 1);
  rhs_(0) = beta;
  rotations_.clear();
  int k = 0;
  while (k < length && std::abs(rhs_(k)) > target) {
    residual_ = basis_.col(k);
    precondition(residual_, direction_);
    multiply(direction_, next_);
    expand(k);
    ++k;
    if (!std::isfinite(rhs_(k))) break;
  }
  correct(precondition, k, x);
  return k;
}

GmresSummary Gmres::solve(const LinearMap& multiply, const LinearMap& precondition,
                          const SingleVector& b, SingleVector& x, const GmresOptions& options) {
  GmresSummary summary;
  const double size = norm(b);
  if (size == 0.0) {
    x.setZero(b.size());
    return {true, 0, 0.0};
  }
  while (true) {
    if (x.isZero(0.0f)) {
      residual_ = b;
    } else {
      multiply(x, next_);
      residual_ = b - next_;
    }
    summary.reduction = norm(residual_) / size;
    summary.converged = summary.reduction <= options.tolerance;
    const int left = options.max_iterations - summary.iterations;
    if (summary.converged || left <= 0 || !std::isfinite(summary.reduction)) return summary;
    const int spent =
        cycle(multiply, precondition, 0.9 * options.tolerance * size, std::min(left, restart_), x);
    summary.iterations += spent;
    if (spent == 0) return summary;
  }
}

}  // namespace falcate::solver
