#include "post/error_bar.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <limits>
#include <map>

namespace falcate::post {
namespace {

constexpr double formal_order = 2.0, lowest_order = 0.5, factor = 1.25, wide_factor = 3.0,
                 refinement = 2.0;
/// Below this change, relative to the figure, meshes differ by the convergence of the solver alone.
constexpr double round_off = 1e-10;

double index_of(double change, double order, double safety_factor) {
  return safety_factor * std::abs(change) / (std::pow(refinement, order) - 1.0);
}

ErrorBar three_meshes(double coarse, double medium, double fine) {
  const double e21 = medium - fine, e32 = coarse - medium;
  const double second = (e32 - 2.0 * e21) / 6.0, first = e21 - 3.0 * second;
  const double size = std::max({std::abs(first + second), std::abs(first), std::abs(second)});
  const bool converges = std::abs(e21) < std::abs(e32);
  if (e21 * e32 < 0.0)
    return {(converges ? factor : wide_factor) * size, ErrorBarKind::oscillatory};
  if (!converges) return {wide_factor * size, ErrorBarKind::drifting};
  const double order = std::log2(e32 / e21);  // infinite where the last change is nought
  const double slow = order < 1.0 ? index_of(e21, std::max(order, lowest_order), factor) : 0.0;
  return {std::max(factor * size, slow), ErrorBarKind::converging};
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
    case ErrorBarKind::converging:
      return "converging";
    case ErrorBarKind::oscillatory:
      return "swinging from mesh to mesh";
    case ErrorBarKind::drifting:
      return "drifting apart";
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
  const ErrorBar unknown{std::numeric_limits<double>::quiet_NaN(), ErrorBarKind::unknown};
  if (values.size() < 2) return unknown;
  const std::size_t n = values.size();
  const double fine = values[n - 1], medium = values[n - 2];
  const double coarse = n > 2 ? values[n - 3] : medium;
  if (!std::isfinite(fine) || !std::isfinite(medium) || !std::isfinite(coarse)) return unknown;
  const double largest = std::max({std::abs(fine), std::abs(medium), std::abs(coarse)});
  const double change = std::max(std::abs(fine - medium), std::abs(medium - coarse));
  if (change <= round_off * largest)
    return {std::max(change, std::numeric_limits<double>::epsilon() * largest),
            ErrorBarKind::round_off};
  if (n == 2) return {index_of(change, formal_order, wide_factor), ErrorBarKind::two_meshes};
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
