#include "post/mixed_out.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <numbers>

namespace falcate::post {

solver::Primitive mixed_out(const solver::Gas& gas, const solver::BoundaryFlux& through,
                            double pitch, Branch axial) {
  assert(pitch > 0.0);
  if (!(through.mass > 0.0))
    throw MixedOutError(fmt::format(
        "no flow in the through-flow direction: {:.4g} kg/(s m) pass the plane", through.mass));
  const double g = gas.heat_capacity_ratio;
  const double v = through.momentum_y / through.mass;
  const double still = through.energy / through.mass - 0.5 * v * v;
  // a u^2 - 2 b u + c = 0; b^2 = a c where the axial velocity is just sonic.
  const double a = 0.5 * (g + 1.0) / (g - 1.0);
  const double b = 0.5 * g / (g - 1.0) * through.momentum_x / through.mass;
  const double discriminant = b * b - a * still;
  constexpr double round_off = 1e-10;
  if (!(discriminant > -round_off * b * b) || !(b > 0.0) || !(still > 0.0))
    throw MixedOutError("no uniform stream carries the mass, momentum and energy of this plane");
  const double root = std::sqrt(std::max(discriminant, 0.0));
  // The smaller root by its product with the larger one, free of cancellation at low speed.
  const double u = axial == Branch::supersonic ? (b + root) / a : still / (b + root);
  const double pressure = (through.momentum_x - through.mass * u) / pitch;
  if (!(pressure > 0.0))
    throw MixedOutError("no uniform stream carries the mass, momentum and energy of this plane");
  return {through.mass / (pitch * u), u, v, pressure};
}

StreamState stream_state(const solver::Gas& gas, const solver::Primitive& stream) {
  const double g = gas.heat_capacity_ratio;
  const double temperature = stream.pressure / (gas.gas_constant * stream.density);
  StreamState state;
  state.angle_deg = std::atan2(stream.u, stream.v) * 180.0 / std::numbers::pi;
  state.velocity_m_s = std::hypot(stream.u, stream.v);
  state.mach = state.velocity_m_s / speed_of_sound(gas, temperature);
  state.pressure_pa = stream.pressure;
  state.total_pressure_pa = stream.pressure / pressure_ratio(state.mach, g);
  state.total_temperature_k = temperature / temperature_ratio(state.mach, g);
  return state;
}

}  // namespace falcate::post
