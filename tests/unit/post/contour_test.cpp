// Exact areas, lengths and bounds of simple fields; the fields are invented.
#include "post/contour.h"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <numbers>
#include <vector>

#include "mesh/structured.h"
#include "post/node_values.h"
#include "post/output_error.h"

namespace falcate::post {
namespace {

using mesh::CellKind;
using mesh::PassageMesh;
using mesh::PatchKind;
using mesh::Point;

PassageMesh square(int n, CellKind kind, double half_width) {
  const auto map = [=](double xi, double eta) {
    return Point(half_width * (2.0 * xi - 1.0), half_width * (2.0 * eta - 1.0));
  };
  return PassageMesh::build(mesh::structured(
      n, n, kind, map, {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}));
}

PassageMesh wavy_periodic(int n) {
  const auto map = [](double xi, double eta) {
    return Point(3.0 * xi, eta + 0.4 * std::sin(2.0 * xi));
  };
  return PassageMesh::build(mesh::structured(
      3 * n, n, CellKind::mixed, map,
      {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, 1.0));
}

template <class Field>
std::vector<double> cell_values(const PassageMesh& mesh, const Field& field) {
  std::vector<double> values;
  for (const Point& c : mesh.centroids()) values.push_back(field(c));
  return values;
}

double area(const std::vector<Polyline>& loops) {
  double sum = 0.0;
  for (const auto& loop : loops) {
    for (std::size_t i = 0; i < loop.size(); ++i) {
      const Point &a = loop[i], &b = loop[(i + 1) % loop.size()];
      sum += 0.5 * (a.x() * b.y() - a.y() * b.x());
    }
  }
  return sum;
}

double length(const std::vector<Polyline>& lines) {
  double sum = 0.0;
  for (const auto& line : lines) {
    for (std::size_t i = 1; i < line.size(); ++i) sum += (line[i] - line[i - 1]).norm();
  }
  return sum;
}

class ContourKinds : public testing::TestWithParam<CellKind> {};

TEST_P(ContourKinds, DiscAndItsRimHaveTheAreaAndLengthOfACircle) {
  const PassageMesh mesh = square(40, GetParam(), 1.5);
  const ContourField field(mesh, cell_values(mesh, [](const Point& p) { return -p.norm(); }));
  EXPECT_NEAR(area(field.region_above(-1.0)), std::numbers::pi, 0.01 * std::numbers::pi);
  EXPECT_NEAR(length(field.level_lines(-1.0)), 2.0 * std::numbers::pi, 0.02 * std::numbers::pi);
}

TEST_P(ContourKinds, RingHasItsHoleRunTheOtherWay) {
  const PassageMesh mesh = square(60, GetParam(), 1.5);
  const ContourField field(
      mesh, cell_values(mesh, [](const Point& p) { return -std::abs(p.norm() - 0.9); }));
  const auto loops = field.region_above(-0.25);
  ASSERT_EQ(loops.size(), 2u);
  EXPECT_LT(area({loops[0]}) * area({loops[1]}), 0.0);
  EXPECT_NEAR(area(loops), std::numbers::pi * (1.15 * 1.15 - 0.65 * 0.65), 0.05);
}

INSTANTIATE_TEST_SUITE_P(Cells, ContourKinds,
                         testing::Values(CellKind::quads, CellKind::triangles, CellKind::mixed));

TEST(Contour, LowestRegionIsTheWholeMesh) {
  const PassageMesh mesh = wavy_periodic(8);
  const ContourField field(mesh, cell_values(mesh, [](const Point& p) { return p.x(); }));
  const auto loops = field.region_above(field.least() - 1.0);
  ASSERT_EQ(loops.size(), 1u);
  EXPECT_NEAR(area(loops), 3.0, 1e-12);  // 3 long, pitch 1, sheared
  EXPECT_TRUE(field.region_above(field.greatest() + 1.0).empty());
}

TEST(Contour, NodesOnPeriodicLinesAreOneAndTheSame) {
  const PassageMesh mesh = wavy_periodic(8);
  const auto nodes = node_values(mesh, cell_values(mesh, [](const Point& p) {
                                   return std::sin(2.0 * std::numbers::pi * p.y()) + p.x();
                                 }));
  const auto pairs = periodic_node_pairs(mesh);
  ASSERT_EQ(pairs.size(), 25u);
  for (const auto& [upper, lower] : pairs) {
    const auto a = static_cast<std::size_t>(upper), b = static_cast<std::size_t>(lower);
    EXPECT_NEAR(mesh.nodes()[a].x(), mesh.nodes()[b].x(), 1e-12);
    EXPECT_NEAR(mesh.nodes()[a].y(), mesh.nodes()[b].y() + 1.0, 1e-12);
    EXPECT_EQ(nodes[a], nodes[b]);
  }
}

TEST(Contour, NodeValuesOfAConstantAreThatConstant) {
  const PassageMesh mesh = wavy_periodic(4);
  for (const double v : node_values(mesh, std::vector<double>(mesh.cells().size(), 7.25))) {
    EXPECT_DOUBLE_EQ(v, 7.25);
  }
}

TEST(Contour, SimplifiedLineStaysWithinTheTolerance) {
  Polyline circle;
  for (int i = 0; i <= 720; ++i) {
    const double a = 2.0 * std::numbers::pi * (i % 720) / 720.0;
    circle.emplace_back(std::cos(a), std::sin(a));
  }
  const Polyline few = simplified(circle, 1e-3);
  EXPECT_EQ(few.front(), few.back());
  // A chord that spans the angle a stands off by 1 - cos(a/2): 1e-3 allows 0.0894 rad, 70 chords.
  EXPECT_GE(few.size(), 71u);
  EXPECT_LE(few.size(), 140u);
  for (std::size_t i = 1; i < few.size(); ++i) {
    EXPECT_LE(1.0 - (0.5 * (few[i] + few[i - 1])).norm(), 1e-3 + 1e-12);
  }
}

TEST(Contour, ValueThatIsNoNumberIsRefused) {
  const PassageMesh mesh = square(4, CellKind::quads, 1.0);
  std::vector<double> values(16, 1.0);
  values[3] = std::numeric_limits<double>::quiet_NaN();
  try {
    const ContourField field(mesh, values);
    FAIL() << "no error";
  } catch (const OutputError& error) {
    EXPECT_STREQ(error.what(),
                 "cell 3 of the flow field holds no finite number, so the picture cannot be drawn");
  }
}

}  // namespace
}  // namespace falcate::post
