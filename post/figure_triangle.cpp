#include "post/figure_triangle.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <string_view>
#include <vector>

#include "post/number_text.h"
#include "post/svg.h"

namespace falcate::post {
namespace {

constexpr double width = 470.0, left_margin = 24.0, drawing_width = 420.0;
constexpr double degree = std::numbers::pi / 180.0;

/// c = u + w with the names and the colours its arrows carry; tangential and axial components.
struct Triangle {
  double u, w, beta_deg, c, alpha_deg;
  std::string_view c_name, w_name, alpha_name, beta_name, place;
  double tip_u() const { return u + w * std::cos(beta_deg * degree); }
  double tip_x() const { return w * std::sin(beta_deg * degree); }
};

Triangle exit_triangle(double u, const StreamState& exit) {
  const double beta = exit.angle_deg * degree;
  const double cu = u + exit.velocity_m_s * std::cos(beta), cx = exit.velocity_m_s * std::sin(beta);
  return {u,
          exit.velocity_m_s,
          exit.angle_deg,
          std::hypot(cu, cx),
          std::atan2(cx, cu) / degree,
          "c₂",
          "w₂",
          "α₂",
          "β₂",
          "Behind the blades"};
}

struct Frame {
  double scale, x0, y0;  ///< px a m/s; px of the start of u
};

/// Words beside the middle of an arrow, on the side away from `away` (px).
std::string beside(double x1, double y1, double x2, double y2, double away_x, double away_y,
                   std::string_view words, std::string_view colour) {
  const double mx = 0.5 * (x1 + x2), my = 0.5 * (y1 + y2);
  double nx = y1 - y2, ny = x2 - x1;
  const double length = std::max(1e-9, std::hypot(nx, ny));
  nx /= length;
  ny /= length;
  if (nx * (away_x - mx) + ny * (away_y - my) > 0.0) {
    nx = -nx;
    ny = -ny;
  }
  return svg::text(mx + 15.0 * nx, my + 14.0 * ny + 5.0, words, "middle",
                   fmt::format("font-style=\"italic\" style=\"fill:{}\"", colour));
}

/// An arc from the plane of rotation to an arrow that starts at (x, y).
std::string angle_arc(double x, double y, double angle_deg, double radius, std::string_view name,
                      std::string_view colour) {
  const double a = angle_deg * degree, half = 0.5 * a;
  return fmt::format(
             "<path d=\"M{:.1f} {:.1f}A{:.1f} {:.1f} 0 0 1 {:.1f} {:.1f}\" fill=\"none\" "
             "stroke=\"{}\"/>",
             x + radius, y, radius, radius, x + radius * std::cos(a), y + radius * std::sin(a),
             colour) +
         svg::text(x + (radius + 11.0) * std::cos(half), y + (radius + 11.0) * std::sin(half) + 5.0,
                   name, "middle", "font-style=\"italic\" font-size=\"13\"");
}

std::string drawing(const Triangle& t, const Frame& frame) {
  const double ox = frame.x0, oy = frame.y0, ux = ox + t.u * frame.scale;
  const double tx = ox + t.tip_u() * frame.scale, ty = oy + t.tip_x() * frame.scale;
  std::string out = svg::line(left_margin - 16, oy, width - 8, oy,
                              fmt::format("stroke=\"{}\" stroke-dasharray=\"2 4\"", svg::faint));
  // An angle's arc must stay shorter than its arrow; beta's is the smaller, so that both show.
  const double c_px = t.c * frame.scale, w_px = t.w * frame.scale;
  out += angle_arc(ox, oy, t.alpha_deg, std::min(64.0, 0.5 * c_px), t.alpha_name, svg::accent);
  if (t.u * frame.scale > 4.0) {
    out += angle_arc(ux, oy, t.beta_deg, std::min(34.0, 0.5 * w_px), t.beta_name, svg::second);
  }
  out += svg::arrow(ox, oy, tx, ty, svg::accent) + svg::arrow(ux, oy, tx, ty, svg::second) +
         svg::arrow(ox, oy, ux, oy, svg::ink);
  out += beside(ox, oy, tx, ty, ux, oy, t.c_name, svg::accent) +
         beside(ux, oy, tx, ty, ox, oy, t.w_name, svg::second);
  return out + svg::text(0.5 * (ox + ux), oy - 8.0, "u", "middle", "font-style=\"italic\"");
}

std::string words(const Triangle& t, double y) {
  return svg::text(left_margin - 16, y, t.place, "start", "font-weight=\"600\"") +
         svg::text(
             left_margin - 16, y + 19.0,
             fmt::format("u {:.0f} m/s · {} {:.0f} m/s at {} {:.1f}° · {} {:.0f} m/s at {} {:.1f}°",
                         t.u, t.c_name, t.c, t.alpha_name, t.alpha_deg, t.w_name, t.w, t.beta_name,
                         t.beta_deg),
             "start", "font-size=\"13\"");
}

}  // namespace

std::string triangle_figure(const VelocityTriangle& inlet, const std::optional<StreamState>& exit,
                            const std::string& label) {
  std::vector<Triangle> triangles{
      {inlet.blade_speed, inlet.relative_velocity, inlet.relative_angle_deg, inlet.jet_velocity,
       inlet.jet_angle_deg, "c₁", "w₁", "α₁", "β₁", "Before the blades"}};
  if (exit) triangles.push_back(exit_triangle(inlet.blade_speed, *exit));
  double least = 0.0, greatest = 1e-9;
  for (const Triangle& t : triangles) {
    least = std::min(least, t.tip_u());
    greatest = std::max({greatest, t.u, t.tip_u()});
  }
  const double scale = drawing_width / (greatest - least);
  double y = 20.0;
  std::string body;
  for (const Triangle& t : triangles) {
    body += words(t, y) + drawing(t, {scale, left_margin - least * scale, y + 50.0});
    y += 50.0 + t.tip_x() * scale + 44.0;
  }
  const double step = even_step(greatest - least, 5);
  const auto style = fmt::format("stroke=\"{}\" stroke-width=\"1.5\"", svg::ink);
  const double x = left_margin - 16, bar = step * scale;
  body += svg::line(x, y - 14, x + bar, y - 14, style) + svg::line(x, y - 18, x, y - 10, style) +
          svg::line(x + bar, y - 18, x + bar, y - 10, style) +
          svg::text(x + bar + 8, y - 9, fmt::format("{:g} m/s", step), "start");
  return svg::document(width, y + 4.0, label, body);
}

}  // namespace falcate::post
