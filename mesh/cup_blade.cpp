#include <fmt/format.h>

#include <cmath>
#include <numbers>

#include "mesh/blade_shapes.h"
#include "mesh/curve_piece.h"

namespace falcate::mesh {
namespace {

constexpr double kPi = std::numbers::pi;
constexpr double kDegree = kPi / 180.0;

Point direction(double angle) { return {std::sin(angle), std::cos(angle)}; }
Point normal(double angle) { return {-std::cos(angle), std::sin(angle)}; }

void check_parameters(const CupParameters& p) {
  if (!(p.pitch > 0.0)) throw ShapeError("cup blade: the pitch must be above zero");
  if (!(p.width > 0.0)) throw ShapeError("cup blade: the width must be above zero");
  if (!(p.wall_thickness > 0.0))
    throw ShapeError("cup blade: the wall thickness must be above zero");
  if (!(p.edge_radius >= 0.0)) throw ShapeError("cup blade: the edge radius must not be negative");
  if (p.edge_radius > 0.5 * p.wall_thickness * (1.0 + 1e-12)) {
    throw ShapeError(fmt::format(
        "cup blade: the edge radius of {:.4g} mm is more than half the wall thickness of {:.4g} mm",
        1e3 * p.edge_radius, 1e3 * p.wall_thickness));
  }
  const double in = p.inlet_angle / kDegree, out = p.exit_angle / kDegree;
  if (!(in >= 5.0 && in < 175.0 && out > 5.0 && out <= 175.0 && out - in >= 20.0)) {
    throw ShapeError(
        fmt::format("cup blade: angles of {:.4g} deg in and {:.4g} deg out: both must be "
                    "between 5 and 175 deg and the turning 20 deg or more",
                    in, out));
  }
}

/// One end of the wall in the frame of the leading edge: two quarter circles with a flat between.
struct End {
  Point outer, inner;  // centres of the two edge roundings
};

/// Pieces from the convex to the concave side round the leading edge, split at the point of least
/// x.
void leading_edge(const End& end, double angle, double r, std::vector<CurvePiece>& convex,
                  std::vector<CurvePiece>& concave) {
  const Point flat = -r * direction(angle);
  const double to_outer = kPi - angle, upstream = 1.5 * kPi - angle, to_inner = 2.0 * kPi - angle;
  if (angle <= 0.5 * kPi) {
    convex = {arc_piece(end.outer, r, kPi, to_outer)};
    concave = {arc_piece(end.outer, r, kPi, upstream),
               line_piece(end.outer + flat, end.inner + flat),
               arc_piece(end.inner, r, upstream, to_inner)};
  } else {
    convex = {arc_piece(end.inner, r, kPi, upstream),
              line_piece(end.inner + flat, end.outer + flat),
              arc_piece(end.outer, r, upstream, to_outer)};
    concave = {arc_piece(end.inner, r, kPi, to_inner)};
  }
}

CurvePiece mirrored_and_reversed(const CurvePiece& piece) {
  return {piece.length,
          [piece](double s) {
            const Point p = piece.point(piece.length - s);
            return Point(-p.x(), p.y());
          },
          [piece](double s) { return piece.curvature(piece.length - s); }};
}

CurvePiece moved(const CurvePiece& piece, const Point& by) {
  return {piece.length, [piece, by](double s) { return Point(piece.point(s) + by); },
          piece.curvature};
}

/// A whole side: leading edge, arc, trailing edge (given in its mirrored frame), moved into place.
BladeSide assemble(std::vector<CurvePiece> lead, const CurvePiece& arc,
                   const std::vector<CurvePiece>& trail, const Point& by) {
  lead.push_back(arc);
  for (std::size_t i = trail.size(); i-- > 0;) lead.push_back(mirrored_and_reversed(trail[i]));
  for (auto& piece : lead) piece = moved(piece, by);
  return chain(lead);
}

}  // namespace

BladeOutline cup_blade(const CupParameters& p) {
  check_parameters(p);
  const double half = 0.5 * p.wall_thickness;
  const double r = p.edge_radius > 0.0 ? std::min(p.edge_radius, half) : half;
  const double in = p.inlet_angle, out = kPi - p.exit_angle;
  // The rounding that reaches furthest lies on the convex side of a shallow end, else on the other.
  const auto offset = [&](double angle) { return angle <= 0.5 * kPi ? half - r : r - half; };
  const double radius =
      (p.width - 2.0 * r - offset(in) * std::cos(in) - offset(out) * std::cos(out)) /
      (std::cos(in) + std::cos(out));
  if (!(radius - half > 0.02 * half)) {
    throw ShapeError(
        fmt::format("cup blade: a wall {:.4g} mm thick cannot be bent into a cup {:.4g} mm wide: "
                    "take a thinner wall "
                    "or a wider cup",
                    1e3 * p.wall_thickness, 1e3 * p.width));
  }
  const auto make_end = [&](double angle) {
    return End{(radius + half - r) * normal(angle), (radius - half + r) * normal(angle)};
  };
  std::vector<CurvePiece> convex_in, concave_in, convex_out, concave_out;
  leading_edge(make_end(in), in, r, convex_in, concave_in);
  leading_edge(make_end(out), out, r, convex_out, concave_out);
  const Point nose = convex_in.front().point(0.0);
  const Point by(-nose.x(), -nose.y());
  const auto arc = [&](double rr) { return arc_piece({0.0, 0.0}, rr, kPi - in, out); };
  BladeOutline cup(assemble(convex_in, arc(radius + half), convex_out, by),
                   assemble(concave_in, arc(radius - half), concave_out, by));
  if (const double gap = throat_width(cup, p.pitch); !(gap > 0.0)) {
    throw ShapeError(
        fmt::format("cup blade: neighbours touch at a pitch of {:.4g} mm: take fewer blades, a "
                    "thinner wall or a "
                    "steeper angle",
                    1e3 * p.pitch));
  }
  return cup;
}

}  // namespace falcate::mesh
