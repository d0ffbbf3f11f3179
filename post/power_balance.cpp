#include "post/power_balance.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

double tangential(const StreamState& stream) {
  return stream.velocity_m_s * std::cos(stream.angle_deg * std::numbers::pi / 180.0);
}

/// Half the square of the velocity, J/kg.
double kinetic(double velocity) { return 0.5 * velocity * velocity; }

}  // namespace

double surplus_tangential_velocity(const PassageFigures& figures, const WheelDuty& duty) {
  if (figures.capacity_ratio <= 1.0) return 0.0;
  const double angle = duty.jet_angle_deg * std::numbers::pi / 180.0;
  const double of_jet = duty.jet.jet_velocity * std::cos(angle) - duty.blade_speed;
  return std::max(tangential(figures.inlet) - of_jet, 0.0);
}

void set_power_balance(PassageFigures& figures, const solver::Gas& gas, const WheelDuty& duty) {
  const StreamState &inlet = figures.inlet, &exit = figures.exit;
  const double all = duty.jet.mass_flow, u = duty.blade_speed;
  const double loaded = all * std::min(figures.capacity_ratio, 1.0);
  const double jet = kinetic(duty.jet.jet_velocity);
  const auto at_exhaust = [&](const StreamState& stream) {
    const double ratio = std::min(duty.jet.jet_pressure / stream.total_pressure_pa, 1.0);
    return kinetic(solver::isentropic_velocity(gas, stream.total_temperature_k, ratio));
  };
  const double ideal = at_exhaust(inlet), real = at_exhaust(exit);
  const double entering = tangential(inlet) - surplus_tangential_velocity(figures, duty);
  figures.supply_power_w = all * kinetic(duty.jet.spouting_velocity);
  figures.nozzle_loss_w = figures.supply_power_w - all * jet;
  figures.spill_loss_w = (all - loaded) * jet;
  figures.entry_loss_w = loaded * (jet - (ideal + u * entering + kinetic(u)));
  figures.blade_loss_w = loaded * (ideal - real);
  figures.leaving_loss_w =
      loaded * (kinetic(figures.absolute_exit_velocity_m_s) + real - kinetic(exit.velocity_m_s));
}

}  // namespace falcate::post
