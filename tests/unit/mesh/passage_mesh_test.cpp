#include "mesh/passage_mesh.h"

#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>
#include <functional>
#include <numbers>
#include <numeric>
#include <string>

#include "mesh/structured.h"

namespace falcate::mesh {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }
constexpr std::array<PatchKind, 4> kChannel{PatchKind::suction_wall, PatchKind::outlet,
                                            PatchKind::pressure_wall, PatchKind::inlet};
Point square(double xi, double eta) { return {xi, eta}; }

/// Ring sector between radii 1 and 1.4 over 90 degrees; xi runs clockwise from the top (outward
/// radius is eta), which keeps orientation.
Point ring(double xi, double eta) {
  const double r = 1.0 + 0.4 * eta, angle = 0.5 * std::numbers::pi * (1.0 - xi);
  return {r * std::cos(angle), r * std::sin(angle)};
}

double total_area(const PassageMesh& mesh) {
  return std::accumulate(mesh.areas().begin(), mesh.areas().end(), 0.0);
}

std::string build_error(const RawMesh& raw) {
  try {
    PassageMesh::build(raw);
  } catch (const MeshError& error) {
    return error.what();
  }
  return "no error";
}

TEST(PassageMesh, RingSectorAreaConvergesAtTheOrderOfTheSegmentCorrection) {
  // Exact: pi/4 (1.4^2 - 1). The parabola through three points of an arc misses its segment by a
  // fifth-order term a face, so the sum falls sixteenfold when the faces are halved.
  const double exact = 0.25 * std::numbers::pi * (1.4 * 1.4 - 1.0);
  double last = 0.0;
  for (int n : {8, 16, 32}) {
    const auto mesh = PassageMesh::build(structured(n, 4, CellKind::mixed, ring, kChannel));
    const double error = std::abs(total_area(mesh) / exact - 1.0);
    if (last > 0.0) {
      EXPECT_NEAR(std::log2(last / error), 4.0, 0.05);
    }
    last = error;
  }
  EXPECT_LT(last, 1e-6);
}

TEST(PassageMesh, CentroidsIncludeTheSegmentsAtCurvedWalls) {
  // Exact moment of the sector about the x axis: (1.4^3 - 1)/3 times the integral of sin, 1.
  const double exact = (1.4 * 1.4 * 1.4 - 1.0) / 3.0;
  const auto mesh = PassageMesh::build(structured(32, 4, CellKind::quads, ring, kChannel));
  Point moment(0.0, 0.0);
  for (int c = 0; c < mesh.cell_count(); ++c)
    moment += mesh.areas()[at(c)] * mesh.centroids()[at(c)];
  EXPECT_NEAR(moment.y() / exact, 1.0, 1e-6);
  EXPECT_NEAR(moment.x() / exact, 1.0, 1e-6);
}

TEST(PassageMesh, NormalsOfEveryCellCloseAndPointOutward) {
  for (CellKind kind : {CellKind::quads, CellKind::triangles, CellKind::mixed}) {
    const auto mesh = PassageMesh::build(structured(13, 7, kind, ring, kChannel, 0.0, 0.25));
    std::vector<Point> sum(at(mesh.cell_count()), Point(0.0, 0.0));
    for (const auto& face : mesh.faces()) {
      sum[at(face.left)] += face.normal;
      EXPECT_GT(face.normal.dot(face.midpoint - mesh.centroids()[at(face.left)]), 0.0);
      if (face.right >= 0) sum[at(face.right)] -= face.normal;
    }
    for (const auto& closed : sum) EXPECT_LT(closed.norm(), 1e-15);
  }
}

TEST(PassageMesh, PeriodicFacesAreInteriorAndSeeTheirNeighbourAcrossThePitch) {
  const auto skewed = [](double xi, double eta) {
    return Point(xi, 0.3 * eta + 0.2 * std::sin(3.0 * xi));
  };
  const int ni = 12, nj = 5;
  const auto mesh =
      PassageMesh::build(structured(ni, nj, CellKind::quads, skewed, kChannel, 0.3, 0.2));
  EXPECT_EQ(mesh.interior_face_count(), (ni - 1) * nj + ni * nj);
  EXPECT_EQ(mesh.face_count() - mesh.interior_face_count(), 2 * nj);
  int shifted = 0, last_left = 0;
  for (int f = 0; f < mesh.interior_face_count(); ++f) {
    const auto& face = mesh.faces()[at(f)];
    EXPECT_LE(last_left, face.left);
    last_left = face.left;
    const Point step =
        mesh.centroids()[at(face.right)] + face.right_shift - mesh.centroids()[at(face.left)];
    EXPECT_GT(step.dot(face.normal), 0.0);
    EXPECT_LT(step.norm(), 0.2);
    if (face.right_shift.y() != 0.0) {
      ++shifted;
      EXPECT_DOUBLE_EQ(std::abs(face.right_shift.y()), 0.3);
    }
    const auto& nodes = mesh.nodes();
    EXPECT_LT((0.5 * (nodes[at(face.nodes[0])] + nodes[at(face.nodes[1])]) - face.midpoint).norm(),
              1e-15);
  }
  EXPECT_EQ(shifted, ni);
}

