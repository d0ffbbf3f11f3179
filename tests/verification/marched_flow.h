// Marches a flow in time by the third-order strong-stability-preserving Runge-Kutta method (Shu &
// Osher, J. Comput. Phys. 77 (1988) 439-471) on the residual of the solver: shows what the scheme
// itself makes of a discontinuity or a disturbance, whatever the steady solver would do about it.
#pragma once
#include <algorithm>
#include <cmath>
#include <functional>
#include <memory>
#include <vector>

#include "solver/residual.h"
#include "solver/residual_terms.h"

namespace falcate::verification {

/// Units: density and pressure 1 are those of a gas at rest with unit sound speed squared / gamma.
class MarchedFlow {
 public:
  MarchedFlow(const mesh::PassageMesh& mesh, solver::FluxKind flux,
              const std::function<solver::Primitive(const mesh::Point&)>& at_start)
      : mesh_(mesh) {
    problem_.mesh = &mesh;
    problem_.gas = {1.4, 1.0};
    problem_.inlet = {1.0, 1.0, std::acos(0.0), {}};
    problem_.exit_pressure = 0.5;
    problem_.prescribed = at_start;
    scaled_ = solver::scale(problem_);
    solver::SchemeOptions options;
    options.flux = flux;
    residual_ = std::make_unique<solver::Residual>(scaled_, options);
    for (const auto& x : mesh.centroids()) {
      const auto q = at_start(x);
      cells_.push_back({q.density, q.u, q.v, q.pressure});
    }
  }

  std::vector<solver::State<double>>& cells() { return cells_; }
  double time() const { return time_; }

  void march_to(double end, double cfl = 0.4) {
    while (time_ < end) {
      const double dt = std::min(end - time_, cfl * least_crossing_time());
      const auto start = conserved();
      stage(start, 0.0, dt);
      stage(start, 0.75, 0.25 * dt);
      stage(start, 1.0 / 3.0, 2.0 / 3.0 * dt);
      time_ += dt;
      if (end - time_ < 1e-12) break;
    }
  }

 private:
  double least_crossing_time() const {
    double least = 1e300;
    const auto sums = residual_->spectral_sums(cells_);
    for (std::size_t i = 0; i < sums.size(); ++i)
      least = std::min(least, mesh_.areas()[i] / sums[i]);
    return least;
  }
  std::vector<solver::State<double>> conserved() const {
    std::vector<solver::State<double>> out;
    for (const auto& q : cells_) out.push_back(solver::conserved(q, 1.4));
    return out;
  }
  /// U = share U_start + (1 - share) U - dt R/V
  void stage(const std::vector<solver::State<double>>& start, double share, double dt) {
    std::vector<solver::State<double>> sum(cells_.size());
    residual_->evaluate<double>(cells_, fluxes_, sum);
    const auto now = conserved();
    for (std::size_t i = 0; i < cells_.size(); ++i) {
      solver::State<double> u;
      for (std::size_t k = 0; k < 4; ++k)
        u[k] = share * start[i][k] + (1.0 - share) * now[i][k] - dt * sum[i][k] / mesh_.areas()[i];
      const double vx = u[1] / u[0], vy = u[2] / u[0];
      cells_[i] = {u[0], vx, vy, 0.4 * (u[3] - 0.5 * u[0] * (vx * vx + vy * vy))};
    }
  }

  const mesh::PassageMesh& mesh_;
  solver::FlowProblem problem_;
  solver::ScaledProblem scaled_;
  std::unique_ptr<solver::Residual> residual_;
  std::vector<solver::State<double>> cells_, fluxes_;
  double time_ = 0.0;
};

}  // namespace falcate::verification
