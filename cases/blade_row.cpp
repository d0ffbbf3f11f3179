#include "cases/blade_row.h"

#include <cassert>
#include <cmath>
#include <numbers>

#include "cases/operating_points.h"
#include "mesh/blade_shapes.h"

namespace falcate::cases {
namespace {

// Edges and walls a printer or a small cutter can make, as shares of the blade width.
constexpr double default_channel_edge = 0.01;
constexpr double default_cup_wall = 0.06;

mesh::BladeOutline channel(const Case& input) {
  mesh::ChannelParameters parameters;
  parameters.pitch = row_pitch(input);
  parameters.width = row_width(input);
  parameters.inlet_angle = blade_inlet_angle(input);
  parameters.exit_angle = blade_exit_angle(input);
  parameters.passage_width = input.passage_width.value_or(0.0);
  parameters.edge_radius = input.edge_radius.value_or(default_channel_edge * parameters.width);
  return mesh::channel_blade(parameters);
}

mesh::BladeOutline cup(const Case& input) {
  mesh::CupParameters parameters;
  parameters.pitch = row_pitch(input);
  parameters.width = row_width(input);
  parameters.inlet_angle = blade_inlet_angle(input);
  parameters.exit_angle = blade_exit_angle(input);
  parameters.wall_thickness = input.wall_thickness.value_or(default_cup_wall * parameters.width);
  parameters.edge_radius = input.edge_radius.value_or(0.0);
  return mesh::cup_blade(parameters);
}

/// Middle between the two sides at the same share of their lengths.
mesh::Point camber_point(const mesh::BladeOutline& outline, double share) {
  const mesh::BladeSide &suction = outline.suction(), &pressure = outline.pressure();
  return 0.5 * (suction.point(share * suction.length) + pressure.point(share * pressure.length));
}

/// Direction of the camber line between two shares, from the plane of rotation.
double camber_angle(const mesh::BladeOutline& outline, double from, double to) {
  const mesh::Point step = camber_point(outline, to) - camber_point(outline, from);
  return std::atan2(step.x(), step.y());
}

}  // namespace

double throat_ratio(const BladeRow& row, double stream_angle) {
  return row.throat / (row.pitch * std::sin(stream_angle));
}

double row_pitch(const Case& input) {
  return input.kind == CaseKind::rig ? input.row_pitch
                                     : std::numbers::pi * input.mean_diameter / input.blade_count;
}

double row_width(const Case& input) {
  return input.kind == CaseKind::rig ? input.row_width : input.blade_width;
}

double blade_inlet_angle(const Case& input) {
  if (input.inlet_angle) return *input.inlet_angle;
  const auto points = operating_points(input);
  return design_point(input, points).inlet.angle;
}

double blade_exit_angle(const Case& input) {
  return input.exit_angle.value_or(std::numbers::pi - blade_inlet_angle(input));
}

BladeRow make_blade_row(const Case& input) {
  BladeRow row{input.shape == "coordinates"
                   ? mesh::coordinates_blade(input.outline_path, row_width(input))
               : input.shape == "cup" ? cup(input)
                                      : channel(input)};
  row.pitch = row_pitch(input);
  row.width = row_width(input);
  row.height = input.kind == CaseKind::rig ? 0.0 : input.blade_height;
  if (input.shape == "coordinates") {
    row.inlet_angle = camber_angle(row.outline, 0.02, 0.08);
    row.exit_angle = camber_angle(row.outline, 0.92, 0.98);
  } else {
    row.inlet_angle = blade_inlet_angle(input);
    row.exit_angle = blade_exit_angle(input);
  }
  row.throat = mesh::throat_width(row.outline, row.pitch);
  return row;
}

}  // namespace falcate::cases
