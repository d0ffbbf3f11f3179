/// Pieces of a drawing in SVG, kept small: the plane is scaled to pixels, y upwards becomes y
/// downwards, and coordinates are whole tenths of a pixel.
/// Colours come from style variables of the page where there are any (--ink, --paper, --accent),
/// so that a drawing follows light and dark pages; each has a fall-back for an SVG on its own.
#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "mesh/point.h"
#include "post/contour.h"

namespace falcate::post::svg {

inline constexpr std::string_view ink = "var(--ink,#1c2127)";
inline constexpr std::string_view paper = "var(--paper,#ffffff)";
inline constexpr std::string_view faint = "var(--faint,#8b929b)";
inline constexpr std::string_view accent = "var(--accent,#0b5cad)";
inline constexpr std::string_view second = "var(--second,#b2491a)";
inline constexpr std::string_view third = "var(--third,#2f7d4f)";

/// Maps a rectangle of the plane (m, m/s, ...) onto pixels.
struct View {
  double left = 0.0, top = 0.0;  ///< plane coordinates of the corner shown at (x0, y0)
  double scale = 1.0;            ///< px a unit of the plane
  double x0 = 0.0, y0 = 0.0;     ///< px
  double x(double plane_x) const { return x0 + (plane_x - left) * scale; }
  double y(double plane_y) const { return y0 + (top - plane_y) * scale; }
};

/// `d` of a path in tenths of a pixel, to stand inside a group scaled by 0.1.
std::string path_data(const View& view, const std::vector<Polyline>& lines, bool closed);

/// Text at a place; `anchor` is start, middle or end. The words are escaped.
std::string text(double x, double y, std::string_view words, std::string_view anchor = "middle",
                 std::string_view attributes = "");

std::string line(double x1, double y1, double x2, double y2, std::string_view attributes);

/// A straight arrow with a filled head at its end.
std::string arrow(double x1, double y1, double x2, double y2, std::string_view colour);

/// The whole element; `label` is read out in place of the picture and is escaped.
std::string document(double width, double height, std::string_view label, const std::string& body);

}  // namespace falcate::post::svg