TEST(PassageMesh, PatchesAreContiguousAndOrderedAlongTheBoundary) {
  const auto mesh = PassageMesh::build(structured(9, 6, CellKind::triangles, ring, kChannel));
  ASSERT_EQ(mesh.patches().size(), 4u);
  int next = mesh.interior_face_count();
  for (const auto& patch : mesh.patches()) {
    EXPECT_EQ(patch.first_face, next);
    next += patch.face_count;
    EXPECT_EQ(patch.face_count, is_wall(patch.kind) ? 9 : 6);
    for (int f = patch.first_face + 1; f < next; ++f) {
      const Point a = mesh.faces()[at(f - 1)].midpoint, b = mesh.faces()[at(f)].midpoint;
      EXPECT_LT((b - a).norm(), 0.3);  // neighbours on the boundary
      if (is_wall(patch.kind)) {
        EXPECT_GT(b.x(), a.x());
        EXPECT_NEAR(b.norm(), patch.kind == PatchKind::suction_wall ? 1.0 : 1.4, 1e-14);
      } else {
        EXPECT_GE(b.y(), a.y() - 1e-15);
      }
    }
  }
  EXPECT_EQ(next, mesh.face_count());
}

int bandwidth(const PassageMesh& mesh, const std::function<int(int)>& number) {
  int widest = 0;
  for (int f = 0; f < mesh.interior_face_count(); ++f) {
    const auto& face = mesh.faces()[at(f)];
    widest = std::max(widest, std::abs(number(face.left) - number(face.right)));
  }
  return widest;
}

TEST(PassageMesh, RenumberingReducesTheBandwidthOfAShuffledMesh) {
  auto raw = structured(40, 10, CellKind::quads, square, kChannel);
  std::vector<std::array<int, 4>> shuffled;  // 7 has no factor in common with 400
  for (int c = 0; c < 400; ++c) shuffled.push_back(raw.cells[at(c * 7 % 400)]);
  raw.cells = shuffled;
  const auto mesh = PassageMesh::build(raw);
  const int before = bandwidth(mesh, [&](int c) { return mesh.raw_index()[at(c)]; });
  EXPECT_GT(before, 100);
  EXPECT_LE(bandwidth(mesh, [](int c) { return c; }), 12);
  for (int c = 0; c < 400; ++c) {
    EXPECT_EQ(mesh.cells()[at(c)], raw.cells[at(mesh.raw_index()[at(c)])]);
  }
}

TEST(PassageMesh, SaysWhatIsWrongWithABadMesh) {
  const auto good = structured(2, 2, CellKind::quads, square, kChannel);
  struct Fault {
    std::function<void(RawMesh&)> spoil;
    std::string message;
  };
  const std::vector<Fault> faults{
      {[](RawMesh& m) { m.cells.clear(); }, "the mesh has no cells"},
      {[](RawMesh& m) { m.nodes[4].x() = std::nan(""); },
       "mesh node 4 has a coordinate that is not a number"},
      {[](RawMesh& m) { m.cells[1][2] = 99; },
       "mesh cell 1 names node 99, but there are nodes 0 to 8 only"},
      {[](RawMesh& m) { m.cells[1][2] = m.cells[1][0]; }, "mesh cell 1 names node 1 twice"},
      {[](RawMesh& m) { std::swap(m.cells[3][1], m.cells[3][3]); },
       "mesh cell 3 near x = 0.5 m, y = 0.5 m is turned inside out"},
      {[](RawMesh& m) { m.cells.push_back(m.cells[0]); },
       "mesh cells overlap at the side between nodes 0 and 1"},
      {[](RawMesh& m) { m.boundary.push_back(m.boundary[0]); },
       "the boundary side between nodes 0 and 1 is marked twice"},
      {[](RawMesh& m) { m.boundary[0].midpoint.y() = std::nan(""); },
       "the boundary side between nodes 0 and 1 has a midpoint that is not a number"},
      {[](RawMesh& m) { m.boundary[0].first = 12; },
       "the boundary side between nodes 12 and 1 names a node that does not exist"},
      {[](RawMesh& m) { m.boundary[0].first = 8; },
       "the boundary side between nodes 1 and 8 is not a side of the mesh's edge"},
      {[](RawMesh& m) { m.boundary.erase(m.boundary.begin()); },
       "the mesh side at x = 0.25 m, y = 0 m is on the edge of the mesh, but neither marked as "
       "boundary "
       "nor periodic"},
      {[](RawMesh& m) { m.boundary[0].midpoint.y() = 5.0; },
       "the curved wall at x = 0.25 m, y = 5 m swallows its mesh cell"},
      {[](RawMesh& m) {
         m.periodic.push_back({0, 6});
       },
       "the mesh has periodic nodes, but its pitch is not positive"},
      {[](RawMesh& m) {
         m.pitch = 1.0, m.periodic.push_back({0, 7});
       },
       "periodic nodes 0 and 7 are not one pitch apart: they miss by 0.5 m"},
      {[](RawMesh& m) {
         m.pitch = 1.0, m.periodic.push_back({0, 77});
       },
       "periodic pair 0 and 77 names a node that does not exist"},
  };
  EXPECT_EQ(build_error(good), "no error");
  for (const auto& fault : faults) {
    auto raw = good;
    fault.spoil(raw);
    EXPECT_EQ(build_error(raw), fault.message);
  }
}

}  // namespace
}  // namespace falcate::mesh
