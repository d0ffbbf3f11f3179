/// One case as read and checked: every key of a case file, defaults filled in, SI units.
/// Angles in radians from the plane of rotation, speeds in rad/s, pressures absolute.
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "solver/gas.h"

namespace falcate::cases {

/// A wheel with its supply and nozzles, or a blade row alone as on a test rig.
enum class CaseKind { wheel, rig };

struct Case {
  std::string file;    ///< as given by the user
  std::string text;    ///< the whole file
  std::string sha256;  ///< of the text and of the outline file it names
  CaseKind kind = CaseKind::wheel;
  std::string title;

  std::string gas_name;  ///< empty for a gas of the user's own
  solver::Gas gas;
  std::optional<double> heat_capacity_ratio;
  std::optional<double> gas_constant;
  std::optional<double> viscosity;

  double supply_pressure = 0.0;
  double supply_temperature = 0.0;
  double exhaust_pressure = 0.0;
  double atmospheric_pressure = 0.0;

  double throat_diameter = 0.0;
  double nozzle_exit_diameter = 0.0;
  int nozzle_count = 0;
  double nozzle_angle = 0.0;
  double velocity_coefficient = 0.0;
  double discharge_coefficient = 0.0;

  double mean_diameter = 0.0;
  int blade_count = 0;
  double blade_height = 0.0;
  double blade_width = 0.0;
  std::string rim;
  std::optional<double> speed;
  std::vector<double> speeds;
  std::vector<double> speed_ratios;
  std::string material;
  std::optional<double> density;
  std::optional<double> allowable_stress;
  double ring_thickness = 0.0;
  double bore_diameter = 0.0;

  double stream_total_pressure = 0.0;
  double stream_total_temperature = 0.0;
  double stream_angle = 0.0;
  double stream_exit_pressure = 0.0;
  std::optional<double> stream_mach;
  double row_pitch = 0.0;
  double row_width = 0.0;

  std::string shape;
  std::optional<double> inlet_angle;
  std::optional<double> exit_angle;
  std::optional<double> passage_width;
  std::optional<double> edge_radius;
  std::optional<double> wall_thickness;
  std::string outline_file;  ///< as written in the case
  std::string outline_path;  ///< found from the folder of the case file

  int cells = 0;
  bool friction = false;
  int passages = 0;
  double upstream = 0.0;    ///< widths
  double downstream = 0.0;  ///< widths
  int max_steps = 0;
  int averaging_steps = 0;
  double residual_drop = 0.0;
};

}  // namespace falcate::cases
