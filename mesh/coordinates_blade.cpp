#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <memory>
#include <numbers>
#include <optional>
#include <utility>

#include "mesh/blade_shapes.h"
#include "mesh/curve_piece.h"
#include "mesh/outline_file.h"
#include "mesh/spline_curve.h"

namespace falcate::mesh {
namespace {

constexpr double kDegree = std::numbers::pi / 180.0;

/// Angle by which the polygon turns at its point i, 0 to pi.
double turn_at(const std::vector<Point>& loop, std::size_t i) {
  const std::size_t n = loop.size();
  const Point a = loop[i] - loop[(i + n - 1) % n], b = loop[(i + 1) % n] - loop[i];
  return std::atan2(std::abs(a.x() * b.y() - a.y() * b.x()), a.dot(b));
}

/// A point is a corner if the polygon turns there by more than 20 degrees and by more than three
/// times what it turns at the smoother of its neighbours. A coarsely given round edge turns alike
/// at neighbouring points and stays round; a corner at the end of a blunt edge has one smooth side.
std::vector<std::size_t> find_corners(const std::vector<Point>& loop) {
  const std::size_t n = loop.size();
  std::vector<std::size_t> corners;
  for (std::size_t i = 0; i < n; ++i) {
    const double turn = turn_at(loop, i);
    const double smoother = std::min(turn_at(loop, (i + n - 1) % n), turn_at(loop, (i + 1) % n));
    if (turn > 20.0 * kDegree && turn > 3.0 * smoother) corners.push_back(i);
  }
  return corners;
}

/// The whole loop as splines from corner to corner, counter-clockwise, with one running length.
class Loop {
 public:
  explicit Loop(const std::vector<Point>& points) {
    const auto corners = find_corners(points);
    const std::size_t n = points.size();
    if (corners.empty()) {
      add(SplineCurve(points, true), false);
      return;
    }
    for (std::size_t c = 0; c < corners.size(); ++c) {
      const std::size_t from = corners[c];
      std::size_t to = corners[(c + 1) % corners.size()];
      if (to <= from) to += n;
      std::vector<Point> part;
      for (std::size_t i = from; i <= to; ++i) part.push_back(points[i % n]);
      add(SplineCurve(part), part.size() == 2);
    }
    has_corners_ = true;
  }

  double length() const { return starts_.back(); }

  Point point(double s) const {
    const auto k = index(s);
    return curves_[k].point(s - starts_[k]);
  }

  /// Where the sides part: the corner that reaches furthest along `sign` x, the middle of the flat
  /// of a blunt edge that ends in such a corner, or else the point of a round edge with a vertical
  /// tangent.
  double nose(double sign) const {
    double best = 0.0, reach = -1e300;
    for (std::size_t k = 0; k < curves_.size(); ++k) {
      for (double s : curves_[k].knot_lengths()) {
        const double x = sign * curves_[k].point(s).x();
        if (x > reach) reach = x, best = starts_[k] + s;
      }
    }
    const double s = on_blunt_edge(best).value_or(-1.0);
    if (s >= 0.0) return s;
    return is_corner(best) ? best : refine(best, sign);
  }

  /// Pieces counter-clockwise from one running length to another, round the seam if need be.
  std::vector<CurvePiece> pieces(double from, double to) const {
    if (to <= from) to += length();
    std::vector<CurvePiece> result;
    for (int round = 0; round < 2; ++round) {
      const double base = round * length();
      for (std::size_t k = 0; k < curves_.size(); ++k) {
        const double low = std::max(from, base + starts_[k]);
        const double high = std::min(to, base + starts_[k + 1]);
        if (high - low <= 1e-12 * length()) continue;
        result.push_back(
            spline_piece(curves_[k], low - base - starts_[k], high - base - starts_[k]));
      }
    }
    return result;
  }

 private:
  void add(SplineCurve curve, bool straight) {
    starts_.push_back(starts_.back() + curve.length());
    straight_.push_back(straight);
    curves_.push_back(std::move(curve));
  }

  std::size_t index(double s) const {
    const auto found = std::upper_bound(starts_.begin() + 1, starts_.end() - 1, s);
    return static_cast<std::size_t>(found - starts_.begin()) - 1;
  }

  bool near(double s, double mark) const {
    const double gap = std::abs(s - mark);
    return std::min(gap, std::abs(gap - length())) <= 1e-12 * length();
  }

