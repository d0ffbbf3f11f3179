/// Exact solution of the Riemann problem of an ideal gas: two states that meet at x = 0, t = 0.
/// Any consistent units; plain double. Serves as the yardstick of the numerical fluxes.
///   f_l(p) + f_r(p) + u_r - u_l = 0 gives the star pressure; each f is that of a shock above the
///   side's pressure, of a rarefaction below.
/// Newton's method kept above a tenth of the pressure it steps from, so always positive.
/// Errors: std::invalid_argument where the states part so fast that a vacuum opens.
/// Source: Toro, Riemann Solvers and Numerical Methods for Fluid Dynamics, 3rd ed. 2009, ch. 4.
#pragma once
#include "solver/state.h"

namespace falcate::solver {

struct RiemannSide {
  double density = 0.0, velocity = 0.0, pressure = 0.0;
};

/// Between the two outer waves; the densities differ across the contact.
struct RiemannStar {
  double pressure = 0.0, velocity = 0.0, density_left = 0.0, density_right = 0.0;
};

RiemannStar riemann_star(const RiemannSide& left, const RiemannSide& right, double gamma);

/// State on the ray x/t = speed.
RiemannSide riemann_state(const RiemannSide& left, const RiemannSide& right, double gamma,
                          double speed);

/// Flux of Godunov's method through the length-weighted normal n: that of the exact state on the
/// ray x/t = 0, the tangential velocity that of the side the contact carries there.
State<double> godunov_flux(const State<double>& left, const State<double>& right,
                           const mesh::Point& n, double gamma);

}  // namespace falcate::solver
