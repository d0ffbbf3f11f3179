/// Error bars from nested meshes: the grid convergence index with observed order.
///   p = |ln|e32/e21| + q| / ln r21,  GCI = Fs |e21| / (r21^p - 1),  Fs = 1.25
/// e21 = phi2 - phi1, e32 = phi3 - phi2; 1 is the finest mesh. Where the observed order leaves
/// [0.5, 1.1 x formal order] or the values oscillate or drift apart, Fs = 3 with the formal order,
/// and never less than what order 0.5 would give for values that drift apart.
/// Sources: Celik et al., J. Fluids Engineering 130 (2008) 078001; ASME V&V 20-2009; Roache,
/// J. Fluids Engineering 133 (2011) 115501 (Fs = 3 with the formal order outside the range).
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
  observed_order,  ///< the observed order is sound
  out_of_range,    ///< order outside its range, or drifting apart: safety factor 3
  oscillatory,     ///< the sign of the change alternates: safety factor 3
  two_meshes,      ///< only two values: safety factor 3, formal order
  round_off,       ///< the meshes differ by round-off alone
  unknown          ///< one value: the half-width is not a number
};
const char* error_bar_words(ErrorBarKind kind);  ///< a few plain words

struct ErrorBar {
  double half_width = 0.0;  ///< same unit as the figure
  double order = 0.0;       ///< the one used
  ErrorBarKind kind = ErrorBarKind::unknown;
};

/// Values on nested meshes, coarse first, each cell of one split in four on the next (r = 2).
ErrorBar error_bar(const std::vector<double>& values);

/// Half-widths figure by figure (see figure_rows()), coarse first; figures outside the table are 0.
/// The basis counts the kinds over the figures, those that are nought on every mesh left out.
NumericalError error_bars(const std::vector<PassageFigures>& levels);

}  // namespace falcate::post
