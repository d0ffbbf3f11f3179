/// Outflow plane with subsonic axial part: waves leave unreflected, the mixed-out pressure is set.
///
/// Entropy, tangential velocity and the invariant u + 2a/(gamma-1) are the cell's. The pressure is
/// P (1 + (c3 + c4)/2P): c2 = rho a v, c3 = p + rho a u, deviations from the pitchwise mean, and
/// the incoming wave of each harmonic
///   c4 = (2u/(beta - v)) c2 - ((beta + v)/(beta - v)) c3      (u, v in units of a),
///   beta = i sgn(l) sqrt(1 - M^2) below, -sgn(v) sqrt(M^2 - 1) above Mach 1.
/// The level P is such that the uniform stream with the same mass, momentum and energy flow has the
/// set pressure. Where the axial part of the mean stream is supersonic and the set pressure below
/// that behind a shock along the plane, everything leaves: the cell's state.
/// Where a vortex draws gas back in through the plane, that gas comes from rest behind the row: its
/// total pressure is P (1 + ...) and its total enthalpy that of the supply, so that no energy
/// enters which the stream did not bring. Source: Giles, AIAA J. 28(12) (1990) 2050-2058.
#pragma once
#include <algorithm>
#include <span>
#include <vector>

#include "solver/mixed_out.h"
#include "solver/plane_waves.h"
#include "solver/reconstruction.h"
#include "solver/state.h"

