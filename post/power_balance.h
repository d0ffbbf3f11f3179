/// Where the power of the supply goes: shaft power and losses of the ideal-gas solution, W.
///   supply  = m_n c_is^2/2                                     m_n flow of all nozzles
///   nozzle  = m_n (c_is^2 - c1^2)/2
///   spill   = (m_n - m) c1^2/2                                 m = m_n min(capacity ratio, 1)
///   entry   = m (c1^2/2 - (w_2s^2/2 + u w_1y + u^2/2))
///   blade   = m (w_2s^2 - w_2^2)/2
///   leaving = m c_2^2/2                                        c_2 absolute exit velocity
/// w_2s: isentropic from the relative total state at the inlet to the exit pressure; 1, 2 mixed out
/// at inlet and exit; all velocities relative but c. Supply = shaft power + losses by Euler's
/// equation, shaft power = m u (w_1y - w_2y), which a steady solution meets to its convergence.
/// Entry is what lies between jet and mixed-out inlet stream: a shock ahead of the row, or a stream
/// that enters faster or slower than the jet comes; negative where the row draws it in faster.
/// Source: energy equation; Denton, J. Turbomachinery 115 (1993) 621. Ideal gas, no friction.
#pragma once
#include "post/passage_figures.h"

namespace falcate::post {

/// Fills in the supply power and the losses from the streams and the capacity ratio.
void set_power_balance(PassageFigures& figures, const solver::Gas& gas, const WheelDuty& duty);

}  // namespace falcate::post
