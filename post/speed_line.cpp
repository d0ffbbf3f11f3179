#include "post/speed_line.h"

#include <algorithm>
#include <cmath>
#include <cstddef>

namespace falcate::post {
namespace {

using Series = std::vector<double>;

/// Value at x of the polynomial through the first two or three of the given places (Lagrange).
double through(const Series& places, const Series& values, double x) {
  double sum = 0.0;
  for (std::size_t i = 0; i < places.size(); ++i) {
    double term = values[i];
    for (std::size_t j = 0; j < places.size(); ++j)
      if (j != i) term *= (x - places[j]) / (places[i] - places[j]);
    sum += term;
  }
  return sum;
}

Series slice(const Series& values, std::size_t first, std::size_t count) {
  const auto begin = values.begin() + static_cast<std::ptrdiff_t>(first);
  return {begin, begin + static_cast<std::ptrdiff_t>(count)};
}

struct Peak {
  double speed, value;
  bool at_end;
};

/// Top of the parabola through the best point and its neighbours. A wheel at rest does no work, so
/// the origin is a point of every line.
std::optional<Peak> peak(Series speed, Series value) {
  if (speed.empty()) return std::nullopt;
  if (speed.front() > 0.0) {
    speed.insert(speed.begin(), 0.0);
    value.insert(value.begin(), 0.0);
  }
  const auto best =
      static_cast<std::size_t>(std::max_element(value.begin(), value.end()) - value.begin());
  if (!(value[best] > 0.0)) return std::nullopt;
  if (best + 1 == speed.size()) return Peak{speed[best], value[best], true};
  const double h1 = speed[best] - speed[best - 1], h2 = speed[best + 1] - speed[best];
  const double s1 = (value[best] - value[best - 1]) / h1, s2 = (value[best + 1] - value[best]) / h2;
  const double curvature = (s2 - s1) / (h1 + h2);  // half the second derivative
  if (!(curvature < 0.0)) return Peak{speed[best], value[best], false};
  const double slope = (s1 * h2 + s2 * h1) / (h1 + h2);
  const double shift = std::clamp(-0.5 * slope / curvature, -h1, h2);
  return Peak{speed[best] + shift, value[best] + shift * (slope + curvature * shift), false};
}

void set_stall(SpeedLine& line) {
  const std::size_t n = line.speed_rpm.size();
  if (n == 0) return;
  line.stall_extrapolated = line.speed_rpm.front() != 0.0;
  if (!line.stall_extrapolated) line.stall_torque_n_m = line.torque_n_m.front();
  if (!line.stall_extrapolated || n < 2) return;
  // A parabola reaches back safely over no more than its own length; a line over twice that.
  const std::size_t used =
      n > 2 && line.speed_rpm[0] <= line.speed_rpm[2] - line.speed_rpm[0] ? 3 : 2;
  if (line.speed_rpm[0] > 2.0 * (line.speed_rpm[used - 1] - line.speed_rpm[0])) return;
  line.stall_torque_n_m =
      through(slice(line.speed_rpm, 0, used), slice(line.torque_n_m, 0, used), 0.0);
}

void set_runaway(SpeedLine& line) {
  const Series &speed = line.speed_rpm, &torque = line.torque_n_m;
  const std::size_t n = speed.size();
  for (std::size_t i = 1; i < n; ++i) {
    if (!(torque[i - 1] > 0.0 && torque[i] <= 0.0)) continue;
    line.runaway_extrapolated = false;
    line.runaway_speed_rpm =
        speed[i - 1] + (speed[i] - speed[i - 1]) * torque[i - 1] / (torque[i - 1] - torque[i]);
    return;
  }
  if (n < 2 || !(torque[n - 1] > 0.0)) return;
  // The flatter of the last slope and that of the whole line: it gives the higher, hence the safer,
  // runaway speed.
  const double last = (torque[n - 1] - torque[n - 2]) / (speed[n - 1] - speed[n - 2]);
  const double whole = (torque[n - 1] - torque[0]) / (speed[n - 1] - speed[0]);
  const double slope = std::max(last, whole);
  if (!(slope < 0.0)) return;
  const double runaway = speed[n - 1] - torque[n - 1] / slope;
  constexpr double reach = 4.0;  // times the highest speed: beyond it the answer would be a guess
  if (runaway <= reach * speed[n - 1]) line.runaway_speed_rpm = runaway;
}

}  // namespace

SpeedLine make_speed_line(const std::vector<PointResult>& points) {
  std::vector<const PointResult*> stand;
  for (const PointResult& point : points)
    if (point.wheel && point.failure.empty()) stand.push_back(&point);
  std::stable_sort(stand.begin(), stand.end(),
                   [](const auto* a, const auto* b) { return a->speed_rpm < b->speed_rpm; });
  SpeedLine line;
  for (const PointResult* point : stand) {
    if (!line.speed_rpm.empty() && line.speed_rpm.back() == point->speed_rpm) continue;
    line.speed_rpm.push_back(point->speed_rpm);
    line.speed_ratio.push_back(point->speed_ratio);
    line.blade_efficiency.push_back(point->figures.blade_efficiency);
    line.blade_efficiency_error.push_back(point->numerical_error.blade_efficiency);
    line.wheel_efficiency.push_back(point->figures.wheel_efficiency);
    line.wheel_efficiency_error.push_back(point->numerical_error.wheel_efficiency);
    line.torque_n_m.push_back(point->figures.torque_n_m);
    line.torque_error_n_m.push_back(point->numerical_error.torque_n_m);
    line.power_w.push_back(point->figures.power_w);
  }
  if (const auto best = peak(line.speed_rpm, line.blade_efficiency)) {
    line.best_speed_rpm = best->speed;
    line.best_blade_efficiency = best->value;
    line.best_at_end = best->at_end;
  }
  if (const auto best = peak(line.speed_rpm, line.wheel_efficiency)) {
    line.best_wheel_speed_rpm = best->speed;
    line.best_wheel_efficiency = best->value;
  }
  set_stall(line);
  set_runaway(line);
  return line;
}

}  // namespace falcate::post
