#include "post/point_result.h"

#include <cassert>

namespace falcate::post {
namespace {

FigureRow in_stream(const char* group, const char* key, const char* title, const char* unit,
                    StreamState PassageFigures::*stream, double StreamState::*value) {
  return {group, key, title, unit, false, nullptr, stream, value};
}

FigureRow figure(const char* group, const char* key, const char* title, const char* unit,
                 double PassageFigures::*value, bool wheel_only = false) {
  return {group, key, title, unit, wheel_only, value, nullptr, nullptr};
}

std::vector<FigureRow> make_rows() {
  using P = PassageFigures;
  using S = StreamState;
  constexpr bool wheel = true;
  return {
      in_stream("inlet", "angle_deg", "Inlet angle", "deg", &P::inlet, &S::angle_deg),
      in_stream("inlet", "mach", "Inlet Mach number", "", &P::inlet, &S::mach),
      in_stream("inlet", "velocity_m_s", "Inlet velocity", "m/s", &P::inlet, &S::velocity_m_s),
      in_stream("inlet", "pressure_pa", "Inlet pressure", "Pa", &P::inlet, &S::pressure_pa),
      in_stream("inlet", "total_pressure_pa", "Inlet total pressure", "Pa", &P::inlet,
                &S::total_pressure_pa),
      in_stream("inlet", "total_temperature_k", "Inlet total temperature", "K", &P::inlet,
                &S::total_temperature_k),
      in_stream("exit", "angle_deg", "Exit angle", "deg", &P::exit, &S::angle_deg),
      in_stream("exit", "mach", "Exit Mach number", "", &P::exit, &S::mach),
      in_stream("exit", "velocity_m_s", "Exit velocity", "m/s", &P::exit, &S::velocity_m_s),
      in_stream("exit", "pressure_pa", "Exit pressure", "Pa", &P::exit, &S::pressure_pa),
      in_stream("exit", "total_pressure_pa", "Exit total pressure", "Pa", &P::exit,
                &S::total_pressure_pa),
      in_stream("exit", "total_temperature_k", "Exit total temperature", "K", &P::exit,
                &S::total_temperature_k),
      figure("", "absolute_exit_velocity_m_s", "Absolute exit velocity", "m/s",
             &P::absolute_exit_velocity_m_s, wheel),
      figure("", "turning_deg", "Turning", "deg", &P::turning_deg),
      figure("", "mass_flow_kg_s_m", "Mass flow per passage and metre of height", "kg/(s m)",
             &P::mass_flow_kg_s_m),
      figure("", "capacity_ratio", "Capacity: flow swallowed over flow offered", "",
             &P::capacity_ratio, wheel),
      figure("", "total_pressure_loss", "Total pressure loss (p01 - p02)/(p01 - p2)", "",
             &P::total_pressure_loss),
      figure("force", "tangential_n_m", "Tangential force per blade and metre of height", "N/m",
             &P::tangential_force_n_m),
      figure("force", "axial_n_m", "Axial force per blade and metre of height", "N/m",
             &P::axial_force_n_m),
      figure("force", "tangential_n", "Tangential force on all loaded blades", "N",
             &P::tangential_force_n, wheel),
      figure("force", "axial_n", "Axial force on all loaded blades", "N", &P::axial_force_n, wheel),
      figure("", "torque_n_m", "Torque", "N m", &P::torque_n_m, wheel),
      figure("", "power_w", "Shaft power", "W", &P::power_w, wheel),
      figure("efficiency", "blade", "Blade efficiency", "", &P::blade_efficiency, wheel),
      figure("efficiency", "wheel", "Wheel efficiency, total to static", "", &P::wheel_efficiency,
             wheel),
      figure("", "supply_power_w", "Power of the supply, isentropic", "W", &P::supply_power_w,
             wheel),
      figure("losses", "nozzle_w", "Lost in the nozzles", "W", &P::nozzle_loss_w, wheel),
      figure("losses", "spill_w", "Lost with gas that the passages do not swallow", "W",
             &P::spill_loss_w, wheel),
      figure("losses", "entry_w", "Lost between jet and blades", "W", &P::entry_loss_w, wheel),
      figure("losses", "blade_w", "Lost in the blade passages", "W", &P::blade_loss_w, wheel),
      figure("losses", "leaving_w", "Leaving with the velocity of the gas", "W", &P::leaving_loss_w,
             wheel),
  };
}

}  // namespace

const std::vector<FigureRow>& figure_rows() {
  static const std::vector<FigureRow> rows = make_rows();
  return rows;
}

double figure_value(const FigureRow& row, const PassageFigures& figures) {
  assert((row.value == nullptr) != (row.stream == nullptr));
  return row.value != nullptr ? figures.*row.value : figures.*row.stream.*row.stream_value;
}

double& figure_value(const FigureRow& row, PassageFigures& figures) {
  assert((row.value == nullptr) != (row.stream == nullptr));
  return row.value != nullptr ? figures.*row.value : figures.*row.stream.*row.stream_value;
}

}  // namespace falcate::post
