#include <fmt/format.h>

#include <cmath>
#include <numbers>

#include "mesh/blade_shapes.h"
#include "mesh/curve_piece.h"

namespace falcate::mesh {
namespace {

constexpr double kPi = std::numbers::pi;
constexpr double kDegree = kPi / 180.0;

/// One end of the blade, in the frame of the leading edge (the trailing edge is mirrored into it).
/// Origin in the centre of the concave arc; n points from the concave to the convex side, d along
/// the flow. The convex tangent keeps the metal angle all the way. Where the pitch leaves an edge
/// thicker than its rounding asks for, the concave arc ends `wedge` early and runs into the edge
/// along its tangent.
struct End {
  double angle;        // metal angle in this frame
  double wedge = 0.0;  // rad
  Point nose_centre;
};

Point direction(double angle) { return {std::sin(angle), std::cos(angle)}; }
Point normal(double angle) { return {-std::cos(angle), std::sin(angle)}; }

/// How far up the flow from the start of the concave arc the nose lies: not at all, but where the
/// convex arc starts further up, there.
double setback(const ChannelParameters& p, double angle) {
  return std::min(0.0, p.pitch * std::cos(angle));
}

End make_end(const ChannelParameters& p, double angle, double concave_radius, double passage) {
  End end{angle, 0.0, {}};
  const double edge = p.pitch * std::sin(angle) - passage;
  const double q = setback(p, angle);
  const double reach = concave_radius + edge - p.edge_radius;
  end.nose_centre = reach * normal(angle) + q * direction(angle);
  const double near = concave_radius + p.edge_radius;
  if (reach > near * (1.0 + 1e-12)) {
    // The tangent to the concave arc, turned by the wedge, just touches the nose circle.
    end.wedge = std::atan2(q, reach) + std::acos(near / std::hypot(reach, q));
  }
  return end;
}

void check_parameters(const ChannelParameters& p) {
  if (!(p.pitch > 0.0)) throw ShapeError("channel blade: the pitch must be above zero");
  if (!(p.width > 0.0)) throw ShapeError("channel blade: the width must be above zero");
  if (!(p.edge_radius >= 0.0))
    throw ShapeError("channel blade: the edge radius must not be negative");
  const double in = p.inlet_angle / kDegree, out = p.exit_angle / kDegree;
  if (!(in >= 5.0 && in <= 110.0)) {
    throw ShapeError(
        fmt::format("channel blade: the inlet angle is {:.4g} deg, it must be between 5 "
                    "and 110 deg from the plane of rotation",
                    in));
  }
  if (!(out >= 70.0 && out <= 175.0)) {
    throw ShapeError(
        fmt::format("channel blade: the exit angle is {:.4g} deg, it must be between 70 "
                    "and 175 deg from the plane of rotation",
                    out));
  }
  if (!(out - in >= 20.0)) {
    throw ShapeError(
        fmt::format("channel blade: it turns the flow by {:.4g} deg only, from {:.4g} to "
                    "{:.4g} deg; it must turn it by 20 deg or more",
                    out - in, in, out));
  }
}

double passage_width_of(const ChannelParameters& p) {
  const double open = p.pitch * std::min(std::sin(p.inlet_angle), std::sin(p.exit_angle));
  const double most = open - 2.0 * p.edge_radius;
  const double passage = p.passage_width > 0.0 ? p.passage_width : most;
  if (!(most > 0.0)) {
    throw ShapeError(fmt::format(
        "channel blade: neighbours touch: the pitch leaves {:.4g} mm between them, the rounded "
        "edges "
        "are {:.4g} mm thick; take fewer blades, a smaller edge radius or a steeper angle",
        1e3 * open, 2e3 * p.edge_radius));
  }
  if (passage > most * (1.0 + 1e-12)) {
    throw ShapeError(
        fmt::format("channel blade: a passage {:.4g} mm wide leaves no room for edges of {:.4g} mm "
                    "radius; at this "
                    "pitch and angle it can be {:.4g} mm at most",
                    1e3 * passage, 1e3 * p.edge_radius, 1e3 * most));
  }
  return passage;
}

/// Radius of the concave arc from the axial width: both noses hang on it.
double concave_radius_of(const ChannelParameters& p, double passage) {
  const double in = p.inlet_angle, out = kPi - p.exit_angle;
  const auto outward = [&](double angle) {  // axial distance of the nose tip beyond radius * cos
    const double edge = p.pitch * std::sin(angle) - passage;
    return (edge - p.edge_radius) * std::cos(angle) - setback(p, angle) * std::sin(angle) +
           p.edge_radius;
  };
  const double radius = (p.width - outward(in) - outward(out)) / (std::cos(in) + std::cos(out));
  if (!(radius - passage > 0.02 * passage)) {
    throw ShapeError(fmt::format(
        "channel blade: the bend of a passage {:.4g} mm wide does not fit a blade {:.4g} mm wide: "
        "the "
        "convex side would need a radius of {:.4g} mm; take a wider blade or more blades",
        1e3 * passage, 1e3 * p.width, 1e3 * (radius - passage)));
  }
  return radius;
}

}  // namespace

// Seen along the flow the passage lies between the convex arc of one blade (centre C) and the
// concave arc of the next one, moved up by the pitch; both have the same centre. The concave arc of
// this blade hence has its centre one pitch below C.
BladeOutline channel_blade(const ChannelParameters& p) {
  check_parameters(p);
  const double passage = passage_width_of(p);
  const double outer = concave_radius_of(p, passage), inner = outer - passage;
  const End in = make_end(p, p.inlet_angle, outer, passage);
  const End out = make_end(p, kPi - p.exit_angle, outer, passage);
  const double a1 = p.inlet_angle, a2 = p.exit_angle;
  const double b1 = a1 + in.wedge, b2 = a2 - out.wedge;  // where the concave arc starts and ends
  if (!(b2 - b1 > 0.0)) {
    throw ShapeError(
        fmt::format("channel blade: a passage {:.4g} mm wide leaves edges so thick that no concave "
                    "side is left; "
                    "take a wider passage or more blades",
                    1e3 * passage));
  }
  const double r = p.edge_radius;
  const Point lift(-(in.nose_centre.x() - r), -in.nose_centre.y());  // leading edge at x = 0
  const Point low = lift, high = lift + Point(0.0, p.pitch);         // centres of the two arcs
  const Point nose1 = lift + in.nose_centre;
  const Point nose2 = lift + Point(-out.nose_centre.x(), out.nose_centre.y());
  const auto suction = chain({arc_piece(nose1, r, kPi, kPi - a1),
                              line_piece(nose1 + r * normal(a1), high + inner * normal(a1)),
                              arc_piece(high, inner, kPi - a1, kPi - a2),
                              line_piece(high + inner * normal(a2), nose2 + r * normal(a2)),
                              arc_piece(nose2, r, kPi - a2, 0.0)});
  const auto pressure = chain({arc_piece(nose1, r, kPi, 2.0 * kPi - b1),
                               line_piece(nose1 - r * normal(b1), low + outer * normal(b1)),
                               arc_piece(low, outer, kPi - b1, kPi - b2),
                               line_piece(low + outer * normal(b2), nose2 - r * normal(b2)),
                               arc_piece(nose2, r, -b2, 0.0)});
  return BladeOutline(suction, pressure);
}

}  // namespace falcate::mesh
