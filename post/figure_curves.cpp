#include "post/figure_curves.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstddef>

#include "post/gnuplot.h"
#include "post/number_text.h"

namespace falcate::post {
namespace {

constexpr int width = 500, height = 340;

/// One quantity along one side, against x / blade width.
Curve side_curve(const PointResult& point, const std::vector<SurfacePoint>& side,
                 double SurfacePoint::*quantity, double factor) {
  double least = 1e300, greatest = -1e300;
  for (const auto* s : {&point.suction, &point.pressure}) {
    for (const auto& p : *s) {
      least = std::min(least, p.x);
      greatest = std::max(greatest, p.x);
    }
  }
  Curve curve;
  for (const auto& p : side) {
    curve.x.push_back((p.x - least) / (greatest - least));
    curve.y.push_back(factor * p.*quantity);
  }
  return curve;
}

std::string surface_figure(const PointResult& point, double SurfacePoint::*quantity, double factor,
                           const std::string& title, const std::string& id) {
  LineFigure figure;
  figure.label = title + " along both sides of the blade";
  figure.x_title = "axial distance / blade width";
  figure.y_title = title;
  figure.width = width;
  figure.height = height;
  figure.x_least = 0.0;
  figure.x_greatest = 1.0;
  Curve suction = side_curve(point, point.suction, quantity, factor);
  suction.title = "convex side";
  suction.colour = 1;
  Curve pressure = side_curve(point, point.pressure, quantity, factor);
  pressure.title = "concave side";
  pressure.colour = 2;
  figure.curves = {suction, pressure};
  return line_figure(figure, id);
}

std::string speed_words(double rpm) { return number_text(rpm, 3) + " rpm"; }

/// Speeds in thousands where they are large.
struct SpeedAxis {
  double factor;
  const char* title;
};
SpeedAxis speed_axis(const SpeedLine& line) {
  const double most = line.speed_rpm.empty() ? 0.0 : line.speed_rpm.back();
  return most >= 2000.0 ? SpeedAxis{1e-3, "speed, 1000 rpm"} : SpeedAxis{1.0, "speed, rpm"};
}

std::vector<double> times(std::vector<double> values, double factor) {
  for (double& v : values) v *= factor;
  return values;
}

LineFigure speed_figure(const SpeedLine& line, const std::string& title) {
  LineFigure figure;
  figure.label = title + " against speed";
  figure.x_title = speed_axis(line).title;
  figure.y_title = title;
  figure.width = width;
  figure.height = height;
  figure.x_least = 0.0;
  return figure;
}

void add_with_error_bars(LineFigure& figure, const Curve& curve) {
  figure.curves.push_back(curve);
  figure.curves.back().error.clear();
  figure.curves.back().style = LineStyle::line_with_points;
  figure.curves.push_back(curve);
  figure.curves.back().style = LineStyle::error_bars;
  figure.curves.back().title.clear();
}

Curve extension(double x1, double y1, double x2, double y2) {
  Curve curve;
  curve.x = {x1, x2};
  curve.y = {y1, y2};
  curve.dashed = true;
  return curve;
}

}  // namespace

std::string surface_mach_figure(const PointResult& point, const std::string& id) {
  return surface_figure(point, &SurfacePoint::isentropic_mach, 1.0, "isentropic Mach number", id);
}

std::string surface_pressure_figure(const PointResult& point, const std::string& id) {
  return surface_figure(point, &SurfacePoint::pressure_pa, 1e-3, "pressure, kPa (absolute)", id);
}

bool has_history(const PointResult& point) {
  return std::any_of(
      point.solution.history.begin(), point.solution.history.end(),
      [](const auto& step) { return std::isfinite(step.residual) && step.residual > 0.0; });
}

std::string convergence_figure(const std::vector<PointResult>& points, std::size_t shown,
                               const std::string& id) {
  LineFigure figure;
  figure.label = "Residual against solution step";
  figure.x_title = "step on the finest mesh";
  figure.y_title = "residual / first residual";
  figure.width = width;
  figure.height = height;
  figure.log_y = true;
  for (std::size_t i = 0; i < points.size(); ++i) {
    Curve curve;
    curve.colour = i == shown ? 1 : 4;
    for (const auto& step : points[i].solution.history) {
      if (!(step.residual > 0.0)) continue;
      curve.x.push_back(step.step);
      curve.y.push_back(step.residual);
    }
    if (i == shown) {
      curve.style = LineStyle::line_with_points;
      figure.curves.push_back(curve);
    } else {
      figure.curves.insert(figure.curves.begin(), curve);
    }
  }
  return line_figure(figure, id);
}

std::string efficiency_figure(const SpeedLine& line, const std::string& id) {
  LineFigure figure = speed_figure(line, "efficiency, %");
  const double factor = speed_axis(line).factor;
  Curve curve;
  curve.x = times(line.speed_rpm, factor);
  curve.y = times(line.blade_efficiency, 100.0);
  curve.error = times(line.blade_efficiency_error, 100.0);
  curve.title = "blade";
  add_with_error_bars(figure, curve);
  if (line.wheel_efficiency.size() == line.speed_rpm.size()) {
    curve.y = times(line.wheel_efficiency, 100.0);
    curve.error = times(line.wheel_efficiency_error, 100.0);
    curve.title = "wheel, total to static";
    curve.colour = 3;
    add_with_error_bars(figure, curve);
  }
  figure.y_from_zero = true;
  if (line.best_speed_rpm) {
    figure.marks.push_back(
        {factor * *line.best_speed_rpm,
         {},
         (line.best_at_end ? "highest computed " : "best ") + speed_words(*line.best_speed_rpm)});
  }
  return line_figure(figure, id);
}

TorqueUnit torque_unit(const SpeedLine& line) {
  double most = line.stall_torque_n_m.value_or(0.0);
  for (const double t : line.torque_n_m) most = std::max(most, std::abs(t));
  return most < 0.5 ? TorqueUnit{1e3, "mN m"} : TorqueUnit{1.0, "N m"};
}

std::string torque_figure(const SpeedLine& line, const std::string& id) {
  const auto [unit, unit_name] = torque_unit(line);
  LineFigure figure = speed_figure(line, fmt::format("torque, {}", unit_name));
  const double factor = speed_axis(line).factor;
  Curve curve;
  curve.x = times(line.speed_rpm, factor);
  curve.y = times(line.torque_n_m, unit);
  curve.error = times(line.torque_error_n_m, unit);
  curve.colour = 2;
  add_with_error_bars(figure, curve);
  if (curve.x.empty()) return line_figure(figure, id);
  const auto extend = [&](double x1, double y1, double x2, double y2) {
    figure.curves.push_back(extension(x1, y1, x2, y2));
    figure.curves.back().colour = 2;
  };
  if (line.stall_torque_n_m) {
    const double stall = unit * *line.stall_torque_n_m;
    if (line.stall_extrapolated) extend(0.0, stall, curve.x.front(), curve.y.front());
    figure.marks.push_back(
        {{}, stall, fmt::format("stall {} {}", number_text(stall, 3), unit_name)});
  }
  if (line.runaway_speed_rpm) {
    const double runaway = factor * *line.runaway_speed_rpm;
    if (line.runaway_extrapolated) extend(curve.x.back(), curve.y.back(), runaway, 0.0);
    figure.marks.push_back({runaway, {}, "runaway " + speed_words(*line.runaway_speed_rpm), true});
    figure.x_greatest = 1.04 * std::max(runaway, curve.x.back());
  }
  figure.y_from_zero = true;
  return line_figure(figure, id);
}

}  // namespace falcate::post
