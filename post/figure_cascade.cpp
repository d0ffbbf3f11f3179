#include "post/figure_cascade.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>

#include "post/colour_map.h"
#include "post/contour.h"
#include "post/number_text.h"
#include "post/svg.h"

namespace falcate::post {
namespace {

constexpr double margin = 34.0, greatest_slenderness = 1.6;

struct Box {
  double x_least, x_greatest, y_least, y_greatest;
};

Box box_of(const std::vector<mesh::Point>& points) {
  Box box{points[0].x(), points[0].x(), points[0].y(), points[0].y()};
  for (const auto& p : points) {
    box = {std::min(box.x_least, p.x()), std::max(box.x_greatest, p.x()),
           std::min(box.y_least, p.y()), std::max(box.y_greatest, p.y())};
  }
  return box;
}

/// The part of the plane shown: the blades with room fore and aft, as far as the mesh goes.
Box window_of(const CascadeView& view) {
  const Box mesh = box_of(view.mesh->nodes());
  if (view.blade.empty()) return mesh;
  const Box blade = box_of(view.blade);
  const double width = blade.x_greatest - blade.x_least, pitch = view.mesh->pitch();
  return {std::max(mesh.x_least, blade.x_least - 0.6 * width),
          std::min(mesh.x_greatest, blade.x_greatest + 0.6 * width), blade.y_least - 0.15 * pitch,
          blade.y_greatest + (view.passages + 0.15) * pitch};
}

/// The picture's frame on the page, and the copies of the passage that fill it.
struct Stage {
  Box window;
  svg::View view;
  double width, height;  ///< px, of the frame
  int first_copy = 0, last_copy = 0;
};

Stage make_stage(const CascadeView& view, const Box& window) {
  Stage stage{window, {}, 0.0, 0.0};
  const double across = window.x_greatest - window.x_least;
  const double along = window.y_greatest - window.y_least;
  stage.view.scale = view.width * std::min(1.0 / across, greatest_slenderness / along);
  stage.width = across * stage.view.scale;
  stage.height = along * stage.view.scale;
  stage.view.left = window.x_least;
  stage.view.top = window.y_greatest;
  stage.view.x0 = margin;
  stage.view.y0 = 8.0;
  if (view.mesh->pitch() > 0.0) {
    const Box mesh = box_of(view.mesh->nodes());
    const double pitch = view.mesh->pitch();
    stage.first_copy = static_cast<int>(std::floor((window.y_least - mesh.y_greatest) / pitch)) + 1;
    stage.last_copy = static_cast<int>(std::ceil((window.y_greatest - mesh.y_least) / pitch)) - 1;
  }
  return stage;
}

std::string clip(const Stage& stage, const std::string& id) {
  return fmt::format(
      "<clipPath id=\"{}clip\"><rect x=\"{:.1f}\" y=\"{:.1f}\" width=\"{:.1f}\" "
      "height=\"{:.1f}\"/></clipPath>",
      id, stage.view.x0, stage.view.y0, stage.width, stage.height);
}

/// One passage drawn once and repeated a pitch apart.
std::string repeated(const CascadeView& view, const Stage& stage, const std::string& part,
                     const std::string& content, int first, int last) {
  const double step = view.mesh->pitch() * stage.view.scale;
  std::string out = fmt::format("<defs><g id=\"{}{}\" transform=\"scale(.1)\">{}</g></defs>",
                                view.id, part, content);
  for (int copy = first; copy <= last; ++copy) {
    out += fmt::format("<use href=\"#{}{}\" y=\"{:.2f}\"/>", view.id, part, -copy * step);
  }
  return out;
}

std::string blades(const CascadeView& view, const Stage& stage) {
  if (view.blade.empty()) return "";
  const double pitch = view.mesh->pitch();
  const Box blade = box_of(view.blade);
  int first = 0, last = 0;
  if (pitch > 0.0) {
    first = static_cast<int>(std::floor((stage.window.y_least - blade.y_greatest) / pitch));
    last = static_cast<int>(std::ceil((stage.window.y_greatest - blade.y_least) / pitch));
  }
  const std::string outline = fmt::format(
      "<path d=\"{}\" fill=\"var(--blade,#d5d8dc)\" stroke=\"#1c2127\" stroke-width=\"11\" "
      "stroke-linejoin=\"round\"/>",
      svg::path_data(stage.view, {simplified(view.blade, 0.03 / stage.view.scale)}, true));
  return repeated(view, stage, "blade", outline, first, last);
}

/// A length in round millimetres, drawn under the frame.
std::string scale_bar(const Stage& stage) {
  const double millimetres = even_step(1000.0 * stage.width / stage.view.scale, 6);
  const double length = millimetres / 1000.0 * stage.view.scale;
  const double y = stage.view.y0 + stage.height + 14.0, x = stage.view.x0;
  const auto style = fmt::format("stroke=\"{}\" stroke-width=\"1.5\"", svg::ink);
  return svg::line(x, y, x + length, y, style) + svg::line(x, y - 4, x, y + 4, style) +
         svg::line(x + length, y - 4, x + length, y + 4, style) +
         svg::text(x + length + 8, y + 5, fmt::format("{:g} mm", millimetres), "start");
}

std::string motion_arrow(const CascadeView& view, const Stage& stage) {
  if (!view.moves) return "";
  const double x = 14.0, y = stage.view.y0 + 0.5 * stage.height;
  return svg::arrow(x, y + 34.0, x, y - 34.0, svg::ink) +
         svg::text(x, y + 52.0, "u", "middle", "font-style=\"italic\"");
}

std::string frame(const Stage& stage) {
  return fmt::format(
      "<rect x=\"{:.1f}\" y=\"{:.1f}\" width=\"{:.1f}\" height=\"{:.1f}\" fill=\"none\" "
      "stroke=\"{}\"/>",
      stage.view.x0, stage.view.y0, stage.width, stage.height, svg::faint);
}

struct Levels {
  double first = 0.0, step = 0.0;
  int bands = 1;
  double at(int i) const { return first + i * step; }
  std::string colour(int band) const {
    return map_colour_hex(bands > 1 ? static_cast<double>(band) / (bands - 1) : 0.5);
  }
};

Levels make_levels(double least, double greatest) {
  const double range = greatest - least;
  if (range <= 1e-9 * std::max(std::abs(least), std::abs(greatest))) return {least, 0.0, 1};
  const double step = even_step(range, 20);
  const double first = std::floor(least / step + 1e-9) * step;
  const int bands = std::max(1, static_cast<int>(std::ceil((greatest - first) / step - 1e-9)));
  return {first, step, bands};
}

/// As many decimals as the step needs, so that the numbers line up.
std::string level_words(const Levels& levels, int i) {
  if (levels.step == 0.0) return fmt::format("{:.4g}", levels.first);
  int decimals = 0;
  for (double step = levels.step; decimals < 9 && std::abs(step - std::round(step)) > 1e-6 * step;
       step *= 10.0) {
    ++decimals;
  }
  return fmt::format("{:.{}f}", levels.at(i) + 0.0, decimals);
}

std::string colour_bar(const Stage& stage, const Levels& levels, const std::string& title) {
  const double x = stage.view.x0 + stage.width + 16.0, width = 18.0;
  const double height = std::min(stage.height - 12.0, 420.0);
  const double top = stage.view.y0 + 0.5 * (stage.height - height);
  const double band = height / levels.bands;
  const int every = std::max(1, (levels.bands + 9) / 10);
  std::string out;
  for (int i = 0; i < levels.bands; ++i) {
    out += fmt::format(
        "<rect x=\"{:.1f}\" y=\"{:.2f}\" width=\"{:.1f}\" height=\"{:.2f}\" fill=\"{}\"/>", x,
        top + height - (i + 1) * band, width, band + (i > 0 ? 0.5 : 0.0), levels.colour(i));
  }
  out += fmt::format(
      "<rect x=\"{:.1f}\" y=\"{:.2f}\" width=\"{:.1f}\" height=\"{:.2f}\" fill=\"none\" "
      "stroke=\"{}\"/>",
      x, top, width, height, svg::ink);
  for (int i = 0; i <= levels.bands; i += every) {
    const double y = top + height - i * band;
    out += svg::line(x + width, y, x + width + 4, y, fmt::format("stroke=\"{}\"", svg::ink)) +
           svg::text(x + width + 8, y + 5, level_words(levels, i), "start");
    if (levels.step == 0.0) break;
  }
  return out + svg::text(x + width + 72, top + 0.5 * height, title, "middle",
                         fmt::format("transform=\"rotate(-90 {:.1f} {:.1f})\"", x + width + 72,
                                     top + 0.5 * height));
}

/// Level by level over all copies of the passage, so that no seam shows where copies meet.
std::string filled_bands(const CascadeView& view, const ContourField& field, const Levels& levels,
                         const Stage& stage) {
  const double tolerance = 0.12 / stage.view.scale;
  std::string out = "<g stroke-width=\"8\" fill-rule=\"evenodd\" stroke-linejoin=\"round\">";
  for (int i = 0; i < levels.bands; ++i) {
    // The lowest colour lies under everything, node values a shade below the lowest cell included.
    const double level = i == 0 ? levels.first - 1.0 - std::abs(levels.first) : levels.at(i);
    const std::string d = svg::path_data(stage.view, field.region_above(level, tolerance), true);
    if (d.empty()) continue;
    const std::string path =
        fmt::format("<path d=\"{0}\" fill=\"{1}\" stroke=\"{1}\"/>", d, levels.colour(i));
    out += repeated(view, stage, fmt::format("b{}", i), path, stage.first_copy, stage.last_copy);
  }
  return out + "</g>";
}

std::string marked_line(const ContourField& field, const FieldScale& scale, const Stage& stage) {
  if (!scale.marked_line) return "";
  const auto lines = field.level_lines(*scale.marked_line, 0.1 / stage.view.scale);
  return fmt::format(
      "<path d=\"{0}\" fill=\"none\" stroke=\"#fff\" stroke-width=\"32\"/>"
      "<path d=\"{0}\" fill=\"none\" stroke=\"#14181d\" stroke-width=\"14\"/>",
      svg::path_data(stage.view, lines, false));
}

std::string line_key(const ContourField& field, const FieldScale& scale, const Stage& stage) {
  if (!scale.marked_line || scale.marked_words.empty()) return "";
  if (*scale.marked_line <= field.least() || *scale.marked_line > field.greatest()) return "";
  const double x = stage.view.x0 + stage.width, y = stage.view.y0 + stage.height + 14.0;
  return svg::text(x, y + 5, scale.marked_words, "end") +
         svg::line(x - 8.2 * static_cast<double>(scale.marked_words.size()) - 34, y,
                   x - 8.2 * static_cast<double>(scale.marked_words.size()) - 8, y,
                   fmt::format("stroke=\"{}\" stroke-width=\"1.6\"", svg::ink));
}

/// Every edge of the mesh with an end in the window, as chains of node numbers.
std::vector<Polyline> mesh_lines(const mesh::PassageMesh& mesh, const Box& window,
                                 double pitch_span) {
  const auto inside = [&](const mesh::Point& p) {
    return p.x() >= window.x_least && p.x() <= window.x_greatest &&
           p.y() >= window.y_least - pitch_span && p.y() <= window.y_greatest + pitch_span;
  };
  std::vector<std::vector<int>> neighbours(mesh.nodes().size());
  const auto node = [&](int n) -> const mesh::Point& {
    return mesh.nodes()[static_cast<std::size_t>(n)];
  };
  for (const auto& face : mesh.faces()) {
    const auto [a, b] = face.nodes;
    if (!inside(node(a)) && !inside(node(b))) continue;
    neighbours[static_cast<std::size_t>(a)].push_back(b);
    neighbours[static_cast<std::size_t>(b)].push_back(a);
  }
  std::vector<Polyline> lines;
  for (std::size_t start = 0; start < neighbours.size(); ++start) {
    while (!neighbours[start].empty()) {
      Polyline line{mesh.nodes()[start]};
      for (std::size_t at = start; !neighbours[at].empty();) {
        const int next = neighbours[at].back();
        neighbours[at].pop_back();
        auto& back = neighbours[static_cast<std::size_t>(next)];
        back.erase(std::find(back.begin(), back.end(), static_cast<int>(at)));
        line.push_back(node(next));
        at = static_cast<std::size_t>(next);
      }
      lines.push_back(std::move(line));
    }
  }
  return lines;
}

std::string mesh_drawing(const CascadeView& view, const Box& window, double line_width) {
  const Stage stage = make_stage(view, window);
  const double span = (stage.last_copy - stage.first_copy + 1) * view.mesh->pitch();
  const auto lines = mesh_lines(*view.mesh, window, span);
  const std::string path =
      fmt::format("<path d=\"{}\" fill=\"none\" stroke=\"{}\" stroke-width=\"{:.1f}\"/>",
                  svg::path_data(stage.view, lines, false), svg::ink, 10.0 * line_width);
  const std::string body =
      clip(stage, view.id) + fmt::format("<g clip-path=\"url(#{}clip)\">", view.id) +
      repeated(view, stage, "part", path, stage.first_copy, stage.last_copy) + blades(view, stage) +
      "</g>" + frame(stage) + scale_bar(stage) + motion_arrow(view, stage);
  return svg::document(stage.width + 2 * margin, stage.height + 40.0, view.label, body);
}

}  // namespace

std::string field_picture(const CascadeView& view, const std::vector<double>& cell_values,
                          const FieldScale& scale) {
  assert(view.mesh && cell_values.size() == view.mesh->cells().size());
  const ContourField field(*view.mesh, cell_values);
  const Levels levels = make_levels(field.least(), field.greatest());
  const Stage stage = make_stage(view, window_of(view));
  const std::string body = clip(stage, view.id) +
                           fmt::format("<g clip-path=\"url(#{}clip)\">", view.id) +
                           filled_bands(view, field, levels, stage) +
                           repeated(view, stage, "line", marked_line(field, scale, stage),
                                    stage.first_copy, stage.last_copy) +
                           blades(view, stage) + "</g>" + frame(stage) + scale_bar(stage) +
                           line_key(field, scale, stage) + motion_arrow(view, stage) +
                           colour_bar(stage, levels, scale.title);
  return svg::document(stage.width + margin + 116.0, stage.height + 40.0, view.label, body);
}

std::string mesh_picture(const CascadeView& view) {
  CascadeView one = view;
  one.passages = 1;
  return mesh_drawing(one, window_of(one), 0.25);
}

std::string edge_mesh_picture(const CascadeView& view) {
  if (view.blade.empty()) return mesh_picture(view);
  const Box blade = box_of(view.blade);
  const auto nose = *std::min_element(view.blade.begin(), view.blade.end(),
                                      [](const auto& a, const auto& b) { return a.x() < b.x(); });
  const double half = 0.07 * (blade.x_greatest - blade.x_least);
  return mesh_drawing(
      view,
      {nose.x() - 0.8 * half, nose.x() + 1.2 * half, nose.y() - 0.8 * half, nose.y() + 0.8 * half},
      0.6);
}

}  // namespace falcate::post
