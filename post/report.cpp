#include "post/report.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstddef>

#include "post/figure_cascade.h"
#include "post/figure_curves.h"
#include "post/figure_triangle.h"
#include "post/flow_file.h"
#include "post/html.h"
#include "post/report_answer.h"
#include "post/report_style.h"
#include "post/report_tables.h"
#include "post/whole_file.h"

namespace falcate::post {
namespace {

std::string section(const std::string& id, const std::string& title, const std::string& body) {
  if (body.empty()) return "";
  return fmt::format("<section id=\"{}\">\n<h2>{}</h2>\n{}</section>\n", id, title, body);
}

std::string figure(const std::string& svg, const std::string& caption, const char* kind = "") {
  return fmt::format("<figure class=\"{}\">{}<figcaption>{}</figcaption></figure>\n", kind, svg,
                     escape_html(caption));
}

const PointResult* find_point(const ReportInput& input, const std::string& id) {
  for (const auto& point : input.points) {
    if (point.id == id) return &point;
  }
  return nullptr;
}

std::string picture_name(const ReportInput& input, const PictureField& picture) {
  const PointResult* point = find_point(input, picture.point_id);
  return point != nullptr ? point_name(*point) : picture.point_id;
}

bool finite(const std::vector<double>& values) {
  return std::all_of(values.begin(), values.end(), [](double v) { return std::isfinite(v); });
}

CascadeView cascade_view(const ReportInput& input, const PictureField& picture,
                         const std::string& id, const std::string& label) {
  const PointResult* point = find_point(input, picture.point_id);
  CascadeView view{picture.mesh, input.blade, 3,    point != nullptr && point->wheel,
                   400.0,        id,          label};
  if (&picture != &input.pictures.front()) view.passages = 2;
  if (&picture != &input.pictures.front()) view.width = 260.0;
  return view;
}

std::string mach_figure(const ReportInput& input, const PictureField& picture,
                        const std::string& id, const char* kind) {
  const std::string title = "Mach number relative to the blades, " + picture_name(input, picture);
  const auto mach = mach_numbers(*picture.cells, input.heat_capacity_ratio);
  if (!finite(mach)) {
    return fmt::format(
        "<p class=\"caution\">{}: the flow field holds values that are no numbers; "
        "there is no picture.</p>\n",
        escape_html(title));
  }
  return figure(
      field_picture(cascade_view(input, picture, id, title), mach, {"Mach number", 1.0, "Mach 1"}),
      title + ".", kind);
}

std::string pressure_figure(const ReportInput& input, const PictureField& picture,
                            const std::string& id, const char* kind) {
  const std::string title = "Static pressure, " + picture_name(input, picture);
  std::vector<double> pressure;
  for (const auto& state : *picture.cells) pressure.push_back(1e-3 * state.pressure);
  if (!finite(pressure)) return "";  // the picture of the Mach number says so already
  return figure(field_picture(cascade_view(input, picture, id, title), pressure,
                              {"pressure, kPa (absolute)", {}, ""}),
                title + ".", kind);
}

std::string flow_section(const ReportInput& input) {
  std::string out;
  if (input.pictures.empty()) return out;
  out += "<div class=\"larges\">\n" + mach_figure(input, input.pictures.front(), "mach0", "large") +
         pressure_figure(input, input.pictures.front(), "pressure0", "large") + "</div>\n";
  if (input.pictures.size() < 2) return out;
  out += "<h3>The other points</h3>\n<div class=\"many\">\n";
  for (std::size_t i = 1; i < input.pictures.size(); ++i) {
    out += mach_figure(input, input.pictures[i], fmt::format("mach{}", i), "");
  }
  out += "</div>\n<div class=\"many\">\n";
  for (std::size_t i = 1; i < input.pictures.size(); ++i) {
    out += pressure_figure(input, input.pictures[i], fmt::format("pressure{}", i), "");
  }
  return out + "</div>\n";
}

std::string mesh_section(const ReportInput& input) {
  if (input.pictures.empty()) return "";
  const PictureField& picture = input.pictures.front();
  return "<div class=\"pair\">\n" +
         figure(mesh_picture(cascade_view(input, picture, "mesh", "Blades and mesh")),
                fmt::format("Blades and the finest mesh: {} cells a passage.",
                            picture.mesh->cell_count())) +
         figure(edge_mesh_picture(cascade_view(input, picture, "edge", "Mesh at the leading edge")),
                "The mesh round the leading edge.") +
         "</div>\n";
}

std::size_t shown_point(const ReportInput& input) {
  if (!input.pictures.empty()) {
    for (std::size_t i = 0; i < input.points.size(); ++i) {
      if (input.points[i].id == input.pictures.front().point_id) return i;
    }
  }
  return key_point(input).value_or(0);
}

std::string surface_section(const ReportInput& input) {
  if (input.points.empty()) return "";
  const PointResult& point = input.points[shown_point(input)];
  if (point.suction.empty() || point.pressure.empty()) return "";
  const std::string where = " along the blade, " + point_name(point) + ".";
  return "<div class=\"pair\">\n" +
         figure(surface_mach_figure(point, "surfacemach"), "Isentropic Mach number" + where) +
         figure(surface_pressure_figure(point, "surfacepressure"), "Static pressure" + where) +
         "</div>\n";
}

std::string speed_section(const ReportInput& input) {
  if (!input.speed_line || input.speed_line->speed_rpm.size() < 2) return "";
  const SpeedLine& line = *input.speed_line;
  std::string out =
      "<div class=\"pair\">\n" +
      figure(efficiency_figure(line, "efficiency"),
             "Efficiency of the blades and of the wheel; the bars are the numerical error.") +
      figure(torque_figure(line, "torque"),
             "Torque; the bars are the numerical error, dashes are extrapolated.") +
      "</div>\n";
  for (const auto& caution : cautions_about(input, {"speed", "stress", "overspeed"})) {
    out += fmt::format("<p class=\"caution\">{}</p>\n", escape_html(caution));
  }
  return out;
}

std::string triangle_section(const ReportInput& input) {
  if (input.triangles.empty() || input.points.empty()) return "";
  const std::size_t shown = std::min(shown_point(input), input.triangles.size() - 1);
  const PointResult& point = input.points[std::min(shown, input.points.size() - 1)];
  const std::string title = "Velocity triangles, " + point_name(point);
  std::optional<StreamState> exit;
  if (stands(point) && point.figures.exit.velocity_m_s > 0.0) exit = point.figures.exit;
  return figure(triangle_figure(input.triangles[shown], exit, title),
                title +
                    ", to scale. The wheel turns to the right, the gas flows downwards; angles "
                    "are from the plane of rotation.");
}

std::string case_section(const ReportInput& input) {
  std::string cautions;
  for (const auto& caution : cautions_about(input, {"supply", "vessel", "nois", "icing", "jet"})) {
    cautions += fmt::format("<p class=\"caution\">{}</p>\n", escape_html(caution));
  }
  return "<div class=\"pair\">\n<div>" + derived_table(input) + cautions + "</div>\n<div>" +
         triangle_section(input) + "</div>\n</div>\n";
}

std::string answer(const ReportInput& input) {
  std::string out = fmt::format("<p class=\"answer\">{}</p>\n<dl class=\"keys\">\n",
                                escape_html(answer_sentence(input)));
  for (const auto& number : key_numbers(input)) {
    out += fmt::format("<div><dt>{}</dt><dd>{}</dd>", escape_html(number.title),
                       escape_html(number.value));
    if (!number.caution.empty()) {
      out += fmt::format("<dd class=\"caution\">{}</dd>", escape_html(number.caution));
    }
    out += "</div>\n";
  }
  return out + "</dl>\n";
}

std::string cautions_section(const ReportInput& input) {
  if (input.cautions.empty()) return "";
  std::string out = "<ul class=\"cautions\">\n";
  for (const auto& caution : input.cautions) {
    out += fmt::format("<li class=\"caution\">{}</li>\n", escape_html(caution));
  }
  return out + "</ul>\n";
}

std::string method_section(const ReportInput& input) {
  std::string out = fmt::format(
      "<p>falcate {}. Two-dimensional inviscid flow of an ideal gas (heat capacity ratio {:g}, gas "
      "constant {:g} J/(kg K)) through one periodic blade passage at the mean diameter, in the "
      "frame "
      "of the blades: cell-centred finite volumes, second order, solved steadily by a "
      "pseudo-transient Newton-Krylov method; in- and outflow states are mixed out. Three nested "
      "meshes give each figure its error bar: the terms of first and second order after Roy (2003) "
      "with a factor of safety of 1.25, or of 3 where the meshes do not converge. An error bar "
      "holds the error of the numbers, not what the model leaves out.</p>\n",
      escape_html(input.version), input.heat_capacity_ratio, input.gas_constant);
  out += solution_table(input);
  const bool drawn = std::any_of(input.points.begin(), input.points.end(), has_history);
  if (drawn) {
    out += figure(convergence_figure(input.points, shown_point(input), "convergence"),
                  "Residual against solution step; " +
                      point_name(input.points[shown_point(input)]) + " in full, the others faint.");
  }
  return out;
}

std::string page(const ReportInput& input) {
  const std::string title = escape_html(input.title);
  std::string out = fmt::format(
      "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n"
      "<meta name=\"viewport\" content=\"width=device-width,initial-scale=1\">\n"
      "<meta name=\"color-scheme\" content=\"light dark\">\n<link rel=\"icon\" href=\"data:,\">\n"
      "<title>{}</title>\n<style>{}</style>\n</head>\n<body>\n"
      "<header><p>Blade passage report</p><h1>{}</h1></header>\n<main>\n",
      title, report_style, title);
  out += answer(input);
  out += section("speeds", "Against speed", speed_section(input));
  if (const auto key = key_point(input))
    out += section("power", "Where the power goes", power_table(input.points[*key]));
  out += section("cautions", "Cautions", cautions_section(input));
  out += section("case", "The case", case_section(input));
  out += section("flow", "The flow", flow_section(input));
  out += section("surface", "Along the blade", surface_section(input));
  out += section("mesh", "Blades and mesh", mesh_section(input));
  out += section("figures", "All figures, with error bars", figures_tables(input));
  out += section("failed", "Points that failed", failures_list(input));
  out += section("method", "How it was computed", method_section(input));
  out += section("casefile", "The case file", "<pre>" + escape_html(input.case_text) + "</pre>\n");
  return out + "</main>\n</body>\n</html>\n";
}

}  // namespace

void write_report(const ReportInput& input, const std::string& path) {
  write_whole_file(path, page(input));
}

}  // namespace falcate::post
