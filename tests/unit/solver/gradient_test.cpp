// Least-squares gradients are exact on linear fields, by their construction.
#include "solver/gradient.h"

#include <gtest/gtest.h>

#include <cmath>
#include <string>

#include "mesh/structured.h"

namespace falcate::solver {
namespace {

using mesh::CellKind;
using mesh::PatchKind;
using mesh::Point;

mesh::PassageMesh skewed(CellKind kind, double pitch) {
  const auto map = [](double xi, double eta) {
    return Point(2.0 * xi + 0.1 * eta * xi, 0.8 * eta + 0.15 * std::sin(3.0 * xi));
  };
  return mesh::PassageMesh::build(mesh::structured(
      9, 7, kind, map, {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet},
      pitch, 0.25));
}

Point gradient(const GradientStencil& stencil, const std::vector<double>& q, int cell) {
  Point g = Point::Zero();
  for (const auto& n : stencil.of(cell))
    g += n.weight * (q[static_cast<std::size_t>(n.cell)] - q[static_cast<std::size_t>(cell)]);
  return g;
}

struct Kind {
  const char* name;
  CellKind cells;
};
class GradientOn : public testing::TestWithParam<Kind> {};

TEST_P(GradientOn, IsExactForLinearFieldsWithoutAPeriod) {
  const auto mesh = skewed(GetParam().cells, 0.0);
  const GradientStencil stencil(mesh);
  const Point slope(3.0, -2.0);
  std::vector<double> q;
  for (const auto& x : mesh.centroids()) q.push_back(7.0 + slope.dot(x));
  for (int i = 0; i < mesh.cell_count(); ++i)
    EXPECT_LT((gradient(stencil, q, i) - slope).norm(), 1e-10) << "cell " << i;
}

// Over the seam a field linear in x alone is linear too; seen in y it repeats.
TEST_P(GradientOn, IsExactForLinearFieldsAcrossThePeriod) {
  const auto mesh = skewed(GetParam().cells, 0.8);
  const GradientStencil stencil(mesh);
  std::vector<double> q;
  for (const auto& x : mesh.centroids()) q.push_back(1.0 + 4.0 * x.x());
  for (int i = 0; i < mesh.cell_count(); ++i)
    EXPECT_LT((gradient(stencil, q, i) - Point(4.0, 0.0)).norm(), 1e-10) << "cell " << i;
}

// Moments sum of weight times distance are the unit matrix, with periodic images at their place:
// the nearest image is meant wherever neighbours are less than half a pitch away.
TEST_P(GradientOn, SeesPeriodicImagesAtTheirPlace) {
  const double pitch = 0.8;
  const auto mesh = skewed(GetParam().cells, pitch);
  const GradientStencil stencil(mesh);
  for (int i = 0; i < mesh.cell_count(); ++i) {
    Eigen::Matrix2d moment = Eigen::Matrix2d::Zero();
    for (const auto& n : stencil.of(i)) {
      Point d = mesh.centroids()[static_cast<std::size_t>(n.cell)] -
                mesh.centroids()[static_cast<std::size_t>(i)];
      d.y() -= pitch * std::round(d.y() / pitch);
      moment += n.weight * d.transpose();
    }
    EXPECT_LT((moment - Eigen::Matrix2d::Identity()).norm(), 1e-10) << "cell " << i;
  }
}

TEST_P(GradientOn, HasAtLeastFourNeighboursNoneOfThemItself) {
  const auto mesh = skewed(GetParam().cells, 0.8);
  const GradientStencil stencil(mesh);
  for (int i = 0; i < mesh.cell_count(); ++i) {
    EXPECT_GE(stencil.of(i).size(), 4u);
    for (const auto& n : stencil.of(i)) EXPECT_NE(n.cell, i);
  }
}

INSTANTIATE_TEST_SUITE_P(Cells, GradientOn,
                         testing::Values(Kind{"quads", CellKind::quads},
                                         Kind{"triangles", CellKind::triangles},
                                         Kind{"mixed", CellKind::mixed}),
                         [](const auto& info) { return std::string(info.param.name); });

}  // namespace
}  // namespace falcate::solver
