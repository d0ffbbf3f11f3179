/// The uniform stream that carries the same mass, momentum and energy as an uneven one.
///   m = rho u,  F_x = rho u^2 + p,  F_y = rho u v,  H = energy/m  (each per area of the plane)
///   ((g+1)/(2(g-1))) u^2 - (g/(g-1)) (F_x/m) u + H - v^2/2 = 0,  v = F_y/m
/// Smaller root: axial velocity below sonic; larger root: above it.
/// SI units; through a plane x = const, positive in +x. Source: control volume; Denton, J.
/// Turbomachinery 115 (1993) 621; AGARD-AG-328 (1993).
#pragma once
#include <stdexcept>

#include "post/gas_dynamics.h"
#include "post/point_result.h"
#include "solver/flow_solution.h"
#include "solver/gas.h"

namespace falcate::post {

/// No uniform stream carries these fluxes (no flow, or backward flow, through the plane).
class MixedOutError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// `through`: fluxes through the plane in +x, per metre of height; `pitch` the width of the plane,
/// m. `axial` chooses the root by the axial Mach number. Throws MixedOutError.
solver::Primitive mixed_out(const solver::Gas& gas, const solver::BoundaryFlux& through,
                            double pitch, Branch axial);

StreamState stream_state(const solver::Gas& gas, const solver::Primitive& stream);

}  // namespace falcate::post
