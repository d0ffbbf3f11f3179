#include "mesh/passage_boundary.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace falcate::mesh {
namespace {

constexpr double kDegree = std::numbers::pi / 180.0;
constexpr double kRelaxation = 0.2;  // widths over which the periodic lines turn axial

Point direction(double angle) { return {std::sin(angle), std::cos(angle)}; }

/// Parameter near `nose` where the outline faces along its edge: tangent at right angles to
/// `along`. On a flat edge the middle of the flat.
double facing(const ClosedOutline& outline, double nose, const Point& along, double sign) {
  const double reach = 0.1 * outline.length();
  const auto& kinks = outline.kinks();
  const bool sharp = std::any_of(kinks.begin(), kinks.end(), [&](double k) {
    const double gap = std::fmod(std::abs(k - nose), outline.length());
    return std::min(gap, outline.length() - gap) < 1e-6 * outline.length();
  });
  if (sharp || outline.curvature(nose) <= 0.0) return nose;
  const auto f = [&](double u) { return sign * outline.tangent(u).dot(along); };
  if (!(f(nose - reach) < 0.0 && f(nose + reach) > 0.0)) return nose;
  // Walk off the nose to the first change of sign, then bisect for either end of a flat.
  const double step = (f(nose) > 0.0 ? -1.0 : 1.0) * reach / 400.0;
  double u = nose;
  while (f(u) * step < 0.0) u += step;
  const auto crossing = [&](double level) {
    double low = std::min(u, u - step) - reach / 20.0, high = std::max(u, u - step) + reach / 20.0;
    for (int pass = 0; pass < 50; ++pass) {
      const double middle = 0.5 * (low + high);
      (f(middle) < level ? low : high) = middle;
    }
    return 0.5 * (low + high);
  };
  return 0.5 * (crossing(-1e-4) + crossing(1e-4));
}

/// y of a periodic line at distance d along x from where it leaves, less its y there.
double line_rise(double slope, double scale, double d) {
  return slope * scale * (1.0 - std::exp(-d / scale));
}

double leaving_slope(double angle) {
  return 1.0 / std::tan(std::clamp(angle, 20.0 * kDegree, 160.0 * kDegree));
}

/// Wall from `from` to `to`, cut at kinks.
void add_wall(const ClosedOutline& outline, PatchKind kind, double from, double to, double lift,
              std::vector<BoundaryCurve>& curves) {
  std::vector<double> cuts{from, to};
  for (double kink : outline.kinks()) {
    for (double u : {kink, kink + outline.length()}) {
      if (u > from + 1e-9 * outline.length() && u < to - 1e-9 * outline.length()) cuts.push_back(u);
    }
  }
  std::sort(cuts.begin(), cuts.end());
  for (std::size_t k = 0; k + 1 < cuts.size(); ++k) {
    curves.push_back(
        {kind, [&outline, lift](double u) { return Point(outline.point(u) + Point(0.0, lift)); },
         cuts[k], cuts[k + 1]});
  }
}

}  // namespace

ClosedOutline::ClosedOutline(const BladeOutline& outline)
    : suction_(outline.suction()),
      pressure_(outline.pressure()),
      length_(suction_.length + pressure_.length) {
  std::vector<double> joints{0.0, suction_.length};
  joints.insert(joints.end(), suction_.corners.begin(), suction_.corners.end());
  for (double s : pressure_.corners) joints.push_back(length_ - s);
  std::sort(joints.begin(), joints.end());
  const double h = 1e-6 * length_;
  for (double u : joints) {
    const Point before = point(u) - point(u - h), after = point(u + h) - point(u);
    if (before.normalized().dot(after.normalized()) < std::cos(15.0 * kDegree)) kinks_.push_back(u);
  }
}

Point ClosedOutline::point(double u) const {
  u -= length_ * std::floor(u / length_);
  return u <= suction_.length ? suction_.point(u) : pressure_.point(std::max(0.0, length_ - u));
}

double ClosedOutline::curvature(double u) const {
  u -= length_ * std::floor(u / length_);
  return u <= suction_.length ? suction_.curvature(u)
                              : pressure_.curvature(std::max(0.0, length_ - u));
}

Point ClosedOutline::tangent(double u) const {
  const double h = 1e-6 * length_;
  return (point(u + h) - point(u - h)).normalized();
}

PassageBoundary passage_boundary(const ClosedOutline& outline, double pitch, double width,
                                 double inlet_angle, double exit_angle, double upstream,
                                 double downstream) {
  const double lead = facing(outline, 0.0, direction(inlet_angle), 1.0);
  const double trail = facing(outline, outline.suction_length(), direction(exit_angle), -1.0);
  const Point first = outline.point(lead), last = outline.point(trail);
  const double scale = kRelaxation * width;
  const double slope_in = leaving_slope(inlet_angle), slope_out = leaving_slope(exit_angle);
  PassageBoundary result;
  result.inlet_x = -upstream * width;
  result.outlet_x = (1.0 + downstream) * width;
  const double reach_in = first.x() - result.inlet_x, reach_out = result.outlet_x - last.x();
  const auto line_in = [=](double d, double lift) {
    return Point(first.x() - d, first.y() - line_rise(slope_in, scale, d) + lift);
  };
  const auto line_out = [=](double d, double lift) {
    return Point(last.x() + d, last.y() + line_rise(slope_out, scale, d) + lift);
  };
  auto& curves = result.curves;
  add_wall(outline, PatchKind::suction_wall, lead, trail, 0.0, curves);
  result.lower_downstream = curves.size();
  curves.push_back({std::nullopt, [=](double d) { return line_out(d, 0.0); }, 0.0, reach_out});
  const double bottom = line_out(reach_out, 0.0).y(), left = line_in(reach_in, 0.0).y();
  curves.push_back({PatchKind::outlet,
                    [=, x = result.outlet_x](double y) { return Point(x, bottom + y); }, 0.0,
                    pitch});
  result.upper_downstream = curves.size();
  curves.push_back({std::nullopt, [=](double d) { return line_out(d, pitch); }, reach_out, 0.0});
  add_wall(outline, PatchKind::pressure_wall, trail, lead + outline.length(), pitch, curves);
  result.upper_upstream = curves.size();
  curves.push_back({std::nullopt, [=](double d) { return line_in(d, pitch); }, 0.0, reach_in});
  curves.push_back({PatchKind::inlet,
                    [=, x = result.inlet_x](double y) { return Point(x, left + y); }, pitch, 0.0});
  result.lower_upstream = curves.size();
  curves.push_back({std::nullopt, [=](double d) { return line_in(d, 0.0); }, reach_in, 0.0});
  return result;
}

}  // namespace falcate::mesh
