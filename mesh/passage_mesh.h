/// The mesh of one periodic blade passage: cells, faces, patches; immutable once built.
///
/// Faces carry a length-weighted normal that points from `left` to `right` (out of the domain on
/// a boundary). A periodic face is an interior face whose right cell is seen from the left one
/// shifted by `right_shift` (0, +pitch) or (0, -pitch), zero elsewhere. A boundary face on a curved
/// wall has its midpoint on the true curve, and the adjoining cell's area and centroid include the
/// circular segment between chord and curve; its normal is that of the chord, which is the exact
/// integral of the unit normal along the curve.
/// Units: metres. Errors: `MeshError` when the parts do not make a valid mesh.
#pragma once
#include <array>
#include <stdexcept>
#include <string>
#include <vector>

#include "mesh/point.h"

namespace falcate::mesh {

/// The outside world handed over something no valid mesh can be made from.
class MeshError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// What a boundary face lies on. `suction_wall` and `pressure_wall` are the convex and concave
/// sides of the blade; `wall` any other slip wall; `prescribed` carries a given state
/// (verification).
enum class PatchKind { suction_wall, pressure_wall, wall, inlet, outlet, prescribed };

constexpr bool is_wall(PatchKind kind) {
  return kind == PatchKind::suction_wall || kind == PatchKind::pressure_wall ||
         kind == PatchKind::wall;
}

/// Nodes, cells and marked boundary as a mesh maker delivers them.
struct RawMesh {
  struct BoundaryEdge {
    int first, second;  ///< node indices, either order
    PatchKind kind;
    Point midpoint;  ///< on the true curve (chord midpoint on a straight boundary)
  };
  double pitch = 0.0;  ///< 0: not periodic
  std::vector<Point> nodes;
  std::vector<std::array<int, 4>> cells;  ///< counter-clockwise; a triangle ends with -1
  std::vector<BoundaryEdge> boundary;
  std::vector<std::array<int, 2>> periodic;  ///< node pairs {lower, upper = lower + pitch}
};

class PassageMesh {
 public:
  struct Face {
    int left = -1;
    int right = -1;              ///< -1 on a boundary
    std::array<int, 2> nodes{};  ///< as seen from the left cell
    Point normal;                ///< length-weighted, left to right
    Point midpoint;              ///< as seen from the left cell
    Point right_shift;           ///< add to the right cell's centroid to see it from the left
  };
  struct Patch {
    PatchKind kind;
    int first_face, face_count;  ///< a contiguous run of faces()
  };

  /// Checks, renumbers cells for locality and builds faces. Throws MeshError.
  static PassageMesh build(const RawMesh& raw);

  int cell_count() const { return static_cast<int>(cells_.size()); }
  int face_count() const { return static_cast<int>(faces_.size()); }
  int interior_face_count() const { return interior_face_count_; }  ///< boundary faces follow
  double pitch() const { return pitch_; }
  const std::vector<Point>& nodes() const { return nodes_; }
  const std::vector<std::array<int, 4>>& cells() const { return cells_; }
  const std::vector<double>& areas() const { return areas_; }
  const std::vector<Point>& centroids() const { return centroids_; }
  const std::vector<Face>& faces() const { return faces_; }
  const std::vector<Patch>& patches() const { return patches_; }
  /// Place in `raw.cells` of each cell, since build() renumbers.
  const std::vector<int>& raw_index() const { return raw_index_; }

 private:
  double pitch_ = 0.0;
  int interior_face_count_ = 0;
  std::vector<Point> nodes_;
  std::vector<std::array<int, 4>> cells_;
  std::vector<double> areas_;
  std::vector<Point> centroids_;
  std::vector<Face> faces_;
  std::vector<Patch> patches_;
  std::vector<int> raw_index_;
};

/// Nested meshes, coarse first; `parent[k][cell]` is the cell of level k-1 that holds cell of level
/// k (parent[0] is empty).
struct MeshLevels {
  std::vector<PassageMesh> levels;
  std::vector<std::vector<int>> parent;
};

}  // namespace falcate::mesh
