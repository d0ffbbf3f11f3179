#include "mesh/spline_curve.h"

#include <algorithm>
#include <array>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <memory>

namespace falcate::mesh {
namespace {

/// Five-point Gauss-Legendre rule on -1..1 (Abramowitz & Stegun, table 25.4).
constexpr std::array<double, 5> kNodes{-0.906179845938664, -0.538469310105683, 0.0,
                                       0.538469310105683, 0.906179845938664};
constexpr std::array<double, 5> kWeights{0.236926885056189, 0.478628670499366, 0.568888888888889,
                                         0.478628670499366, 0.236926885056189};

/// Points added on both sides of the seam of a closed curve before it is fitted as an open one:
/// what happens at an end dies out at least by half from knot to knot.
constexpr int kWrap = 50;

/// Solves the three-diagonal system in place (Thomas algorithm).
void solve_tridiagonal(std::vector<double>& low, std::vector<double>& mid, std::vector<double>& up,
                       std::vector<Point>& right) {
  const std::size_t n = mid.size();
  for (std::size_t i = 1; i < n; ++i) {
    const double factor = low[i] / mid[i - 1];
    mid[i] -= factor * up[i - 1];
    right[i] -= factor * right[i - 1];
  }
  right[n - 1] /= mid[n - 1];
  for (std::size_t i = n - 1; i-- > 0;) right[i] = (right[i] - up[i] * right[i + 1]) / mid[i];
}

/// Second derivatives at the knots of the not-a-knot spline.
std::vector<Point> second_derivatives(const std::vector<double>& knots,
                                      const std::vector<Point>& points) {
  const std::size_t n = points.size();
  std::vector<Point> second(n, Point(0.0, 0.0));
  if (n < 3) return second;
  const auto h = [&](std::size_t i) { return knots[i + 1] - knots[i]; };
  const auto slope = [&](std::size_t i) { return Point((points[i + 1] - points[i]) / h(i)); };
  if (n == 3) {
    second.assign(3, Point(2.0 * (slope(1) - slope(0)) / (h(0) + h(1))));
    return second;
  }
  const std::size_t m = n - 2;  // unknowns: the inner knots
  std::vector<double> low(m), mid(m), up(m);
  std::vector<Point> right(m);
  for (std::size_t i = 0; i < m; ++i) {
    low[i] = h(i);
    mid[i] = 2.0 * (h(i) + h(i + 1));
    up[i] = h(i + 1);
    right[i] = 6.0 * (slope(i + 1) - slope(i));
  }
  // The third derivative is the same on both sides of the first and of the last inner knot.
  const double a = h(0), b = h(1), c = h(n - 3), d = h(n - 2);
  mid[0] += a * (a + b) / b;
  up[0] -= a * a / b;
  mid[m - 1] += d * (c + d) / c;
  low[m - 1] -= d * d / c;
  solve_tridiagonal(low, mid, up, right);
  std::copy(right.begin(), right.end(), second.begin() + 1);
  second[0] = ((a + b) * second[1] - a * second[2]) / b;
  second[n - 1] = ((c + d) * second[n - 2] - d * second[n - 3]) / c;
  return second;
}

std::vector<Point> wrapped(const std::vector<Point>& points) {
  const auto n = static_cast<int>(points.size());
  std::vector<Point> result;
  for (int i = -kWrap; i <= n + kWrap; ++i) {
    result.push_back(points[static_cast<std::size_t>(((i % n) + n) % n)]);
  }
  return result;
}

}  // namespace

SplineCurve::SplineCurve(std::vector<Point> points, bool closed) {
  const std::size_t n = points.size();
  assert(n >= (closed ? 3u : 2u));
  points_ = closed ? wrapped(points) : std::move(points);
  lengths_.assign(points_.size(), 0.0);
  for (std::size_t i = 1; i < points_.size(); ++i) {
    lengths_[i] = lengths_[i - 1] + (points_[i] - points_[i - 1]).norm();
  }
  for (int pass = 0; pass < 3; ++pass) {
    fit();
    measure();
  }
  if (!closed) return;
  const auto cut = [&](auto& list) {
    list = std::remove_reference_t<decltype(list)>(list.begin() + kWrap,
                                                   list.begin() + kWrap + static_cast<long>(n) + 1);
  };
  cut(points_), cut(second_), cut(knots_);
  lengths_.assign(n + 1, 0.0);
  measure();
}

void SplineCurve::fit() {
  knots_ = lengths_;
  second_ = second_derivatives(knots_, points_);
}

void SplineCurve::measure() {
  for (std::size_t i = 0; i + 1 < points_.size(); ++i) {
    lengths_[i + 1] = lengths_[i] + arc(knots_[i], knots_[i + 1]);
  }
}

double SplineCurve::arc(double from, double to) const {
  double sum = 0.0;
  for (std::size_t k = 0; k < kNodes.size(); ++k) {
    sum += kWeights[k] * value(0.5 * (from + to) + 0.5 * (to - from) * kNodes[k], 1).norm();
  }
  return 0.5 * (to - from) * sum;
}

Point SplineCurve::value(double u, int derivative) const {
  const auto found = std::upper_bound(knots_.begin() + 1, knots_.end() - 1, u);
  const auto i = static_cast<std::size_t>(found - knots_.begin()) - 1;
  const double h = knots_[i + 1] - knots_[i];
  const double a = (knots_[i + 1] - u) / h, b = (u - knots_[i]) / h;
  const double third = h * h / 6.0;
  switch (derivative) {
    case 0:
      return a * points_[i] + b * points_[i + 1] +
             third * ((a * a * a - a) * second_[i] + (b * b * b - b) * second_[i + 1]);
    case 1:
      return (points_[i + 1] - points_[i]) / h +
             h / 6.0 * ((3.0 * b * b - 1.0) * second_[i + 1] - (3.0 * a * a - 1.0) * second_[i]);
    default:
      return a * second_[i] + b * second_[i + 1];
  }
}

/// The knot parameter is nearly the arc length already; Newton steps take out the rest.
double SplineCurve::parameter(double s) const {
  s = std::clamp(s, 0.0, length());
  const auto found = std::upper_bound(lengths_.begin() + 1, lengths_.end() - 1, s);
  const auto i = static_cast<std::size_t>(found - lengths_.begin()) - 1;
  const double share = (s - lengths_[i]) / (lengths_[i + 1] - lengths_[i]);
  double u = knots_[i] + share * (knots_[i + 1] - knots_[i]);
  if (share <= 0.0 || share >= 1.0) return u;
  for (int step = 0; step < 8; ++step) {
    const double miss = s - lengths_[i] - arc(knots_[i], u);
    u = std::clamp(u + miss / value(u, 1).norm(), knots_[i], knots_[i + 1]);
    if (std::abs(miss) <= 1e-14 * length()) break;
  }
  return u;
}

double SplineCurve::curvature(double s) const {
  const double u = parameter(s);
  const Point first = value(u, 1), second = value(u, 2);
  return std::abs(first.x() * second.y() - first.y() * second.x()) / std::pow(first.norm(), 3);
}

CurvePiece spline_piece(const SplineCurve& curve, double from, double to) {
  const auto shared = std::make_shared<SplineCurve>(curve);
  const double direction = to < from ? -1.0 : 1.0, length = std::abs(to - from);
  return {length, [=](double s) { return shared->point(s >= length ? to : from + direction * s); },
          [=](double s) { return shared->curvature(from + direction * s); }};
}

}  // namespace falcate::mesh
