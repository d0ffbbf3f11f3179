/// The blade row of a case: outline, pitch and the angles the mesh follows. Metres, radians.
/// Errors: `mesh::ShapeError` where the blade cannot be made.
#pragma once
#include "cases/case.h"
#include "mesh/blade_outline.h"

namespace falcate::cases {

struct BladeRow {
  mesh::BladeOutline outline;
  double pitch = 0.0;
  double width = 0.0;
  double height = 0.0;       ///< 0 for a rig
  double inlet_angle = 0.0;  ///< of the blade at its edges
  double exit_angle = 0.0;
  double throat = 0.0;  ///< least width of the passage; <= 0 where blades touch
};

BladeRow make_blade_row(const Case& input);

/// Throat over the width of the stream that enters one passage at this angle.
double throat_ratio(const BladeRow& row, double stream_angle);

double row_pitch(const Case& input);
double row_width(const Case& input);

/// Angle of the blade at its inlet: as given, else that of the (relative) flow at the design point.
double blade_inlet_angle(const Case& input);
/// As given, else symmetric: pi less the inlet angle.
double blade_exit_angle(const Case& input);

}  // namespace falcate::cases
