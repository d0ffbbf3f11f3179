#include "solver/residual.h"

#include <cmath>

namespace falcate::solver {
namespace {

/// e = (K h/L)^3 times the squares of the values at rest, where speed of sound^2 = gamma: changes
/// far below those of a shock are never limited, however slow the flow.
State<double> limiter_threshold(double h, const ScaledProblem& problem, double constant) {
  const double e = std::pow(constant * h / problem.reference_length, 3);
  return {e, problem.gamma * e, problem.gamma * e, e};
}

}  // namespace

Residual::Residual(const ScaledProblem& problem, const SchemeOptions& options)
    : problem_(&problem), options_(options), stencil_(*problem.mesh) {
  const auto& m = mesh();
  const auto& centroid = m.centroids();
  std::vector<std::vector<CellFace>> lists(static_cast<std::size_t>(m.cell_count()));
  for (int i = 0; i < m.face_count(); ++i) {
    const auto& face = m.faces()[static_cast<std::size_t>(i)];
    const mesh::Point& left = centroid[static_cast<std::size_t>(face.left)];
    lists[static_cast<std::size_t>(face.left)].push_back({i, 1.0});
    if (face.right < 0) {
      geometry_.push_back({mesh::Point::Zero(), face.midpoint - left, {}});
      continue;
    }
    lists[static_cast<std::size_t>(face.right)].push_back({i, -1.0});
    const mesh::Point right = centroid[static_cast<std::size_t>(face.right)] + face.right_shift;
    const mesh::Point difference = right - left;
    geometry_.push_back({difference, face.midpoint - 0.5 * (left + right),
                         limiter_threshold(difference.norm(), problem, options.limiter_constant)});
  }
  start_.push_back(0);
  for (const auto& list : lists) {
    cell_faces_.insert(cell_faces_.end(), list.begin(), list.end());
    start_.push_back(cell_faces_.size());
  }
}

std::vector<double> Residual::spectral_sums(std::span<const State<double>> cells) const {
  std::vector<double> sums(cells.size(), 0.0);
  for (std::size_t i = 0; i < cells.size(); ++i) {
    const double a = speed_of_sound(cells[i], problem_->gamma);
    for (const CellFace& cf : faces_of(i)) {
      const mesh::Point& n = mesh().faces()[static_cast<std::size_t>(cf.face)].normal;
      sums[i] += 0.5 * (std::abs(cells[i][1] * n.x() + cells[i][2] * n.y()) + a * n.norm());
    }
  }
  return sums;
}

}  // namespace falcate::solver
