/// The uniform stream that carries the same mass, momentum and energy as an uneven one.
/// From f = (rho u, rho u^2 + p, rho u v, rho u H) averaged over the pitch:
///   a u^2 - 2 b u + c = 0,   p = F_x - m u,   rho = m/u,   v = F_y/m
///   a = (g+1)/(2(g-1)),  b = (g/(2(g-1))) F_x/m,  c = H - v^2/2
/// Smaller root: axial velocity below sonic; larger root: above it. Any consistent units; the
/// number type is double or a dual number.
/// Source: control volume; Denton, J. Turbomachinery 115 (1993) 621; AGARD-AG-328 (1993).
#pragma once
#include "solver/dual.h"
#include "solver/gas_dynamics.h"
#include "solver/state.h"

namespace falcate::solver {

/// The quadratic equation of the axial velocity.
template <class T>
struct MixedOutEquation {
  double a;
  T b, c;
  T discriminant() const { return b * b - a * c; }  ///< nought where the axial velocity is sonic
};

template <class T>
MixedOutEquation<T> mixed_out_equation(const State<T>& f, double gamma) {
  const T v = f[2] / f[0];
  return {0.5 * (gamma + 1.0) / (gamma - 1.0), 0.5 * gamma / (gamma - 1.0) * (f[1] / f[0]),
          f[3] / f[0] - 0.5 * v * v};
}

/// At and beyond the axially sonic stream its discriminant is held just above nought: fluxes that
/// no uniform stream carries give the sonic one, with finite derivatives.
template <class T>
T mixed_out_axial_velocity(const MixedOutEquation<T>& e, Branch axial) {
  using std::sqrt;
  const double least = 1e-15 * value_of(e.b) * value_of(e.b);
  const T discriminant = e.discriminant();
  const bool sonic = value_of(discriminant) < least;
  const T root = sqrt(sonic ? T(least) : discriminant);
  if (axial == Branch::supersonic) return (e.b + root) / e.a;
  // By the product of both roots: free of cancellation at low speed.
  return sonic ? T((e.b - root) / e.a) : T(e.c / (e.b + root));
}

template <class T>
State<T> mixed_out_state(const State<T>& f, double gamma, Branch axial) {
  const T u = mixed_out_axial_velocity(mixed_out_equation(f, gamma), axial);
  return {f[0] / u, u, f[2] / f[0], f[1] - f[0] * u};
}

}  // namespace falcate::solver
