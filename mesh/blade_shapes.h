/// Blade shapes of impulse wheels from few parameters. Lengths in metres, angles in radians from
/// the plane of rotation (a symmetric impulse blade has inlet 25 deg and exit 155 deg).
/// Errors: `ShapeError` with the parameter and the remedy.
#pragma once
#include <string>

#include "mesh/blade_outline.h"

namespace falcate::mesh {

/// Ringed impulse blade: concentric arcs, so that the passage between neighbours has constant
/// width through the bend, straight tangents fore and aft, rounded edges.
struct ChannelParameters {
  double pitch = 0.0;
  double width = 0.0;          ///< axial
  double inlet_angle = 0.0;    ///< of the passage at its entry
  double exit_angle = 0.0;     ///< of the passage at its end
  double passage_width = 0.0;  ///< across the passage; 0: pitch sin(inlet) less the edge thickness
  double edge_radius = 0.0;    ///< 0: sharp
};
BladeOutline channel_blade(const ChannelParameters& parameters);

/// Thin-walled bucket: a wall of constant thickness along an arc.
struct CupParameters {
  double pitch = 0.0;
  double width = 0.0;
  double inlet_angle = 0.0;
  double exit_angle = 0.0;
  double wall_thickness = 0.0;
  double edge_radius = 0.0;  ///< at most half the wall; 0: half the wall
};
BladeOutline cup_blade(const CupParameters& parameters);

/// Any closed outline from a CSV file (columns x,y or side,x,y; '#' comments), scaled to `width`;
/// kept exactly: a spline through the points between corners; sharp, cusped and blunt edges.
/// The scale is the axial extent of the whole outline, round edges included; y is not turned over:
/// the convex side must lie towards +y already (ShapeError otherwise). mesh/outline_file.h has the
/// format. Messages name the file and, where one is at fault, the line.
BladeOutline coordinates_blade(const std::string& csv_file, double width);

/// Least distance between the blade and its neighbour one pitch away (the throat), m; <= 0: they
/// touch.
double throat_width(const BladeOutline& outline, double pitch);

}  // namespace falcate::mesh
