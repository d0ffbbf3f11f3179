/// Inflow plane: what the stream brings is set, what the blade row sends back is let out.
///
/// Entropy and total enthalpy are those of the supply at every face. Then, by regime:
/// - subsonic: the tangential velocity is v_mean + dv. dv follows from the outgoing pressure wave
///   c4 = p - rho a u by the steady non-reflecting condition of each pitchwise harmonic,
///   rho a dv = -((beta + v)/(1 + u)) c4, beta = i sgn(l) sqrt(1 - M^2) (u, v in units of a);
///   the outgoing invariant u - 2a/(gamma-1) is the cell's; v_mean gives the momentum of the
///   stream the set angle, or, where a jet is drawn in faster than it comes, its tangential
///   velocity.
/// - supersonic with subsonic axial part: |theta| + nu(M), theta from axial, comes in with the
///   stream; |theta| - nu(M) leaves with the waves of the blades (unique incidence stays free).
///   The shocks among these waves go on ahead of the plane and take total pressure from the gas
///   there, in all the energy of the waves, of second order in their strength. What passes the
///   plane is the same anywhere ahead: so the uniform stream with the same mass, momentum and
///   energy flow (mixed_out.h) has the set |theta| + nu and total pressure, and the values at the
///   faces, alike for all, are such that it has.
/// - axial part supersonic: the full given state.
/// Inside units of the solver: total density and pressure 1.
/// Sources: Giles, AIAA J. 28(12) (1990) 2050-2058; Saxer & Giles, J. Propulsion 9(2) (1993)
/// 263-268 (uniform entropy and enthalpy);
/// simple waves: Ames Research Staff, NACA Report 1135 (1953).
#pragma once
#include <span>
#include <vector>

#include "solver/gas_dynamics.h"
#include "solver/mixed_out.h"
#include "solver/plane_waves.h"
#include "solver/prandtl_meyer.h"
#include "solver/state.h"

