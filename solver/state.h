/// Primitive state (density, u, v, pressure) and the quantities of the Euler equations made of it:
///   U = (rho, rho u, rho v, rho E),  F.n = (rho w, rho u w + p nx, rho v w + p ny, rho w H),
///   w = u nx + v ny,  H = gamma/(gamma-1) p/rho + (u^2+v^2)/2,  E = H - p/rho,  a^2 = gamma p/rho.
/// Any consistent units; inside the solver density, pressure and temperature are those at rest at
/// the inlet (total values 1), so speeds are in sqrt(p0/rho0). `T` is double or a dual number.
/// Source: Toro, Riemann Solvers and Numerical Methods for Fluid Dynamics, 3rd ed. 2009, ch. 3.
#pragma once
#include <array>
#include <cmath>

#include "mesh/point.h"

namespace falcate::solver {

enum : std::size_t { density = 0, velocity_x = 1, velocity_y = 2, pressure = 3 };

template <class T>
using State = std::array<T, 4>;

template <class T>
T speed_of_sound(const State<T>& q, double gamma) {
  using std::sqrt;
  return sqrt(gamma * q[pressure] / q[density]);
}

template <class T>
T total_enthalpy(const State<T>& q, double gamma) {
  return gamma / (gamma - 1.0) * q[pressure] / q[density] +
         0.5 * (q[velocity_x] * q[velocity_x] + q[velocity_y] * q[velocity_y]);
}

/// Physical flux through the length-weighted normal n.
template <class T>
State<T> physical_flux(const State<T>& q, const mesh::Point& n, double gamma) {
  const T mass = q[density] * (q[velocity_x] * n.x() + q[velocity_y] * n.y());
  return {mass, mass * q[velocity_x] + q[pressure] * n.x(),
          mass * q[velocity_y] + q[pressure] * n.y(), mass * total_enthalpy(q, gamma)};
}

template <class T>
State<T> conserved(const State<T>& q, double gamma) {
  const T kinetic = 0.5 * (q[velocity_x] * q[velocity_x] + q[velocity_y] * q[velocity_y]);
  return {q[density], q[density] * q[velocity_x], q[density] * q[velocity_y],
          q[pressure] / (gamma - 1.0) + q[density] * kinetic};
}

/// Row-major derivative of the conserved with respect to the primitive variables.
inline std::array<double, 16> conserved_by_primitive(const State<double>& q, double gamma) {
  const double u = q[velocity_x], v = q[velocity_y], rho = q[density];
  return {1.0,
          0.0,
          0.0,
          0.0,
          u,
          rho,
          0.0,
          0.0,
          v,
          0.0,
          rho,
          0.0,
          0.5 * (u * u + v * v),
          rho * u,
          rho * v,
          1.0 / (gamma - 1.0)};
}

}  // namespace falcate::solver
