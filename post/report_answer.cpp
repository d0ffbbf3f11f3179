#include "post/report_answer.h"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <cmath>

#include "post/figure_curves.h"
#include "post/number_text.h"

namespace falcate::post {
namespace {

std::string percent(double value, double error) {
  return number_with_error(100.0 * value, 100.0 * error) + " %";
}

std::string rpm(double speed, int digits = 3) { return number_text(speed, digits) + " rpm"; }

std::string wheel_point_sentence(const PointResult& point) {
  const PassageFigures &figures = point.figures, &errors = point.numerical_error;
  return fmt::format(
      "At {} (speed ratio {:.3f}) the blades turn {} of the kinetic energy of the gas that passes "
      "through them into work.",
      point_name(point), point.speed_ratio,
      percent(figures.blade_efficiency, errors.blade_efficiency));
}

std::string speed_line_sentence(const SpeedLine& line, const PointResult& best) {
  const double ratio = best.speed_rpm > 0.0
                           ? *line.best_speed_rpm * best.speed_ratio / best.speed_rpm
                           : best.speed_ratio;
  const std::string efficiency =
      percent(*line.best_blade_efficiency, best.numerical_error.blade_efficiency);
  if (!line.best_at_end) {
    return fmt::format(
        "The best speed is about {} (speed ratio {:.3f}): there the blades turn {} of the kinetic "
        "energy of the gas that passes through them into work.",
        rpm(*line.best_speed_rpm), ratio, efficiency);
  }
  const bool low_end = line.speed_rpm.size() > 1 && *line.best_speed_rpm <= line.speed_rpm.front();
  return fmt::format(
      "The blade efficiency is highest at the {} speed computed, {} (speed ratio {:.3f}): {}. The "
      "best speed lies beyond; add {} speeds to find it.",
      low_end ? "lowest" : "highest", rpm(*line.best_speed_rpm), ratio, efficiency,
      low_end ? "lower" : "higher");
}

std::string rig_sentence(const PointResult& point) {
  const PassageFigures &figures = point.figures, &errors = point.numerical_error;
  return fmt::format(
      "The blade row turns the flow by {}°, from {}° to {}° from the plane of rotation. The gas "
      "leaves at Mach {} with a total pressure loss of {} of the exit dynamic pressure "
      "(p01 - p02)/(p01 - p2).",
      number_with_error(figures.turning_deg, errors.turning_deg),
      number_with_error(figures.inlet.angle_deg, errors.inlet.angle_deg),
      number_with_error(figures.exit.angle_deg, errors.exit.angle_deg),
      number_with_error(figures.exit.mach, errors.exit.mach),
      percent(figures.total_pressure_loss, errors.total_pressure_loss));
}

std::string joined(const std::vector<std::string>& sentences) {
  std::string out;
  for (const auto& s : sentences) out += (out.empty() ? "" : " ") + s;
  return out;
}

std::string remarks_of(const PointResult& point) {
  std::string out = joined(point.remarks);
  if (point.solution.status == solver::SolutionStatus::averaged) {
    out += std::string(out.empty() ? "" : " ") +
           "The flow has no steady state: these are averages over time.";
  }
  return out;
}

void add_speed_line_numbers(const ReportInput& input, std::vector<KeyNumber>& numbers) {
  if (!input.speed_line) return;
  const SpeedLine& line = *input.speed_line;
  const auto [factor, unit] = torque_unit(line);
  if (line.best_wheel_speed_rpm && line.best_wheel_efficiency && line.speed_rpm.size() > 1 &&
      std::abs(*line.best_wheel_speed_rpm - line.best_speed_rpm.value_or(0.0)) >
          0.01 * *line.best_wheel_speed_rpm) {
    numbers.push_back({"Best wheel efficiency, at " + rpm(*line.best_wheel_speed_rpm),
                       number_text(100.0 * *line.best_wheel_efficiency, 3) + " %", ""});
  }
  if (line.stall_torque_n_m) {
    numbers.push_back({"Stall torque",
                       fmt::format("{} {}", number_text(factor * *line.stall_torque_n_m, 3), unit),
                       line.stall_extrapolated ? "Extrapolated from the speeds computed." : ""});
  }
  if (line.runaway_speed_rpm) {
    numbers.push_back(
        {"Runaway speed", rpm(*line.runaway_speed_rpm),
         std::string(line.runaway_extrapolated ? "Extrapolated. " : "") +
             "A wheel without load runs up to it: it must bear it, and be contained."});
  }
}

}  // namespace

bool stands(const PointResult& point) { return point.failure.empty(); }

std::string point_name(const PointResult& point) {
  return point.wheel ? whole_number_text(point.speed_rpm) + " rpm" : point.id;
}

std::optional<std::size_t> key_point(const ReportInput& input) {
  std::optional<std::size_t> best;
  for (std::size_t i = 0; i < input.points.size(); ++i) {
    const PointResult& point = input.points[i];
    if (!stands(point)) continue;
    if (!best || (point.wheel &&
                  point.figures.blade_efficiency > input.points[*best].figures.blade_efficiency)) {
      best = i;
    }
  }
  return best;
}

std::string answer_sentence(const ReportInput& input) {
  const auto key = key_point(input);
  if (!key) return "No point could be solved; the reasons stand below.";
  const PointResult& point = input.points[*key];
  if (!point.wheel) return rig_sentence(point);
  const auto& line = input.speed_line;
  std::string sentence;
  if (line && line->speed_rpm.size() > 1 && line->best_speed_rpm && line->best_blade_efficiency) {
    sentence = speed_line_sentence(*line, point);
  } else {
    sentence = wheel_point_sentence(point);
  }
  const auto failed = std::count_if(input.points.begin(), input.points.end(),
                                    [](const auto& p) { return !stands(p); });
  if (failed > 0) {
    sentence += fmt::format(" {} of {} points failed; the reasons stand below.", failed,
                            input.points.size());
  }
  return sentence;
}

std::vector<std::string> cautions_about(const ReportInput& input,
                                        const std::vector<std::string>& words) {
  std::vector<std::string> out;
  for (const auto& caution : input.cautions) {
    std::string lower = caution;
    std::transform(lower.begin(), lower.end(), lower.begin(),
                   [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
    const bool concerns = std::any_of(words.begin(), words.end(), [&](const std::string& word) {
      return lower.find(word) != std::string::npos;
    });
    if (concerns) out.push_back(caution);
  }
  return out;
}

std::vector<KeyNumber> key_numbers(const ReportInput& input) {
  const auto key = key_point(input);
  if (!key) return {};
  const PointResult& point = input.points[*key];
  const PassageFigures &figures = point.figures, &errors = point.numerical_error;
  if (!point.wheel) {
    return {{"Turning", number_with_error(figures.turning_deg, errors.turning_deg) + "°",
             remarks_of(point)},
            {"Exit Mach number", number_with_error(figures.exit.mach, errors.exit.mach), ""},
            {"Total pressure loss",
             percent(figures.total_pressure_loss, errors.total_pressure_loss), ""}};
  }
  const std::string at = " at " + point_name(point);
  const auto [factor, unit] =
      input.speed_line
          ? torque_unit(*input.speed_line)
          : (figures.torque_n_m < 0.5 ? TorqueUnit{1e3, "mN m"} : TorqueUnit{1.0, "N m"});
  std::vector<KeyNumber> numbers{
      {"Blade efficiency" + at, percent(figures.blade_efficiency, errors.blade_efficiency),
       remarks_of(point)},
      {"Wheel efficiency" + at, percent(figures.wheel_efficiency, errors.wheel_efficiency), ""},
      {"Shaft power" + at, number_with_error(figures.power_w, errors.power_w) + " W", ""},
      {"Torque" + at,
       fmt::format("{} {}",
                   number_with_error(factor * figures.torque_n_m, factor * errors.torque_n_m),
                   unit),
       ""}};
  add_speed_line_numbers(input, numbers);
  return numbers;
}

}  // namespace falcate::post
