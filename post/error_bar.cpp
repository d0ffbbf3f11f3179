#include "post/error_bar.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <limits>
#include <map>

namespace falcate::post {
namespace {

constexpr double formal_order = 2.0, lowest_order = 0.5, highest_order = 1.1 * formal_order;
constexpr double factor = 1.25, wide_factor = 3.0, refinement = 2.0;
/// Below this change, relative to the figure, meshes differ by the convergence of the solver alone.
constexpr double round_off = 1e-10;

double index_of(double change, double order, double safety_factor) {
  return safety_factor * change / (std::pow(refinement, order) - 1.0);
}

ErrorBar three_meshes(double coarse, double medium, double fine) {
  const double e21 = std::abs(medium - fine), e32 = std::abs(coarse - medium);
  if ((coarse - medium) * (medium - fine) < 0.0)
    return {index_of(std::max(e21, e32), formal_order, wide_factor), formal_order,
            ErrorBarKind::oscillatory};
  const double order = std::log2(e32 / e21);  // infinite where the last change is nought
  if (order < lowest_order)
    return {std::max(index_of(e21, formal_order, wide_factor), index_of(e21, lowest_order, factor)),
            lowest_order, ErrorBarKind::out_of_range};
  if (order > highest_order) {
    // Two values that happen to meet say little: the coarser change at formal order is the floor.
    const double change = std::max(e21, e32 / std::pow(refinement, formal_order));
    return {index_of(change, formal_order, wide_factor), formal_order, ErrorBarKind::out_of_range};
  }
  const double used = std::min(order, formal_order);
  return {index_of(e21, used, factor), used, ErrorBarKind::observed_order};
}

}  // namespace

GridConvergence grid_convergence(double fine, double medium, double coarse, double ratio_21,
                                 double ratio_32) {
  assert(ratio_21 > 1.0 && ratio_32 > 1.0);
  const double e21 = medium - fine, e32 = coarse - medium;
  assert(e21 != 0.0 && e32 != 0.0);
  const double sign = e32 / e21 > 0.0 ? 1.0 : -1.0;
  const double magnitude = std::log(std::abs(e32 / e21));
  double order = std::abs(magnitude) / std::log(ratio_21);
  for (int i = 0; i < 200; ++i) {
    const double q =
        std::log((std::pow(ratio_21, order) - sign) / (std::pow(ratio_32, order) - sign));
    const double next = std::abs(magnitude + q) / std::log(ratio_21);
    const bool settled = std::abs(next - order) < 1e-13 * (1.0 + order);
    order = next;
    if (settled) break;
  }
  const double growth = std::pow(ratio_21, order) - 1.0;
  GridConvergence result;
  result.observed_order = order;
  result.extrapolated = fine - e21 / growth;
  result.relative_error = std::abs(e21 / fine);
  result.extrapolated_relative_error = std::abs((result.extrapolated - fine) / result.extrapolated);
  result.index = factor * result.relative_error / growth;
  result.oscillatory = sign < 0.0;
  return result;
}

const char* error_bar_words(ErrorBarKind kind) {
  switch (kind) {
    case ErrorBarKind::observed_order:
      return "observed order";
    case ErrorBarKind::out_of_range:
      return "observed order out of range";
    case ErrorBarKind::oscillatory:
      return "swinging from mesh to mesh";
    case ErrorBarKind::two_meshes:
      return "two meshes only";
    case ErrorBarKind::round_off:
      return "differing by round-off alone";
    case ErrorBarKind::unknown:
      return "one mesh only";
  }
  return "";
}

ErrorBar error_bar(const std::vector<double>& values) {
  const ErrorBar unknown{std::numeric_limits<double>::quiet_NaN(), 0.0, ErrorBarKind::unknown};
  if (values.size() < 2) return unknown;
  const std::size_t n = values.size();
  const double fine = values[n - 1], medium = values[n - 2];
  const double coarse = n > 2 ? values[n - 3] : medium;
  if (!std::isfinite(fine) || !std::isfinite(medium) || !std::isfinite(coarse)) return unknown;
  const double largest = std::max({std::abs(fine), std::abs(medium), std::abs(coarse)});
  const double change = std::max(std::abs(fine - medium), std::abs(medium - coarse));
  if (change <= round_off * largest)
    return {std::max(change, std::numeric_limits<double>::epsilon() * largest), formal_order,
            ErrorBarKind::round_off};
  if (n == 2)
    return {index_of(change, formal_order, wide_factor), formal_order, ErrorBarKind::two_meshes};
  return three_meshes(coarse, medium, fine);
}

NumericalError error_bars(const std::vector<PassageFigures>& levels) {
  NumericalError bars;
  std::map<ErrorBarKind, int> counts;
  for (const FigureRow& row : figure_rows()) {
    std::vector<double> values;
    for (const PassageFigures& level : levels) values.push_back(figure_value(row, level));
    const ErrorBar bar = error_bar(values);
    figure_value(row, bars) = bar.half_width;
    if (std::any_of(values.begin(), values.end(), [](double v) { return v != 0.0; }))
      ++counts[bar.kind];
  }
  for (const auto& [kind, count] : counts)
    bars.basis +=
        fmt::format("{}{} {}", bars.basis.empty() ? "" : ", ", count, error_bar_words(kind));
  return bars;
}

}  // namespace falcate::post
