/// Where the power of the supply goes: shaft power and losses of the ideal-gas solution, W.
///   supply  = m_n c_is^2/2                                     m_n flow of all nozzles
///   nozzle  = m_n (c_is^2 - c1^2)/2
///   spill   = (m_n - m) c1^2/2                                 m = m_n min(capacity ratio, 1)
///   entry   = m (c1^2/2 - (w_s^2/2 + u w_1y + u^2/2))
///   blade   = m (w_s^2 - w_2a^2)/2
///   leaving = m (c_2^2 + w_2a^2 - w_2^2)/2                     c_2 absolute exit velocity
/// w_s: isentropic from the relative total state at the inlet to the exhaust (jet) pressure; w_2a:
/// isentropic from the exit state to it, which differs from w_2 at limit load alone; 1, 2 mixed out
/// at inlet and exit; all velocities relative but c. Supply = shaft power + losses by Euler's
/// equation, shaft power = m u (w_1y - w_2y), which a steady solution meets to its convergence;
/// w_1y less surplus_tangential_velocity. Entry is what lies between jet and mixed-out inlet
/// stream: total pressure lost in waves and shocks ahead of the row, and tangential velocity, which
/// passes between the gas that enters and the gas that spills (entry is negative where that pushes
/// the gas that enters). Source: energy equation; Denton, J. Turbomachinery 115 (1993) 621. Ideal
/// gas, no friction.
#pragma once
#include "post/passage_figures.h"

namespace falcate::post {

/// Tangential velocity of the mixed-out inlet stream beyond that of the jet, m/s, where the passage
/// would swallow more than the jet offers; nought elsewhere. The jet then narrows ahead of the
/// blades and meets nothing that could push it along: momentum that the nozzles' flow does not
/// have.
double surplus_tangential_velocity(const PassageFigures& figures, const WheelDuty& duty);

/// Fills in the supply power and the losses from the streams and the capacity ratio.
void set_power_balance(PassageFigures& figures, const solver::Gas& gas, const WheelDuty& duty);

}  // namespace falcate::post
