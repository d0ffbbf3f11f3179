#include <algorithm>
#include <cmath>
#include <cstddef>
#include <limits>

#include "mesh/blade_shapes.h"

namespace falcate::mesh {
namespace {

/// Least value of f on [low, high] by golden section.
template <class Function>
double golden_minimum(const Function& f, double low, double high, double& best) {
  const double ratio = 0.5 * (std::sqrt(5.0) - 1.0);
  double a = high - ratio * (high - low), b = low + ratio * (high - low);
  double fa = f(a), fb = f(b);
  for (int step = 0; step < 45; ++step) {
    if (fa < fb) {
      high = b, b = a, fb = fa, a = high - ratio * (high - low), fa = f(a);
    } else {
      low = a, a = b, fa = fb, b = low + ratio * (high - low), fb = f(b);
    }
  }
  best = 0.5 * (low + high);
  return f(best);
}

/// Distance of a point from the polygon: negative inside.
double signed_distance(const Point& p, const std::vector<Point>& polygon) {
  double nearest = std::numeric_limits<double>::max();
  bool inside = false;
  for (std::size_t i = 0, j = polygon.size() - 1; i < polygon.size(); j = i++) {
    const Point &a = polygon[j], &b = polygon[i];
    const Point edge = b - a;
    const double t = std::clamp((p - a).dot(edge) / edge.squaredNorm(), 0.0, 1.0);
    nearest = std::min(nearest, (a + t * edge - p).squaredNorm());
    if ((a.y() > p.y()) != (b.y() > p.y()) &&
        p.x() < a.x() + (p.y() - a.y()) / (b.y() - a.y()) * edge.x()) {
      inside = !inside;
    }
  }
  return inside ? -std::sqrt(nearest) : std::sqrt(nearest);
}

}  // namespace

double throat_width(const BladeOutline& outline, double pitch) {
  constexpr int kSamples = 200;
  const Point shift(0.0, pitch);
  const auto polygon = outline.polygon(kSamples);
  auto upper = polygon;
  for (auto& p : upper) p += shift;
  double deepest = std::numeric_limits<double>::max();
  for (std::size_t i = 0; i < polygon.size(); ++i) {
    deepest = std::min(deepest, signed_distance(polygon[i], upper));
    deepest = std::min(deepest, signed_distance(upper[i], polygon));
  }
  if (deepest <= 0.0) return deepest;

  // They are apart: the least distance lies between the facing sides, found to round-off.
  const auto& lower_side = outline.suction();
  const auto& upper_side = outline.pressure();
  double best_s = 0.0, best_r = 0.0, least = std::numeric_limits<double>::max();
  std::vector<Point> above;
  for (int k = 0; k <= kSamples; ++k)
    above.push_back(upper_side.point(upper_side.length * k / kSamples));
  for (int i = 0; i <= kSamples; ++i) {
    const double s = lower_side.length * i / kSamples;
    const Point p = lower_side.point(s) - shift;
    for (int k = 0; k <= kSamples; ++k) {
      const double gap = (above[static_cast<std::size_t>(k)] - p).squaredNorm();
      if (gap < least) least = gap, best_s = s, best_r = upper_side.length * k / kSamples;
    }
  }
  least = std::sqrt(least);
  const double reach_s = lower_side.length / kSamples, reach_r = upper_side.length / kSamples;
  for (int pass = 0; pass < 4; ++pass) {
    const Point p = lower_side.point(best_s) - shift;
    golden_minimum([&](double r) { return (upper_side.point(r) - p).norm(); },
                   std::max(0.0, best_r - reach_r), std::min(upper_side.length, best_r + reach_r),
                   best_r);
    const Point q = upper_side.point(best_r) + shift;
    least =
        std::min(least, golden_minimum([&](double s) { return (lower_side.point(s) - q).norm(); },
                                       std::max(0.0, best_s - reach_s),
                                       std::min(lower_side.length, best_s + reach_s), best_s));
  }
  return least;
}

}  // namespace falcate::mesh
