/// One solved operating point: every figure of a result file, with its numerical error.
/// SI units; angles in degrees from the plane of rotation; "relative" is the blade's frame.
#pragma once
#include <array>
#include <optional>
#include <string>
#include <vector>

#include "solver/flow_solution.h"

namespace falcate::post {

/// A uniform (mixed-out) relative stream.
struct StreamState {
  double angle_deg = 0.0, mach = 0.0, velocity_m_s = 0.0, pressure_pa = 0.0,
         total_pressure_pa = 0.0, total_temperature_k = 0.0;
};

/// What a flow solution on one mesh yields for a passage, per metre of blade height.
struct PassageFigures {
  StreamState inlet, exit;
  double turning_deg = 0.0;
  double mass_flow_kg_s_m = 0.0;
  double tangential_force_n_m = 0.0,
         axial_force_n_m = 0.0;  ///< pressure integral over the blade, gas on blade
  double momentum_tangential_n_m = 0.0,
         momentum_axial_n_m = 0.0;   ///< same from the in- and outflow
  double mass_imbalance = 0.0;       ///< (in - out) / in
  double total_pressure_loss = 0.0;  ///< (p01 - p02) / (p01 - p2)
  double absolute_exit_velocity_m_s = 0.0;
  double capacity_ratio = 0.0;  ///< flow swallowed / flow offered; 0 for a rig
  double blade_efficiency = 0.0, wheel_efficiency = 0.0;  ///< 0 for a rig
  double tangential_force_n = 0.0, axial_force_n = 0.0;   ///< all loaded blades; 0 for a rig
  double torque_n_m = 0.0, power_w = 0.0;                 ///< wheel; 0 for a rig
  double supply_power_w = 0.0;  ///< = power + losses, see power_balance.h; 0 for a rig
  double nozzle_loss_w = 0.0, spill_loss_w = 0.0, entry_loss_w = 0.0, blade_loss_w = 0.0,
         leaving_loss_w = 0.0;
};

/// One row a figure: drives the result files, the error bars, the report's table and the tests.
struct FigureRow {
  const char* group;  ///< object in results.json ("" = the point itself)
  const char* key;    ///< with its unit
  const char* title;  ///< plain words for people
  const char* unit;   ///< for people
  bool wheel_only;
  double PassageFigures::*value;  ///< null where the figure sits in a stream state
  StreamState PassageFigures::*stream;
  double StreamState::*stream_value;
};
const std::vector<FigureRow>& figure_rows();
double figure_value(const FigureRow& row, const PassageFigures& figures);
double& figure_value(const FigureRow& row, PassageFigures& figures);

/// Surface distribution of one side, in the order of arc length from the leading edge.
struct SurfacePoint {
  double x = 0.0, y = 0.0, arc_length = 0.0;  ///< m
  double pressure_pa = 0.0, isentropic_mach = 0.0;
};

/// Half-widths of the error bars, figure by figure.
struct NumericalError : PassageFigures {
  std::string basis;  ///< how many figures have their bar in which way; see error_bar.h
};

struct PointResult {
  std::string id, shape;
  bool wheel = false;
  double speed_rpm = 0.0, blade_speed_m_s = 0.0, speed_ratio = 0.0;
  PassageFigures figures;  ///< finest mesh
  NumericalError numerical_error;
  std::vector<SurfacePoint> suction, pressure;
  solver::SteadySummary solution;  ///< finest mesh
  int cells = 0;
  double seconds = 0.0;              ///< all levels
  std::string failure;               ///< plain words; empty if the point stands
  std::vector<std::string> remarks;  ///< plain sentences (choked, not started, ...)
};

}  // namespace falcate::post
