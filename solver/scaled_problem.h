/// The problem in the solver's own units: density and pressure at rest at the inlet are 1, speeds
/// in sqrt(p0/rho0); lengths stay in metres. Everything a residual needs that does not change with
/// T.
#pragma once
#include <span>
#include <vector>

#include "solver/flow_problem.h"
#include "solver/inlet.h"
#include "solver/outlet.h"
#include "solver/state.h"

namespace falcate::solver {

/// SI value of one solver unit.
struct Units {
  double density = 1.0, velocity = 1.0, pressure = 1.0;
  State<double> scaled(const Primitive& q) const {
    return {q.density / density, q.u / velocity, q.v / velocity, q.pressure / pressure};
  }
  Primitive physical(const State<double>& q) const {
    return {q[0] * density, q[1] * velocity, q[2] * velocity, q[3] * pressure};
  }
  BoundaryFlux physical_flux(const State<double>& f) const {
    return {f[0] * density * velocity, f[1] * pressure, f[2] * pressure,
            f[3] * pressure * velocity};
  }
};

/// An in- or outflow plane: its faces are first_face, first_face + 1, ...
struct Plane {
  int first_face = 0;
  PlaneWaves waves;
};

struct ScaledProblem {
  const mesh::PassageMesh* mesh = nullptr;
  double gamma = 1.4;
  Units units;
  InletStream inlet;
  OutletStream outlet;
  std::vector<Plane> inlet_planes, outlet_planes;
  std::vector<State<double>> prescribed;  ///< one a boundary face, used on prescribed patches
  double reference_speed = 1.0;           ///< of the isentropic flow at the exit pressure
  double reference_length = 1.0;          ///< m: pitch, or the square root of the area
};

/// Throws std::invalid_argument when the problem is not one (programmer's error).
ScaledProblem scale(const FlowProblem& problem);

/// Takes the mean states on the planes, about which waves are told apart, from the flow itself:
/// a share of the way from those before, so that they follow an unsteady flow slowly.
void refresh_planes(ScaledProblem& problem, std::span<const State<double>> cells,
                    double share = 1.0);

/// A first guess of the flow: isentropic, turned by the blades' mean direction.
std::vector<State<double>> cold_start(const FlowProblem& problem, const ScaledProblem& scaled);

}  // namespace falcate::solver
