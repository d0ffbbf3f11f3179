#include "post/svg.h"

#include <fmt/format.h>

#include <cmath>

#include "post/html.h"

namespace falcate::post::svg {

std::string path_data(const View& view, const std::vector<Polyline>& lines, bool closed) {
  std::string out;
  const auto tenths = [](double pixels) { return std::lround(10.0 * pixels); };
  for (const auto& line : lines) {
    long x = 0, y = 0;
    bool first = true;
    std::string piece;
    for (const auto& point : line) {
      const long px = tenths(view.x(point.x())), py = tenths(view.y(point.y()));
      if (first) {
        piece = fmt::format("M{} {}l", px, py);
      } else if (px != x || py != y) {
        piece += fmt::format("{}{}{}", piece.back() == 'l' || px < x ? "" : " ", px - x,
                             py < y ? fmt::format("{}", py - y) : fmt::format(" {}", py - y));
      }
      first = false;
      x = px;
      y = py;
    }
    if (piece.empty() || piece.back() == 'l') continue;
    out += piece;
    if (closed) out += 'z';
  }
  return out;
}

std::string text(double x, double y, std::string_view words, std::string_view anchor,
                 std::string_view attributes) {
  return fmt::format("<text x=\"{:.1f}\" y=\"{:.1f}\" text-anchor=\"{}\" {}>{}</text>", x, y,
                     anchor, attributes, escape_html(words));
}

std::string line(double x1, double y1, double x2, double y2, std::string_view attributes) {
  return fmt::format("<path d=\"M{:.1f} {:.1f}L{:.1f} {:.1f}\" fill=\"none\" {}/>", x1, y1, x2, y2,
                     attributes);
}

std::string arrow(double x1, double y1, double x2, double y2, std::string_view colour) {
  const double length = std::hypot(x2 - x1, y2 - y1);
  if (length < 1e-9) return "";
  const double ux = (x2 - x1) / length, uy = (y2 - y1) / length;
  const double head = std::min(11.0, 0.6 * length), half = 0.36 * head;
  const double bx = x2 - head * ux, by = y2 - head * uy;
  return line(x1, y1, x2 - 0.7 * head * ux, y2 - 0.7 * head * uy,
              fmt::format("stroke=\"{}\" stroke-width=\"2.2\"", colour)) +
         fmt::format("<path d=\"M{:.1f} {:.1f}L{:.1f} {:.1f}L{:.1f} {:.1f}z\" fill=\"{}\"/>", x2,
                     y2, bx - half * uy, by + half * ux, bx + half * uy, by - half * ux, colour);
}

std::string document(double width, double height, std::string_view label, const std::string& body) {
  const std::string words = escape_html(label);
  return fmt::format(
      "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {0:.0f} {1:.0f}\" width=\"{0:.0f}\" "
      "height=\"{1:.0f}\" role=\"img\" aria-label=\"{2}\" font-family=\"system-ui,sans-serif\" "
      "font-size=\"14\" fill=\"{3}\"><title>{2}</title>{4}</svg>\n",
      width, height, words, ink, body);
}

}  // namespace falcate::post::svg
