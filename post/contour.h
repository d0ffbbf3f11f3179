/// Filled contours and lines of equal value of a cell field, as polygons for drawing.
///
/// Each cell is cut into triangles from its centroid (cell value) to its edges (node values), the
/// field is linear in each, and the parts at or above a level are joined into closed loops by
/// cancelling the edges two parts share. Painting the regions of rising levels over one another
/// fills the picture without gaps. Units: metres.
/// Errors: `OutputError` where a value is not finite.
#pragma once
#include <vector>

#include "mesh/passage_mesh.h"

namespace falcate::post {

using Polyline = std::vector<mesh::Point>;

class ContourField {
 public:
  /// One value a cell of `mesh`, which is borrowed and must outlive the field.
  ContourField(const mesh::PassageMesh& mesh, const std::vector<double>& cell_values);

  double least() const { return least_; }        ///< over the cells
  double greatest() const { return greatest_; }  ///< over the cells

  /// Closed loops (first point not repeated) round all places with value >= level; holes run the
  /// other way round. Simplified to within `tolerance` (m).
  std::vector<Polyline> region_above(double level, double tolerance = 0.0) const;

  /// Lines on which value = level; a closed one ends on its first point.
  std::vector<Polyline> level_lines(double level, double tolerance = 0.0) const;

 private:
  struct Cut;
  Cut cut(double level) const;

  const mesh::PassageMesh* mesh_;
  std::vector<double> values_;  ///< nodes, then cell centroids
  std::vector<mesh::Point> places_;
  double least_ = 0.0, greatest_ = 0.0;
};

/// Fewer points, none of the old ones further than `tolerance` from the new line
/// (Douglas and Peucker 1973). Ends are kept; a line of equal ends is treated as closed.
Polyline simplified(const Polyline& line, double tolerance);

}  // namespace falcate::post
