/// Error bars from three nested meshes, for a scheme whose order is mixed: two where the flow is
/// smooth, one at shocks and at kinks of the wall. phi = exact + g1 h + g2 h^2 with h = 1, 2, 4,
///   e21 = phi2 - phi1,  e32 = phi3 - phi2   (1 is the finest mesh)
///   g2 = (e32 - 2 e21)/6,  g1 = e21 - 3 g2,  half-width = Fs max(|g1 + g2|, |g1|, |g2|)
/// so that terms of opposite sign, whose sum may vanish by chance, still count. Fs = 1.25, 3 where
/// the last change is not smaller than the one before it, so that the meshes do not converge. A
/// pure second-order error gives the grid convergence index of order 2, a pure first-order one that
/// of order 1. Where figures converge more slowly than at order 1, which the terms do not cover,
/// the index of the observed order p = log2(e32/e21), at least one half, is the least half-width:
/// Fs |e21| / (2^p - 1). Two meshes: Fs = 3 with the formal order 2.
/// Sources: Roy, AIAA J. 41(4) (2003) 595-604 (mixed order); Roache, J. Fluids Engineering 116
/// (1994) 405-413 (grid convergence index, Fs); Celik et al., J. Fluids Engineering 130 (2008)
/// 078001 and ASME V&V 20-2009 (`grid_convergence`).
#pragma once
#include <vector>

#include "post/point_result.h"

namespace falcate::post {

/// Outcome of the three-mesh procedure itself, no limits applied.
struct GridConvergence {
  double observed_order = 0.0;
  double extrapolated = 0.0;
  double relative_error = 0.0;               ///< |phi1 - phi2| / |phi1|
  double extrapolated_relative_error = 0.0;  ///< |ext - phi1| / |ext|
  double index = 0.0;                        ///< GCI of the finest mesh, relative, Fs 1.25
  bool oscillatory = false;
};
GridConvergence grid_convergence(double fine, double medium, double coarse, double ratio_21,
                                 double ratio_32);

enum class ErrorBarKind {
  converging,   ///< each change smaller than the one before, of the same sign
  oscillatory,  ///< the sign of the change alternates
  drifting,     ///< of the same sign, the last change the larger: safety factor 3
  two_meshes,   ///< only two values: safety factor 3, formal order
  round_off,    ///< the meshes differ by round-off alone
  unknown       ///< one value: the half-width is not a number
};
const char* error_bar_words(ErrorBarKind kind);  ///< a few plain words

struct ErrorBar {
  double half_width = 0.0;  ///< same unit as the figure
  ErrorBarKind kind = ErrorBarKind::unknown;
};

/// Values on nested meshes, coarse first, each cell of one split in four on the next (r = 2).
ErrorBar error_bar(const std::vector<double>& values);

/// Half-widths figure by figure (see figure_rows()), coarse first; figures outside the table are 0.
/// The basis counts the kinds over the figures, those that are nought on every mesh left out.
NumericalError error_bars(const std::vector<PassageFigures>& levels);

}  // namespace falcate::post
