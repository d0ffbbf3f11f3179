/// Forces, mixed-out streams and efficiencies of one solved passage, from its boundary fluxes.
///   blade efficiency = F_u u / (m c1^2/2)                per unit height, m through the passage
///   capacity ratio   = m / (rho1 c1 sin(alpha1) pitch)   swallowed / offered by the undisturbed
///   jet loaded flow      = nozzle flow x min(capacity ratio, 1); the rest spills past the wheel
///   F_u on all loaded blades = (F_u/m) x loaded flow;  torque = F_u x radius;  power = F_u x u
///   From the last three and the efficiencies momentum is taken off that no jet brings
///   (surplus_tangential_velocity in power_balance.h).
///   wheel efficiency = power / (nozzle flow x c_is^2/2), total to static
/// SI units. The sign of a force is that of the gas on the blade: x axial, y the way the wheel
/// turns. Errors: MixedOutError where a plane has no through-flow.
#pragma once
#include <optional>
#include <vector>

#include "post/nozzle.h"
#include "post/point_result.h"
#include "solver/flow_problem.h"
#include "solver/flow_solution.h"

namespace falcate::post {

/// What the passage works for.
struct WheelDuty {
  double blade_speed = 0.0;    ///< u, m/s
  double mean_radius = 0.0;    ///< m
  double jet_angle_deg = 0.0;  ///< alpha1, from the plane of rotation
  NozzleFlow jet;
};

PassageFigures passage_figures(const solver::FlowProblem& problem,
                               const solver::FlowSolution& solution,
                               const std::optional<WheelDuty>& duty);

/// Pressure along both sides of the blade, from the leading edge; isentropic Mach number with the
/// mixed-out inlet total pressure.
struct SurfaceDistribution {
  std::vector<SurfacePoint> suction, pressure;
};
SurfaceDistribution surface_distribution(const solver::FlowProblem& problem,
                                         const solver::FlowSolution& solution,
                                         double inlet_total_pressure);

}  // namespace falcate::post