namespace falcate::solver {

struct OutletStream {
  double gamma = 1.4;
  bool axially_supersonic = false;
  double pressure = 1.0;  ///< set, mixed out
  /// Mean state: u, v in units of a; rho a; M^2.
  double u = 0.0, v = 0.0, impedance = 1.0, mach_squared = 0.0;
  double pressure_behind_shock = 0.0;  ///< along the plane, in a mean stream axially supersonic
};

namespace outlet_detail {

/// c4 = local2 c2 + local3 c3 + hilbert2 H(c2) + hilbert3 H(c3) on deviations from the mean.
struct WaveCoefficients {
  double local2, local3, hilbert2 = 0.0, hilbert3 = 0.0;
};

inline WaveCoefficients exact_coefficients(const OutletStream& s) {
  const double v = s.v;
  if (s.mach_squared > 1.0) {
    const double beta = (v < 0.0 ? 1.0 : -1.0) * std::sqrt(s.mach_squared - 1.0);
    return {2.0 * s.u / (beta - v), -(beta + v) / (beta - v)};
  }
  const double b = std::sqrt(1.0 - s.mach_squared), size = v * v + b * b;
  return {-2.0 * s.u * v / size, (v * v - b * b) / size, 2.0 * s.u * b / size, -2.0 * v * b / size};
}

/// As the axial Mach number nears 1 with little swirl the exact ones grow without bound, and with
/// them any error: there waves are answered in part only.
inline WaveCoefficients wave_coefficients(const OutletStream& s) {
  constexpr double greatest = 3.0;
  WaveCoefficients k = exact_coefficients(s);
  const double size = std::hypot(k.local2, k.hilbert2);
  if (!(size > greatest)) return k;
  const double part = greatest / size;
  return {part * k.local2, part * k.local3, part * k.hilbert2, part * k.hilbert3};
}

/// Isentropic change of the cell's state to pressure p with the invariant u + 2a/(gamma-1).
template <class T>
State<T> at_pressure(const State<T>& cell, const T& p, double gamma) {
  using std::pow;
  const T rho = cell[density] * pow(T(p / cell[pressure]), 1.0 / gamma);
  const State<T> out = {rho, cell[1], cell[2], p};
  const T change = speed_of_sound(cell, gamma) - speed_of_sound(out, gamma);
  return {rho, cell[1] + 2.0 / (gamma - 1.0) * change, cell[2], p};
}

/// Gas drawn back in from rest at pressure p and the supply's total enthalpy, with the cell's
/// tangential velocity; at most as fast as sound, as through an orifice.
template <class T>
State<T> drawn_in(const State<T>& wanted, const T& p, double gamma) {
  using std::pow;
  using std::sqrt;
  const double total = gamma / (gamma - 1.0), sonic = std::sqrt(2.0 * gamma / (gamma + 1.0));
  const T v = larger(smaller(wanted[velocity_y], T(sonic)), T(-sonic));
  const T still = total - 0.5 * v * v;
  const T u = larger(wanted[velocity_x], T(-sqrt(2.0 * (gamma - 1.0) / (gamma + 1.0) * still)));
  const T left = still - 0.5 * u * u;
  const T pressure = p * pow(T(left / still), total);
  return {total * pressure / left, u, v, pressure};
}

template <class T>
State<T> let_out(const State<T>& cell, const T& p, double gamma) {
  const State<T> out = at_pressure(cell, p, gamma);
  if (value_of(out[velocity_x]) >= 0.0) return out;
  return drawn_in(out, p, gamma);
}

/// Level P with a wave on it. Waves beyond the linear theory are held to 0.6 P, so that a vortex or
/// shock on its way out does not empty the cells at the plane.
template <class T>
T with_wave(const T& level, const T& half) {
  using std::pow;
  constexpr double greatest = 0.6;
  const T x = half / (greatest * level), square = x * x;
  return level + half * pow(T(1.0 + square * square), -0.25);
}

/// Error of the mixed-out pressure at level P, the waves `half` = (c3 + c4)/2 riding on it.
template <class T>
T pressure_error(std::span<const State<T>> cells, std::span<const T> half, const T& level,
                 const OutletStream& s, const PlaneWaves& waves) {
  State<T> sum{T(0.0), T(0.0), T(0.0), T(0.0)};
  for (std::size_t i = 0; i < cells.size(); ++i) {
    const State<T> q = let_out(cells[i], with_wave(level, half[i]), s.gamma);
    const State<T> f = physical_flux(q, mesh::Point(1.0, 0.0), s.gamma);
    for (std::size_t k = 0; k < 4; ++k) sum[k] += waves.weight(i) * f[k];
  }
  return mixed_out_state(sum, s.gamma, Branch::subsonic)[pressure] - s.pressure;
}

/// P by Newton's method on values, with a last step on T, which carries exact derivatives.
template <class T>
T pressure_level(std::span<const State<T>> cells, std::span<const T> half, const OutletStream& s,
                 const PlaneWaves& waves) {
  std::vector<State<Dual<1>>> cv;
  std::vector<Dual<1>> hv;
  for (std::size_t i = 0; i < cells.size(); ++i) {
    cv.push_back({Dual<1>(value_of(cells[i][0])), Dual<1>(value_of(cells[i][1])),
                  Dual<1>(value_of(cells[i][2])), Dual<1>(value_of(cells[i][3]))});
    hv.emplace_back(value_of(half[i]));
  }
  double level = s.pressure, slope = 1.0, change = level;
  for (int step = 0; step < 50 && std::abs(change) > 1e-15 * level; ++step) {
    const auto error = pressure_error<Dual<1>>(cv, hv, Dual<1>::seeded(level, 0), s, waves);
    slope = error.derivative[0];
    // Away from the answer the slope can be poor: stay near the plain one-to-one step.
    change = std::clamp(error.value / std::clamp(slope, 0.3, 3.0), -level, 0.5 * level);
    level -= change;
  }
  // Where a first guess has no such level (the mean stream would be axially supersonic) the plain
  // pressure serves until the flow nears its answer.
  if (!(std::abs(change) <= 1e-12 * level) || level < 0.1 * s.pressure || level > 3.0 * s.pressure)
    return T(s.pressure);
  return T(level) - pressure_error<T>(cells, half, T(level), s, waves) / slope;
}

template <class T>
std::vector<T> half_waves(std::span<const State<T>> cells, const OutletStream& s,
                          const PlaneWaves& waves) {
  const std::size_t n = cells.size();
  const WaveCoefficients k = wave_coefficients(s);
  std::vector<T> c2(n), c3(n), half(n, T(0.0));
  for (std::size_t i = 0; i < n; ++i) {
    c2[i] = s.impedance * cells[i][velocity_y];
    c3[i] = cells[i][pressure] + s.impedance * cells[i][velocity_x];
  }
  const T mean2 = waves.mean<T>(c2), mean3 = waves.mean<T>(c3);
  if (!waves.periodic()) return half;
  for (std::size_t i = 0; i < n; ++i) {
    T c4 = k.local2 * (c2[i] - mean2) + k.local3 * (c3[i] - mean3);
    if (k.hilbert2 != 0.0 || k.hilbert3 != 0.0)
      c4 += k.hilbert2 * waves.hilbert<T>(c2, i) + k.hilbert3 * waves.hilbert<T>(c3, i);
    half[i] = 0.5 * (c3[i] - mean3 + c4);
  }
  return half;
}

}  // namespace outlet_detail

/// States at the faces of the plane from those of the adjoining cells.
template <class T>
void outlet_states(std::span<const State<T>> cells, const OutletStream& s, const PlaneWaves& waves,
                   std::span<State<T>> boundary) {
  if (s.axially_supersonic) {
    std::copy(cells.begin(), cells.end(), boundary.begin());
    return;
  }
  const std::vector<T> half = outlet_detail::half_waves(cells, s, waves);
  const T level = outlet_detail::pressure_level<T>(cells, half, s, waves);
  for (std::size_t i = 0; i < cells.size(); ++i)
    boundary[i] =
        outlet_detail::let_out(cells[i], outlet_detail::with_wave(level, half[i]), s.gamma);
}

}  // namespace falcate::solver
