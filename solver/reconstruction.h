/// Face values from cell values and gradients, with a smooth limiter that leaves smooth flow alone.
///
/// Along the line from cell L to cell R with d1 = q_R - q_L and d2 = 2 grad_L.(x_R - x_L) - d1 (the
/// difference behind L on an even mesh):
///   q_face = q_L + f(d1, d2) / 2 + grad_L.(x_face - (x_L + x_R)/2)
///   f = ((2 d1^2 + e) d2 + (d2^2 + 2 e) d1) / (2 d1^2 - d1 d2 + 2 d2^2 + 3 e)
/// f(d, d) = d, so linear fields are exact; for d1^2, d2^2 << e it is (2 d1 + d2)/3, third order on
/// an even mesh. e = (K h / L)^3 scale^2 switches the limiter off where changes are those of smooth
/// flow, which lets the residual go to zero.
/// Sources: van Albada, van Leer & Roberts, Astron. Astrophys. 108 (1982) 76-84 (the idea);
/// Venkatakrishnan, J. Comput. Phys. 118 (1995) 120-130 (the threshold); Koren's kappa = 1/3 form.
#pragma once
#include "solver/dual.h"

namespace falcate::solver {

template <class T>
T limited_difference(const T& d1, const T& d2, double e) {
  return ((2.0 * d1 * d1 + e) * d2 + (d2 * d2 + 2.0 * e) * d1) /
         (2.0 * d1 * d1 - d1 * d2 + 2.0 * d2 * d2 + 3.0 * e);
}

/// q + step, except that a fall of more than half of q levels off and never reaches zero:
/// density and pressure stay positive, with a continuous derivative. It dies away as 1/step, so
/// that no step is so large that the value vanishes in round-off.
template <class T>
T positive_step(const T& q, const T& step) {
  if (value_of(step) >= -0.5 * value_of(q)) return q + step;
  return -0.25 * q * q / step;
}

}  // namespace falcate::solver
