#include "robustness/matrix_page.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <functional>
#include <numbers>

#include "post/point_record.h"

namespace falcate::robustness {
namespace {

struct Group {
  const char* title;
  std::function<bool(const Answer&)> holds;
};

bool remark_has(const Answer& a, const char* words) {
  return std::any_of(a.result.remarks.begin(), a.result.remarks.end(),
                     [&](const std::string& r) { return r.find(words) != std::string::npos; });
}

double axial_mach(const Answer& a) {
  return a.relative_mach * std::sin(a.flow_angle_deg * std::numbers::pi / 180.0);
}

const std::vector<Group>& groups() {
  static const std::vector<Group> rows{
      {"all", [](const Answer&) { return true; }},
      {"wheel", [](const Answer& a) { return a.wheel; }},
      {"rig", [](const Answer& a) { return !a.wheel; }},
      {"channel", [](const Answer& a) { return a.shape == "channel"; }},
      {"cup", [](const Answer& a) { return a.shape == "cup"; }},
      {"relative Mach up to 0.5", [](const Answer& a) { return a.relative_mach <= 0.5; }},
      {"relative Mach 0.5 to 1",
       [](const Answer& a) { return a.relative_mach > 0.5 && a.relative_mach <= 1.0; }},
      {"relative Mach 1 to 1.5",
       [](const Answer& a) { return a.relative_mach > 1.0 && a.relative_mach <= 1.5; }},
      {"relative Mach above 1.5", [](const Answer& a) { return a.relative_mach > 1.5; }},
      {"axial Mach above 1", [](const Answer& a) { return axial_mach(a) > 1.0; }},
      {"shock before the blades", [](const Answer& a) { return remark_has(a, "shock stands"); }},
      {"wheel, speed ratio below 0.3",
       [](const Answer& a) { return a.wheel && a.result.speed_ratio < 0.29; }},
      {"wheel, speed ratio 0.3 to 0.6",
       [](const Answer& a) {
         return a.wheel && a.result.speed_ratio >= 0.29 && a.result.speed_ratio <= 0.6;
       }},
      {"wheel, speed ratio above 0.6",
       [](const Answer& a) { return a.wheel && a.result.speed_ratio > 0.6; }},
  };
  return rows;
}

std::string counts(const std::vector<Answer>& answers) {
  std::string text =
      "| points | number | steady | averaged | failed | without error bar | answered |\n"
      "| --- | ---: | ---: | ---: | ---: | ---: | ---: |\n";
  for (const Group& group : groups()) {
    int number = 0, good = 0;
    std::vector<int> of(4, 0);
    for (const Answer& a : answers) {
      if (!group.holds(a)) continue;
      ++number;
      good += answered(a) ? 1 : 0;
      const std::vector<std::string> kinds{"steady", "averaged", "failed", "without error bar"};
      for (std::size_t k = 0; k < kinds.size(); ++k) of[k] += kind_words(a) == kinds[k] ? 1 : 0;
    }
    text +=
        fmt::format("| {} | {} | {} | {} | {} | {} | {} |\n", group.title, number, of[0], of[1],
                    of[2], of[3], number ? fmt::format("{:.1f} %", 100.0 * good / number) : "-");
  }
  return text;
}

std::string place(const Answer& a) {
  const std::string speed =
      a.wheel ? fmt::format(", speed ratio {:.2f}", a.result.speed_ratio) : std::string();
  return fmt::format("{}{}, relative Mach {:.2f} at {:.1f} deg", a.row, speed, a.relative_mach,
                     a.flow_angle_deg);
}

std::string failures(const std::vector<Answer>& answers) {
  std::string text;
  for (const Answer& a : answers)
    if (!answered(a))
      text += fmt::format("- {}: {}\n", place(a),
                          a.result.failure.empty() ? kind_words(a) : a.result.failure);
  return text.empty() ? "None.\n" : text;
}

std::string averages(const std::vector<Answer>& answers) {
  std::string text;
  for (const Answer& a : answers)
    if (kind_words(a) == "averaged")
      text += fmt::format(
          "- {}: total pressure loss {:.4f} +- {:.4f}, turning {:.2f} +- {:.2f} deg\n", place(a),
          a.result.figures.total_pressure_loss, a.result.numerical_error.total_pressure_loss,
          a.result.figures.turning_deg, a.result.numerical_error.turning_deg);
  return text.empty() ? "None.\n" : text;
}

std::string seconds(const std::vector<Answer>& answers) {
  std::vector<double> times;
  for (const Answer& a : answers) times.push_back(a.wall_seconds);
  std::sort(times.begin(), times.end());
  const auto at = [&](double share) {
    return times[static_cast<std::size_t>(share * static_cast<double>(times.size() - 1))];
  };
  return fmt::format(
      "| median | 95 % below | worst |\n| ---: | ---: | ---: |\n"
      "| {:.1f} s | {:.1f} s | {:.1f} s |\n",
      at(0.5), at(0.95), times.back());
}

}  // namespace

std::string kind_words(const Answer& answer) {
  if (!answer.result.failure.empty()) return "failed";
  if (!has_error_bars(answer.result)) return "without error bar";
  return post::status_words(answer.result.solution.status);
}

std::string matrix_page(const std::vector<Answer>& answers, int cells) {
  if (answers.empty()) return "No points.\n";
  return fmt::format(
      "# Robustness\n\n"
      "{} operating points, finest mesh of about {} cells: wheels from standstill to beyond "
      "runaway, rig rows from Mach 0.1 to 2.5, channel and cup blades of 15 to 40 degrees, pitch "
      "0.3 to 1.2 widths. All data is invented. Written by\n\n"
      "```sh\nbuild/robustness_matrix --cells {} --out docs/robustness.md\n```\n\n"
      "A point is answered if its flow is steady (residual fallen by ten orders) or averaged over "
      "time, and every figure has an error bar.\n\n## Counts\n\n{}\n## Failures\n\n{}\n"
      "## Averaged over time\n\n{}\n"
      "## Seconds a point\n\nOne thread a point, two at a time, all three meshes.\n\n{}",
      answers.size(), cells, cells, counts(answers), failures(answers), averages(answers),
      seconds(answers));
}

}  // namespace falcate::robustness
