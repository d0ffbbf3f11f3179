/// From the gas at rest through the nozzles to the free jet at exhaust pressure.
///   c_is = sqrt(2 c_p T0 (1 - (p/p0)^((g-1)/g))),  c1 = velocity coefficient x c_is,
///   T1 = T0 - c1^2/(2 c_p)  (the lost kinetic energy stays in the jet as heat),
///   mass flow = discharge coefficient x count x isentropic flow through one throat.
/// The jet is taken as expanded to the exhaust pressure before it reaches the blades. Where shocks
/// stand in or behind an overexpanded nozzle, c_is is replaced by the velocity of the jet that
/// keeps mass and momentum, V + (p_e - p) A_e/m, so that a nozzle shaped for more pressure than it
/// gets does not promise the full spouting velocity. SI units. Source: NACA Report 1135 (1953);
/// coefficients are common practice.
#pragma once
#include "post/velocity_triangle.h"
#include "solver/flow_problem.h"

namespace falcate::post {

/// Gas at rest upstream of the nozzles.
struct Supply {
  double pressure = 0.0;     ///< Pa, absolute
  double temperature = 0.0;  ///< K
};

struct Nozzle {
  double throat_diameter = 0.0;  ///< m
  double exit_diameter = 0.0;    ///< m; larger than the throat: convergent-divergent
  int count = 1;
  double angle_deg = 20.0;  ///< from the plane of rotation
  double velocity_coefficient = 0.95;
  double discharge_coefficient = 0.90;
};

enum class NozzleRegime {
  no_flow,       ///< exhaust pressure at or above supply
  subsonic,      ///< not choked
  choked,        ///< convergent: sonic at the exit, the jet expands further outside
  shock_inside,  ///< convergent-divergent: normal shock in the divergent part
  overexpanded,  ///< leaves below exhaust pressure, shocks outside
  design,        ///< leaves at exhaust pressure (within 1 %)
  underexpanded  ///< leaves above exhaust pressure, expands outside
};

/// Plain words for people, one sentence without a full stop.
const char* regime_words(NozzleRegime regime);

struct NozzleFlow {
  NozzleRegime regime = NozzleRegime::no_flow;
  bool choked = false;
  double supply_to_exhaust = 1.0;         ///< p0/p
  double design_supply_to_exhaust = 1.0;  ///< p0/p for which the nozzle is shaped
  double exit_mach = 0.0;                 ///< in the exit plane of the nozzle
  double exit_pressure = 0.0;             ///< Pa, in the exit plane
  double spouting_velocity = 0.0;         ///< c_is, m/s
  double jet_velocity = 0.0;              ///< c1, m/s
  double jet_mach = 0.0;                  ///< c1 over the speed of sound of the jet
  double jet_temperature = 0.0;           ///< T1, K
  double jet_density = 0.0;               ///< kg/m3, at exhaust pressure
  double jet_pressure = 0.0;              ///< Pa, the exhaust pressure
  /// Loss-free jet at exhaust pressure that keeps the mass and momentum leaving the nozzle, m/s:
  /// what a plain convergent nozzle can reach at most at a high pressure ratio.
  double momentum_velocity = 0.0;
  double mass_flow = 0.0;  ///< kg/s, all nozzles
};

NozzleFlow nozzle_flow(const solver::Gas& gas, const Supply& supply, const Nozzle& nozzle,
                       double exhaust_pressure);

/// The jet as the blades see it.
struct RelativeInlet {
  solver::InletCondition condition;  ///< relative p0, T0, angle, Mach number: ready for the solver
  double mach = 0.0;
  double axial_mach = 0.0;
};

/// Static state kept, velocity taken from the triangle: T0 = T1 + w^2/(2 c_p).
RelativeInlet relative_inlet(const solver::Gas& gas, const NozzleFlow& jet,
                             const VelocityTriangle& triangle);

}  // namespace falcate::post
