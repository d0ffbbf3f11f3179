#include "post/report_tables.h"

#include <fmt/format.h>

#include <algorithm>
#include <string_view>
#include <vector>

#include "post/html.h"
#include "post/number_text.h"
#include "post/report_answer.h"

namespace falcate::post {
namespace {

constexpr std::size_t points_a_table = 4;

using Points = std::vector<const PointResult*>;

/// An efficiency reads best in per cent.
bool in_percent(const FigureRow& row) { return std::string_view(row.group) == "efficiency"; }

std::string figure_cell(const FigureRow& row, const PointResult& point) {
  if (row.wheel_only && !point.wheel) return "<td></td>";
  const double factor = in_percent(row) ? 100.0 : 1.0;
  return "<td>" +
         number_with_error(factor * figure_value(row, point.figures),
                           factor * figure_value(row, point.numerical_error)) +
         "</td>";
}

std::string unit_of(const FigureRow& row) {
  if (in_percent(row)) return "%";
  return std::string_view(row.unit) == "deg" ? "°" : row.unit;
}

std::string remarks_below(const Points& points) {
  std::string out;
  for (const PointResult* point : points) {
    for (const auto& remark : point->remarks) {
      out += fmt::format("<p class=\"caution\"><b>{}:</b> {}</p>\n",
                         escape_html(point_name(*point)), escape_html(remark));
    }
    if (point->solution.status == solver::SolutionStatus::averaged) {
      out += fmt::format(
          "<p class=\"caution\"><b>{}:</b> no steady state; the figures are averages over "
          "time.</p>\n",
          escape_html(point_name(*point)));
    }
  }
  return out;
}

std::string head(const Points& points, std::string_view first) {
  std::string out = fmt::format("<thead><tr><th scope=\"col\">{}</th>", first);
  for (const PointResult* point : points) {
    out += fmt::format("<th scope=\"col\">{}{}</th>", escape_html(point_name(*point)),
                       point->remarks.empty() ? "" : " ▲");
  }
  return out + "</tr></thead>\n";
}

std::string figures_table(const Points& points) {
  const bool wheel = std::any_of(points.begin(), points.end(), [](auto* p) { return p->wheel; });
  std::string rows;
  for (const FigureRow& row : figure_rows()) {
    if (row.wheel_only && !wheel) continue;
    const std::string unit = unit_of(row);
    rows += fmt::format("<tr><th scope=\"row\">{}{}</th>", escape_html(row.title),
                        unit.empty() ? "" : ", <i>" + escape_html(unit) + "</i>");
    for (const PointResult* point : points) rows += figure_cell(row, *point);
    rows += "</tr>\n";
  }
  if (wheel) {
    std::string ratio = "<tr><th scope=\"row\">Speed ratio</th>";
    for (const PointResult* p : points) ratio += fmt::format("<td>{:.4f}</td>", p->speed_ratio);
    rows = ratio + "</tr>\n" + rows;
  }
  return "<div class=\"scroll\"><table class=\"figures\">" + head(points, "Figure") + "<tbody>" +
         rows + "</tbody></table></div>\n" + remarks_below(points);
}

const char* status_words(solver::SolutionStatus status) {
  switch (status) {
    case solver::SolutionStatus::steady:
      return "steady";
    case solver::SolutionStatus::averaged:
      return "averaged over time";
    case solver::SolutionStatus::failed:
      return "failed";
  }
  return "";
}

}  // namespace

std::string derived_table(const ReportInput& input) {
  if (input.derived.empty()) return "";
  std::string out = "<table class=\"derived\"><tbody>\n";
  for (const auto& [label, value] : input.derived) {
    out += fmt::format("<tr><th scope=\"row\">{}</th><td>{}</td></tr>\n", escape_html(label),
                       escape_html(value));
  }
  return out + "</tbody></table>\n";
}

std::string figures_tables(const ReportInput& input) {
  Points standing;
  for (const auto& point : input.points) {
    if (stands(point)) standing.push_back(&point);
  }
  std::string out;
  for (std::size_t first = 0; first < standing.size(); first += points_a_table) {
    const std::size_t last = std::min(standing.size(), first + points_a_table);
    out += figures_table({standing.begin() + static_cast<std::ptrdiff_t>(first),
                          standing.begin() + static_cast<std::ptrdiff_t>(last)});
  }
  return out;
}

std::string power_table(const PointResult& point) {
  const double supply = point.figures.supply_power_w;
  if (!point.wheel || !stands(point) || !(supply > 0.0)) return "";
  std::string rows;
  for (const FigureRow& row : figure_rows()) {
    const bool part = std::string_view(row.group) == "losses" ||
                      row.value == &PassageFigures::power_w ||
                      row.value == &PassageFigures::supply_power_w;
    if (!part) continue;
    const double value = figure_value(row, point.figures);
    const double error = figure_value(row, point.numerical_error);
    rows += fmt::format("<tr><th scope=\"row\">{}</th><td>{}</td><td>{:.1f}</td></tr>\n",
                        escape_html(row.title), number_with_error(value, error),
                        100.0 * value / supply);
  }
  return "<table class=\"figures\"><thead><tr><th scope=\"col\">" + escape_html(point_name(point)) +
         "</th><th scope=\"col\">W</th><th scope=\"col\">% of the supply</th></tr></thead>"
         "<tbody>\n" +
         rows + "</tbody></table>\n";
}

std::string failures_list(const ReportInput& input) {
  std::string out;
  for (const auto& point : input.points) {
    if (stands(point)) continue;
    out += fmt::format("<li><b>{}:</b> {}</li>\n", escape_html(point_name(point)),
                       escape_html(point.failure));
  }
  return out.empty() ? out : "<ul class=\"failed\">\n" + out + "</ul>\n";
}

std::string solution_table(const ReportInput& input) {
  std::string out =
      "<div class=\"scroll\"><table class=\"figures\"><thead><tr><th scope=\"col\">Point</th><th "
      "scope=\"col\">Cells</th><th scope=\"col\">State</th><th scope=\"col\">Residual</th><th "
      "scope=\"col\">Steps</th><th scope=\"col\">Residual evaluations</th><th scope=\"col\">Mass "
      "in - out</th><th scope=\"col\">Error bars: figures by</th></tr></thead><tbody>\n";
  for (const auto& point : input.points) {
    out += fmt::format(
        "<tr><th scope=\"row\">{}</th><td>{}</td><td>{}</td><td>{:.1e}</td><td>{}</td><td>{}</td>"
        "<td>{}</td><td>{}</td></tr>\n",
        escape_html(point_name(point)), point.cells,
        stands(point) ? status_words(point.solution.status) : "failed",
        point.solution.residual_drop, point.solution.newton_steps,
        point.solution.residual_evaluations,
        stands(point) ? fmt::format("{:.1e}", point.figures.mass_imbalance) : "",
        escape_html(point.numerical_error.basis));
  }
  return out + "</tbody></table></div>\n";
}

}  // namespace falcate::post
