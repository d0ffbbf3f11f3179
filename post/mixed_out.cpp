#include "post/mixed_out.h"

#include <fmt/format.h>

#include <cassert>
#include <cmath>
#include <numbers>

#include "solver/mixed_out.h"

namespace falcate::post {

solver::Primitive mixed_out(const solver::Gas& gas, const solver::BoundaryFlux& through,
                            double pitch, solver::Branch axial) {
  assert(pitch > 0.0);
  if (!(through.mass > 0.0))
    throw MixedOutError(fmt::format(
        "no flow in the through-flow direction: {:.4g} kg/(s m) pass the plane", through.mass));
  const solver::State<double> flux = {through.mass / pitch, through.momentum_x / pitch,
                                      through.momentum_y / pitch, through.energy / pitch};
  const auto equation = solver::mixed_out_equation(flux, gas.heat_capacity_ratio);
  const solver::State<double> state = solver::mixed_out_state(flux, gas.heat_capacity_ratio, axial);
  constexpr double round_off = 1e-10;
  if (!(equation.discriminant() > -round_off * equation.b * equation.b) || !(equation.b > 0.0) ||
      !(equation.c > 0.0) || !(state[solver::pressure] > 0.0))
    throw MixedOutError("no uniform stream carries the mass, momentum and energy of this plane");
  return {state[0], state[1], state[2], state[3]};
}

StreamState stream_state(const solver::Gas& gas, const solver::Primitive& stream) {
  const double g = gas.heat_capacity_ratio;
  const double temperature = stream.pressure / (gas.gas_constant * stream.density);
  StreamState state;
  state.angle_deg = std::atan2(stream.u, stream.v) * 180.0 / std::numbers::pi;
  state.velocity_m_s = std::hypot(stream.u, stream.v);
  state.mach = state.velocity_m_s / solver::speed_of_sound(gas, temperature);
  state.pressure_pa = stream.pressure;
  state.total_pressure_pa = stream.pressure / solver::pressure_ratio(state.mach, g);
  state.total_temperature_k = temperature / solver::temperature_ratio(state.mach, g);
  return state;
}

}  // namespace falcate::post
