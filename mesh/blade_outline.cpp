#include "mesh/blade_outline.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <utility>

namespace falcate::mesh {
namespace {

/// Arc lengths of `count` points, denser where curvature is high: steps go with the turn of the
/// tangent as well as with the length, in equal weight.
std::vector<double> dense_where_curved(const BladeSide& side, int count) {
  std::vector<double> marks{0.0};
  marks.insert(marks.end(), side.corners.begin(), side.corners.end());
  marks.push_back(side.length);
  std::vector<double> at, weight;
  for (std::size_t k = 0; k + 1 < marks.size(); ++k) {
    constexpr int kSamples = 64;
    for (int i = k == 0 ? 0 : 1; i <= kSamples; ++i) {
      const double s = marks[k] + (marks[k + 1] - marks[k]) * i / kSamples;
      const double step = at.empty() ? 0.0 : s - at.back();
      const double middle = at.empty() ? s : 0.5 * (s + at.back());
      const double density = 1.0 / side.length + side.curvature(middle) / 3.0;
      weight.push_back(at.empty() ? 0.0 : weight.back() + step * density);
      at.push_back(s);
    }
  }
  std::vector<double> result;
  std::size_t k = 0;
  for (int i = 0; i < count; ++i) {
    const double target = weight.back() * i / (count - 1);
    while (k + 2 < weight.size() && weight[k + 1] < target) ++k;
    const double share = (target - weight[k]) / (weight[k + 1] - weight[k]);
    result.push_back(std::clamp(at[k] + share * (at[k + 1] - at[k]), 0.0, side.length));
  }
  // A corner pulls its nearest point onto itself, so that drawings show it.
  for (double corner : side.corners) {
    const auto nearest = std::min_element(
        result.begin() + 1, result.end() - 1,
        [&](double a, double b) { return std::abs(a - corner) < std::abs(b - corner); });
    *nearest = corner;
  }
  return result;
}

}  // namespace

BladeOutline::BladeOutline(BladeSide suction, BladeSide pressure)
    : suction_(std::move(suction)), pressure_(std::move(pressure)) {
  double least = 0.0, greatest = 0.0;
  for (const BladeSide* side : {&suction_, &pressure_}) {
    auto marks = side->corners;
    marks.insert(marks.end(), {0.0, side->length});
    for (double s : marks) {
      least = std::min(least, side->point(s).x());
      greatest = std::max(greatest, side->point(s).x());
    }
  }
  width_ = greatest - least;
  assert((suction_.point(0.0) - pressure_.point(0.0)).norm() <= 1e-9 * width_);
  assert((suction_.point(suction_.length) - pressure_.point(pressure_.length)).norm() <=
         1e-9 * width_);
}

std::vector<Point> BladeOutline::polygon(int per_side) const {
  assert(per_side >= 3);
  std::vector<Point> result;
  const auto lower = dense_where_curved(pressure_, per_side);
  const auto upper = dense_where_curved(suction_, per_side);
  for (std::size_t i = 0; i + 1 < lower.size(); ++i) result.push_back(pressure_.point(lower[i]));
  for (std::size_t i = upper.size(); i-- > 1;) result.push_back(suction_.point(upper[i]));
  return result;
}

}  // namespace falcate::mesh
