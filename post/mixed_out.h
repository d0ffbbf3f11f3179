/// The uniform stream that carries the same mass, momentum and energy as an uneven one.
/// The equations are those of solver/mixed_out.h; here with the reasons why there may be none.
/// SI units; through a plane x = const, positive in +x. Source: control volume; Denton, J.
/// Turbomachinery 115 (1993) 621; AGARD-AG-328 (1993).
#pragma once
#include <stdexcept>

#include "post/point_result.h"
#include "solver/flow_solution.h"
#include "solver/gas.h"
#include "solver/gas_dynamics.h"

namespace falcate::post {

/// No uniform stream carries these fluxes (no flow, or backward flow, through the plane).
class MixedOutError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// `through`: fluxes through the plane in +x, per metre of height; `pitch` the width of the plane,
/// m. `axial` chooses the root by the axial Mach number. Throws MixedOutError.
solver::Primitive mixed_out(const solver::Gas& gas, const solver::BoundaryFlux& through,
                            double pitch, solver::Branch axial);

StreamState stream_state(const solver::Gas& gas, const solver::Primitive& stream);

}  // namespace falcate::post
