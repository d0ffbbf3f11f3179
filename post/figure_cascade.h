/// Pictures of the cascade in the blade-to-blade plane: filled contours of a cell field with a
/// colour bar, and the mesh. The periodic passage is repeated until the picture is full.
/// x axial to the right, y upwards the way the wheel turns; true proportions; a bar gives the
/// scale. Each function yields one <svg> element. Errors: `OutputError` where a value is not
/// finite.
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "mesh/passage_mesh.h"

namespace falcate::post {

struct CascadeView {
  const mesh::PassageMesh* mesh = nullptr;
  std::vector<mesh::Point> blade;  ///< closed polygon; empty: none is drawn
  int passages = 3;                ///< side by side in the picture
  bool moves = false;              ///< an arrow shows the way the blades move
  double width = 470.0;            ///< of the plane shown, px
  std::string id;                  ///< letters and digits, unique in the page
  std::string label;               ///< read out in place of the picture
};

struct FieldScale {
  std::string title;                  ///< with its unit: "Mach number", "Pressure, kPa"
  std::optional<double> marked_line;  ///< a line of this value is drawn
  std::string marked_words;           ///< what that line is
};

std::string field_picture(const CascadeView& view, const std::vector<double>& cell_values,
                          const FieldScale& scale);

/// Mesh lines of the passage between two blades.
std::string mesh_picture(const CascadeView& view);

/// Mesh lines round the leading edge, about an eighth of the blade width across.
std::string edge_mesh_picture(const CascadeView& view);

}  // namespace falcate::post
