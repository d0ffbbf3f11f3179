#include "mesh/size_field.h"

#include <algorithm>
#include <cmath>
#include <cstddef>

namespace falcate::mesh {
namespace {

constexpr int kGridPerWidth = 80;
constexpr int kWallSamples = 600;

struct Source {
  Point at;
  double size;
};

/// A mesh coarser than usual must be coarser at edges and in gaps as well: the factor for both.
double coarsening(const SizeRules& rules) {
  return std::max(1.0, rules.base / std::min(0.05 * rules.width, rules.pitch / 6.0));
}

/// Places that want cells smaller than the base: curved walls and sharp edges.
std::vector<Source> sources_of(const std::vector<WallSample>& walls, const SizeRules& rules) {
  std::vector<Source> sources;
  // A twentieth of the base is where growth at the limited gradient costs few more cells than the
  // row; a mesh of few cells cannot afford even those, and its edges are coarser.
  const double spare = std::max(1.0, rules.base / (0.12 * rules.width));
  const double floor = 0.05 * rules.base * spare * spare * spare;
  const double share = rules.curvature_share * coarsening(rules);
  for (const auto& wall : walls) {
    const double size = wall.radius > 0.0 ? std::max(floor, share * wall.radius) : 0.5 * rules.base;
    if (size < rules.base) sources.push_back({wall.at, size});
  }
  return sources;
}

/// Drops what another source makes superfluous, since the grid pays for each.
std::vector<Source> thinned(std::vector<Source> sources, double gradient) {
  std::stable_sort(sources.begin(), sources.end(),
                   [](const Source& a, const Source& b) { return a.size < b.size; });
  std::vector<Source> kept;
  for (const auto& s : sources) {
    const bool covered = std::any_of(kept.begin(), kept.end(), [&](const Source& k) {
      return k.size + gradient * (k.at - s.at).norm() <= 1.05 * s.size;
    });
    if (!covered) kept.push_back(s);
  }
  return kept;
}

double base_at(const SizeRules& rules, double x) {
  const double margin = 0.05 * rules.width;
  const double out = std::max({0.0, -margin - x, x - rules.width - margin});
  const double row = std::min(rules.base, coarsening(rules) * rules.gap / 4.0);
  const double most = std::max(row, std::min(4.0 * rules.base, rules.pitch / 4.0));
  return std::min(row + rules.gradient * out, most);
}

bool inside(const std::vector<Point>& polygon, const Point& p) {
  bool in = false;
  for (std::size_t i = 0, j = polygon.size() - 1; i < polygon.size(); j = i++) {
    const Point &a = polygon[j], &b = polygon[i];
    if ((a.y() > p.y()) != (b.y() > p.y()) &&
        p.x() < a.x() + (p.y() - a.y()) / (b.y() - a.y()) * (b.x() - a.x())) {
      in = !in;
    }
  }
  return in;
}

}  // namespace

double SizeField::at(double x, double y) const {
  const double gx = std::clamp((x - x0) / dx, 0.0, nx - 1.0 - 1e-9);
  const double gy = (y / pitch - std::floor(y / pitch)) * ny;
  const int i = static_cast<int>(gx), k = static_cast<int>(gy) % ny;
  const double a = gx - i, b = gy - std::floor(gy);
  const auto value = [&](int ix, int iy) {
    return values[static_cast<std::size_t>(ix * ny + iy % ny)];
  };
  return (1.0 - a) * ((1.0 - b) * value(i, k) + b * value(i, k + 1)) +
         a * ((1.0 - b) * value(i + 1, k) + b * value(i + 1, k + 1));
}

std::vector<WallSample> wall_samples(const ClosedOutline& outline) {
  std::vector<WallSample> samples;
  const auto add = [&](double u) {
    samples.push_back(
        {outline.point(u), 1.0 / std::max(outline.curvature(u), 1e-9 / outline.length())});
  };
  for (int k = 0; k < kWallSamples; ++k) add(outline.length() * k / kWallSamples);
  // The edges once more, closely: a small radius can lie between two samples.
  for (double nose : {0.0, outline.suction_length()}) {
    for (int k = -20; k <= 20; ++k) add(nose + outline.length() * k / (20.0 * kWallSamples));
  }
  for (double u : outline.kinks()) samples.push_back({outline.point(u), 0.0});
  return samples;
}

SizeField make_size_field(const std::vector<WallSample>& walls, const SizeRules& rules) {
  SizeField field;
  field.x0 = rules.inlet_x;
  field.pitch = rules.pitch;
  field.dx = rules.width / kGridPerWidth;
  field.nx = static_cast<int>(std::ceil((rules.outlet_x - rules.inlet_x) / field.dx)) + 1;
  field.ny = std::max(8, static_cast<int>(std::ceil(rules.pitch / field.dx)));
  field.dy = rules.pitch / field.ny;
  const auto sources = thinned(sources_of(walls, rules), rules.gradient);
  for (int i = 0; i < field.nx; ++i) {
    for (int k = 0; k < field.ny; ++k) {
      const Point p(field.x0 + i * field.dx, k * field.dy);
      double size = base_at(rules, p.x());
      for (const auto& source : sources) {
        if (rules.gradient * std::abs(source.at.x() - p.x()) + source.size >= size) continue;
        Point gap = source.at - p;
        gap.y() -= rules.pitch * std::round(gap.y() / rules.pitch);
        size = std::min(size, source.size + rules.gradient * gap.norm());
      }
      field.values.push_back(size);
    }
  }
  return field;
}

std::vector<char> fluid_mask(const SizeField& field, const std::vector<Point>& blade_polygon) {
  double top = -1e300, bottom = 1e300;
  for (const auto& p : blade_polygon) top = std::max(top, p.y()), bottom = std::min(bottom, p.y());
  std::vector<char> fluid;
  for (int i = 0; i < field.nx; ++i) {
    for (int k = 0; k < field.ny; ++k) {
      const double x = field.x0 + i * field.dx, y = k * field.dy;
      bool blade = false;
      const int first = static_cast<int>(std::floor((bottom - y) / field.pitch));
      const int last = static_cast<int>(std::ceil((top - y) / field.pitch));
      for (int lift = first; lift <= last && !blade; ++lift) {
        blade = inside(blade_polygon, {x, y + lift * field.pitch});
      }
      fluid.push_back(blade ? 0 : 1);
    }
  }
  return fluid;
}

double estimated_cells(const SizeField& field, const std::vector<char>& fluid) {
  double sum = 0.0;
  for (std::size_t i = 0; i < fluid.size(); ++i) {
    if (fluid[i]) sum += field.dx * field.dy / (field.values[i] * field.values[i]);
  }
  return sum;
}

}  // namespace falcate::mesh