namespace falcate::solver {

enum class InletRegime { subsonic, simple_wave, axially_supersonic };

struct InletStream {
  double gamma = 1.4;
  InletRegime regime = InletRegime::subsonic;
  double cotangent = 0.0;          ///< of the set angle: v / u
  double simple_wave = 0.0;        ///< |theta| + nu, rad
  double least_outgoing = -1e300;  ///< |theta| - nu where the axial part of the wave is sonic
  State<double> given{};           ///< full state, where one is given
  /// Mean state about which waves are taken apart: u, v in units of a; rho a; sqrt(1 - M^2).
  double u = 0.0, v = 0.0, impedance = 1.0, beta = 1.0;
};

namespace inlet_detail {

/// State at total pressure and density 1 from v and the outgoing invariant J = u - 2a/(gamma-1);
/// at most axially sonic either way, where a passing first guess is caught.
template <class T>
State<T> from_invariant(const T& invariant, const T& v, double gamma) {
  using std::pow;
  using std::sqrt;
  const double k = 2.0 / (gamma - 1.0), h = gamma / (gamma - 1.0);
  const double second = 1.0 / (gamma - 1.0) + 0.5 * k * k;
  const T left = larger(T(h - 0.5 * v * v), T(0.05 * h));
  const T sonic = sqrt(2.0 * (gamma - 1.0) / (gamma + 1.0) * left);
  const T j = larger(smaller(invariant, T((1.0 - k) * sonic)), T(-(1.0 + k) * sonic));
  const T first = k * j, zeroth = 0.5 * j * j - left;
  const T inside = larger(T(first * first - 4.0 * second * zeroth), T(1e-12));
  const T a = (sqrt(inside) - first) / (2.0 * second);
  const T rho = pow(T(a * a / gamma), 1.0 / (gamma - 1.0));
  return {rho, j + k * a, v, rho * a * a / gamma};
}

/// The sign that makes the set stream's angle from axial positive.
inline double side_of(const InletStream& s) { return s.cotangent < 0.0 ? -1.0 : 1.0; }

/// |theta| - nu of a cell, which leaves. Nothing leaves a stream whose axial part is supersonic: it
/// is held at sonic, where a passing first guess is caught.
template <class T>
T outgoing_invariant(const State<T>& cell, const InletStream& s) {
  using std::atan2;
  const T a = speed_of_sound(cell, s.gamma);
  const T m2 = (cell[1] * cell[1] + cell[2] * cell[2]) / (a * a);
  const T leaving = side_of(s) * atan2(cell[2], cell[1]) - prandtl_meyer(m2, s.gamma);
  return larger(leaving, T(s.least_outgoing));
}

/// State at total density and pressure 1 where the waves of both families meet.
template <class T>
State<T> simple_wave_state(const T& incoming, const T& outgoing, const InletStream& s) {
  using std::cos;
  using std::sin;
  const T nu = larger(T(0.5 * (incoming - outgoing)), T(1e-6));
  const T turned = 0.5 * (incoming + outgoing);
  const auto in = unit_stream(mach_squared_from_prandtl_meyer(nu, s.gamma), s.gamma);
  return {in.density, in.speed * cos(turned), side_of(s) * in.speed * sin(turned), in.pressure};
}

/// What the uniform stream with the same fluxes has.
template <class T>
struct MixedStream {
  T incoming, total_pressure;
};

template <class T>
MixedStream<T> mixed_stream(std::span<const T> outgoing, const T& incoming, const InletStream& s,
                            const PlaneWaves& waves) {
  using std::atan2;
  using std::pow;
  State<T> sum{T(0.0), T(0.0), T(0.0), T(0.0)};
  for (std::size_t i = 0; i < outgoing.size(); ++i) {
    const auto f =
        physical_flux(simple_wave_state(incoming, outgoing[i], s), mesh::Point(1.0, 0.0), s.gamma);
    for (std::size_t k = 0; k < 4; ++k) sum[k] += waves.weight(i) * f[k];
  }
  const State<T> q = mixed_out_state(sum, s.gamma, Branch::subsonic);
  const T a = speed_of_sound(q, s.gamma);
  const T m2 = (q[1] * q[1] + q[2] * q[2]) / (a * a);
  const double h = s.gamma / (s.gamma - 1.0);
  return {side_of(s) * atan2(q[2], q[1]) + prandtl_meyer(m2, s.gamma),
          q[pressure] * pow(T(1.0 + 0.5 * (s.gamma - 1.0) * m2), h)};
}

/// The |theta| + nu at the faces for which the uniform stream has the set one; by Newton's method
/// on values, with a last step on T, which carries exact derivatives.
template <class T>
T incoming_level(std::span<const T> outgoing, const InletStream& s, const PlaneWaves& waves) {
  constexpr double near = 1e-7, far = 0.2;
  std::vector<Dual<1>> values;
  for (const T& leaving : outgoing) values.emplace_back(value_of(leaving));
  double level = s.simple_wave, slope = 1.0, change = far;
  for (int step = 0; step < 20 && std::abs(change) > near; ++step) {
    const auto now = mixed_stream<Dual<1>>(values, Dual<1>::seeded(level, 0), s, waves).incoming;
    slope = std::clamp(now.derivative[0], 0.3, 3.0);
    change = (now.value - s.simple_wave) / slope;
    level -= change;
  }
  // Waves too strong for any such level: the set one serves.
  if (!(std::abs(change) <= near) || std::abs(level - s.simple_wave) > far) return T(s.simple_wave);
  return T(level) -
         (mixed_stream<T>(outgoing, T(level), s, waves).incoming - s.simple_wave) / slope;
}

template <class T>
void simple_wave(std::span<const State<T>> cells, const InletStream& s, const PlaneWaves& waves,
                 std::span<State<T>> boundary) {
  std::vector<T> outgoing;
  for (const State<T>& cell : cells) outgoing.push_back(outgoing_invariant(cell, s));
  const T incoming = incoming_level<T>(outgoing, s, waves);
  const T gain = mixed_stream<T>(outgoing, incoming, s, waves).total_pressure;
  for (std::size_t i = 0; i < cells.size(); ++i) {
    boundary[i] = simple_wave_state(incoming, outgoing[i], s);
    boundary[i][density] = boundary[i][density] / gain;
    boundary[i][pressure] = boundary[i][pressure] / gain;
  }
}

/// Momentum error of the set angle: sum of weight * rho u (v - u cot) over the plane.
template <class T>
T angle_error(std::span<const T> j, std::span<const T> dv, const T& mean, const InletStream& s,
              const PlaneWaves& waves) {
  T sum(0.0);
  for (std::size_t i = 0; i < j.size(); ++i) {
    const State<T> q = from_invariant(j[i], T(mean + dv[i]), s.gamma);
    sum += waves.weight(i) * q[density] * q[1] * (q[2] - q[1] * s.cotangent);
  }
  return sum;
}

/// v_mean by Newton's method on values, with a last step on T, which carries exact derivatives.
template <class T>
T mean_tangential(std::span<const T> j, std::span<const T> dv, const InletStream& s,
                  const PlaneWaves& waves, double start) {
  std::vector<Dual<1>> jv, dvv;
  for (std::size_t i = 0; i < j.size(); ++i) {
    jv.emplace_back(value_of(j[i]));
    dvv.emplace_back(value_of(dv[i]));
  }
  double mean = start, slope = 1.0;
  for (int step = 0; step < 50; ++step) {
    const auto error = angle_error<Dual<1>>(jv, dvv, Dual<1>::seeded(mean, 0), s, waves);
    slope = error.derivative[0];
    const double change = error.value / slope;
    mean -= change;
    if (std::abs(change) <= 1e-15) break;
  }
  // While gas pours back out of a first guess no mean direction fits: keep to the given one.
  if (!(std::abs(mean) <= std::sqrt(2.0 * s.gamma / (s.gamma - 1.0)))) return T(start);
  return T(mean) - angle_error<T>(j, dv, T(mean), s, waves) / slope;
}

template <class T>
void subsonic(std::span<const State<T>> cells, const InletStream& s, const PlaneWaves& waves,
              std::span<State<T>> boundary) {
  const std::size_t n = cells.size();
  std::vector<T> c4(n), j(n), dv(n);
  for (std::size_t i = 0; i < n; ++i) {
    c4[i] = cells[i][pressure] - s.impedance * cells[i][velocity_x];
    j[i] = cells[i][velocity_x] - 2.0 / (s.gamma - 1.0) * speed_of_sound(cells[i], s.gamma);
  }
  const T mean_c4 = waves.mean<T>(c4);
  const double scale = 1.0 / ((1.0 + s.u) * s.impedance);
  for (std::size_t i = 0; i < n; ++i)
    dv[i] = scale *
            (s.beta * waves.hilbert<T>(c4, i) - (waves.periodic() ? s.v : 0.0) * (c4[i] - mean_c4));
  const T mean = mean_tangential<T>(j, dv, s, waves, value_of(cells[0][velocity_x]) * s.cotangent);
  for (std::size_t i = 0; i < n; ++i) boundary[i] = from_invariant(j[i], T(mean + dv[i]), s.gamma);
}

}  // namespace inlet_detail

/// States at the faces of the plane from those of the adjoining cells.
template <class T>
void inlet_states(std::span<const State<T>> cells, const InletStream& s, const PlaneWaves& waves,
                  std::span<State<T>> boundary) {
  if (s.regime == InletRegime::subsonic) return inlet_detail::subsonic(cells, s, waves, boundary);
  if (s.regime == InletRegime::simple_wave)
    return inlet_detail::simple_wave(cells, s, waves, boundary);
  for (State<T>& face : boundary)
    for (std::size_t k = 0; k < 4; ++k) face[k] = T(s.given[k]);
}

}  // namespace falcate::solver
