/// Static pressure of the uniform stream with the same mass, momentum and energy flow per area.
/// From f = (rho u, rho u^2 + p, rho u v, rho u H) averaged over the pitch:
///   (g+1)/(2(g-1)) u^2 - g/(g-1) (Fx/m) u + H - v^2/2 = 0, lesser root (subsonic axial part),
///   p = Fx - m u.
/// Source: conservation of mass, momentum and energy; AGARDograph 207 (1975), ch. on averaging.
#pragma once
#include "solver/dual.h"
#include "solver/state.h"

namespace falcate::solver {

template <class T>
T mixed_out_pressure(const State<T>& f, double gamma) {
  using std::sqrt;
  const T v = f[2] / f[0], h = f[3] / f[0], thrust = f[1] / f[0];
  const double second = (gamma + 1.0) / (2.0 * (gamma - 1.0)), ratio = gamma / (gamma - 1.0);
  const T first = ratio * thrust;
  const T inside = larger(T(first * first - 4.0 * second * (h - 0.5 * v * v)), T(1e-14));
  const T u = (first - sqrt(inside)) / (2.0 * second);
  return f[1] - f[0] * u;
}

}  // namespace falcate::solver