  bool is_corner(double s) const {
    return has_corners_ &&
           std::any_of(starts_.begin(), starts_.end(), [&](double mark) { return near(s, mark); });
  }

  /// Middle of a straight cut, corner to corner and no longer than a tenth of the outline, that
  /// begins or ends at s.
  std::optional<double> on_blunt_edge(double s) const {
    if (curves_.size() < 3) return std::nullopt;
    for (std::size_t k = 0; k < curves_.size(); ++k) {
      const bool touches = near(s, starts_[k]) || near(s, starts_[k + 1]);
      if (straight_[k] && touches && curves_[k].length() <= 0.1 * length()) {
        return 0.5 * (starts_[k] + starts_[k + 1]);
      }
    }
    return std::nullopt;
  }

  /// Vertical tangent near s, by bisection on the x part of the tangent between the next knots.
  double refine(double s, double sign) const {
    const auto k = index(s);
    const auto& curve = curves_[k];
    const auto& knots = curve.knot_lengths();
    const auto wrap = [&](double a) {
      return has_corners_ ? std::clamp(a, 0.0, curve.length())
                          : std::fmod(a + curve.length(), curve.length());
    };
    const double local = s - starts_[k];
    const auto i = std::lower_bound(knots.begin(), knots.end(), local - 1e-12 * length());
    const double step =
        std::max(i == knots.begin() ? curve.length() - *(knots.end() - 2) : local - *(i - 1),
                 i + 1 == knots.end() ? knots[1] : *(i + 1) - local);
    double low = local - step, high = local + step;
    for (int pass = 0; pass < 60; ++pass) {
      const double middle = 0.5 * (low + high);
      (sign * curve.tangent(wrap(middle)).x() > 0.0 ? low : high) = middle;
    }
    return starts_[k] + wrap(0.5 * (low + high));
  }

  std::vector<SplineCurve> curves_;
  std::vector<bool> straight_;
  std::vector<double> starts_{0.0};
  bool has_corners_ = false;
};

CurvePiece reversed(const CurvePiece& piece) {
  return {piece.length, [piece](double s) { return piece.point(piece.length - s); },
          [piece](double s) { return piece.curvature(piece.length - s); }};
}

CurvePiece placed(const CurvePiece& piece, double scale, double left) {
  return {scale * piece.length,
          [=](double s) {
            const Point p = piece.point(s / scale);
            return Point(scale * (p.x() - left), scale * p.y());
          },
          [=](double s) { return piece.curvature(s / scale) / scale; }};
}

/// Least and greatest x of the loop, by way of the noses and all points of a blunt edge.
std::pair<double, double> axial_extent(const Loop& loop, double lead, double trail,
                                       const std::vector<Point>& points) {
  double left = loop.point(lead).x(), right = loop.point(trail).x();
  for (const auto& p : points) left = std::min(left, p.x()), right = std::max(right, p.x());
  return {left, right};
}

void check_arch(const std::string& file, const std::vector<Point>& points, const Point& lead,
                const Point& trail) {
  const Point chord = trail - lead;
  double above = 0.0;
  for (const auto& p : points) above += chord.x() * (p - lead).y() - chord.y() * (p - lead).x();
  if (above < 0.0) {
    throw ShapeError(fmt::format(
        "{}: the blade bulges to -y; its convex side must lie towards +y: change the sign of y",
        file));
  }
}

}  // namespace

BladeOutline coordinates_blade(const std::string& csv_file, double width) {
  if (!(width > 0.0)) throw ShapeError("coordinates blade: the width must be above zero");
  std::vector<Point> points;
  for (const auto& p : read_outline(csv_file)) points.push_back(p.point);
  const Loop loop(points);
  const double lead = loop.nose(-1.0), trail = loop.nose(1.0);
  check_arch(csv_file, points, loop.point(lead), loop.point(trail));
  const auto [left, right] = axial_extent(loop, lead, trail, points);
  const double scale = width / (right - left), origin = left;
  const auto side = [&](std::vector<CurvePiece> pieces, bool backwards) {
    if (backwards) std::reverse(pieces.begin(), pieces.end());
    for (auto& piece : pieces) piece = placed(backwards ? reversed(piece) : piece, scale, origin);
    return chain(pieces);
  };
  return BladeOutline(side(loop.pieces(trail, lead), true), side(loop.pieces(lead, trail), false));
}

}  // namespace falcate::mesh
