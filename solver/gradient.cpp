#include "solver/gradient.h"

#include <Eigen/Eigenvalues>
#include <algorithm>

namespace falcate::solver {
namespace {

struct Link {
  int cell;
  mesh::Point shift;  ///< add to that cell's centroid
};

std::vector<std::vector<Link>> face_neighbours(const mesh::PassageMesh& mesh) {
  std::vector<std::vector<Link>> links(static_cast<std::size_t>(mesh.cell_count()));
  for (const auto& face : mesh.faces()) {
    if (face.right < 0) continue;
    links[static_cast<std::size_t>(face.left)].push_back({face.right, face.right_shift});
    links[static_cast<std::size_t>(face.right)].push_back({face.left, -face.right_shift});
  }
  return links;
}

struct LeastSquares {
  Eigen::Matrix2d matrix = Eigen::Matrix2d::Zero();
  std::vector<mesh::Point> offset;
};

LeastSquares normal_equations(const mesh::PassageMesh& mesh, int cell,
                              const std::vector<Link>& links) {
  LeastSquares ls;
  const auto& centroid = mesh.centroids();
  for (const auto& link : links) {
    const mesh::Point d = centroid[static_cast<std::size_t>(link.cell)] + link.shift -
                          centroid[static_cast<std::size_t>(cell)];
    ls.offset.push_back(d);
    ls.matrix += d * d.transpose() / d.squaredNorm();
  }
  return ls;
}

/// The trace is the number of neighbours, so the lesser eigenvalue tells how far they fan out.
bool fans_out(const Eigen::Matrix2d& matrix) {
  return Eigen::SelfAdjointEigenSolver<Eigen::Matrix2d>(matrix, Eigen::EigenvaluesOnly)
             .eigenvalues()(0) > 0.1;
}

std::vector<Link> widened(int cell, const std::vector<std::vector<Link>>& all) {
  std::vector<Link> out = all[static_cast<std::size_t>(cell)];
  for (const auto& link : all[static_cast<std::size_t>(cell)])
    for (const auto& second : all[static_cast<std::size_t>(link.cell)]) {
      const mesh::Point shift = link.shift + second.shift;
      const auto same = [&](const Link& l) {
        return l.cell == second.cell && (l.shift - shift).norm() == 0.0;
      };
      if (second.cell != cell && std::none_of(out.begin(), out.end(), same))
        out.push_back({second.cell, shift});
    }
  return out;
}

}  // namespace

GradientStencil::GradientStencil(const mesh::PassageMesh& mesh) {
  const auto links = face_neighbours(mesh);
  start_.push_back(0);
  for (int cell = 0; cell < mesh.cell_count(); ++cell) {
    auto stencil = links[static_cast<std::size_t>(cell)];
    auto ls = normal_equations(mesh, cell, stencil);
    if (stencil.size() < 4 || !fans_out(ls.matrix)) {
      stencil = widened(cell, links);
      ls = normal_equations(mesh, cell, stencil);
    }
    const Eigen::Matrix2d inverse = ls.matrix.inverse();
    for (std::size_t k = 0; k < stencil.size(); ++k)
      neighbours_.push_back({stencil[k].cell, inverse * ls.offset[k] / ls.offset[k].squaredNorm()});
    start_.push_back(neighbours_.size());
  }
}

}  // namespace falcate::solver
