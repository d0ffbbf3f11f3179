/// Nested meshes of one passage, made by the `falcate-mesher` helper process beside this program.
/// Errors: `MeshError` (mesher failed, timed out, or made a bad mesh) in plain words.
#pragma once
#include "mesh/blade_outline.h"
#include "mesh/passage_mesh.h"

namespace falcate::mesh {

struct MeshOptions {
  int cells = 8000;         ///< finest level, roughly (within 15 %)
  int levels = 3;           ///< each cell split in four, new wall nodes on the true curve
  double upstream = 1.0;    ///< distance of the inlet plane from the leading edge, widths
  double downstream = 1.0;  ///< distance of the outlet plane from the trailing edge, widths
  double time_limit_s = 60.0;
};

/// Angles (rad, from the plane of rotation) are those of the metal or flow at the edges; they set
/// the direction in which the periodic lines leave the blade.
MeshLevels make_mesh_levels(const BladeOutline& outline, double pitch, double inlet_angle,
                            double exit_angle, const MeshOptions& options);

}  // namespace falcate::mesh
