#include "mesh/curve_piece.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <memory>

namespace falcate::mesh {

CurvePiece line_piece(const Point& from, const Point& to) {
  const double length = (to - from).norm();
  return {length,
          [from, to, length](double s) {
            if (length <= 0.0) return from;
            const double t = s / length;
            return Point((1.0 - t) * from + t * to);  // exact at both ends
          },
          [](double) { return 0.0; }};
}

CurvePiece arc_piece(const Point& centre, double radius, double from, double to) {
  const double length = radius * std::abs(to - from);
  return {length,
          [=](double s) {
            const double angle = length > 0.0 ? from + (to - from) * (s / length) : from;
            return Point(centre + radius * Point(std::cos(angle), std::sin(angle)));
          },
          [radius](double) { return 1.0 / radius; }};
}

BladeSide chain(const std::vector<CurvePiece>& pieces) {
  auto kept = std::make_shared<std::vector<CurvePiece>>();
  auto ends = std::make_shared<std::vector<double>>();
  double whole = 0.0;
  for (const auto& piece : pieces) whole += piece.length;
  BladeSide side;
  for (const auto& piece : pieces) {
    if (piece.length <= 1e-12 * whole) continue;
    side.length += piece.length;
    kept->push_back(piece);
    ends->push_back(side.length);
  }
  assert(!kept->empty());
  side.corners.assign(ends->begin(), ends->end() - 1);
  const auto locate = [kept, ends](double& s) {
    const auto found = std::lower_bound(ends->begin(), ends->end() - 1, s);
    const auto k = static_cast<std::size_t>(found - ends->begin());
    s = std::clamp(k > 0 ? s - (*ends)[k - 1] : s, 0.0, (*kept)[k].length);
    return k;
  };
  side.point = [=](double s) {
    const auto k = locate(s);
    return (*kept)[k].point(s);
  };
  side.curvature = [=](double s) {
    const auto k = locate(s);
    return (*kept)[k].curvature(s);
  };
  return side;
}

}  // namespace falcate::mesh
