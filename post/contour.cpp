#include "post/contour.h"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <unordered_map>
#include <utility>

#include "post/node_values.h"
#include "post/output_error.h"

namespace falcate::post {
namespace {

using Edge = std::array<int, 2>;

/// Edges that two parts share run both ways and cancel; what is left bounds the whole.
std::vector<Edge> without_shared(std::vector<Edge> edges) {
  const auto undirected = [](const Edge& e) {
    return Edge{std::min(e[0], e[1]), std::max(e[0], e[1])};
  };
  std::sort(edges.begin(), edges.end(), [&](const Edge& a, const Edge& b) {
    return std::pair(undirected(a), a) < std::pair(undirected(b), b);
  });
  std::vector<Edge> left;
  for (std::size_t i = 0; i < edges.size();) {
    std::size_t end = i;
    int balance = 0;
    while (end < edges.size() && undirected(edges[end]) == undirected(edges[i])) {
      balance += edges[end][0] < edges[end][1] ? 1 : -1;
      ++end;
    }
    const Edge forward = undirected(edges[i]);
    for (; balance > 0; --balance) left.push_back(forward);
    for (; balance < 0; ++balance) left.push_back({forward[1], forward[0]});
    i = end;
  }
  return left;
}

/// Directed edges joined end to end: open chains first, then closed ones (first = last).
std::vector<std::vector<int>> chains(std::vector<Edge> edges) {
  std::sort(edges.begin(), edges.end());
  std::unordered_map<int, int> incoming;
  for (const Edge& e : edges) ++incoming[e[1]];
  std::vector<char> used(edges.size(), 0);
  const auto next_from = [&](int point) {
    auto it = std::lower_bound(edges.begin(), edges.end(), Edge{point, -1});
    while (it != edges.end() && (*it)[0] == point &&
           used[static_cast<std::size_t>(it - edges.begin())])
      ++it;
    return it != edges.end() && (*it)[0] == point ? it - edges.begin() : std::ptrdiff_t{-1};
  };
  std::vector<std::vector<int>> out;
  const auto follow = [&](std::size_t first) {
    std::vector<int> chain{edges[first][0]};
    for (auto e = static_cast<std::ptrdiff_t>(first); e >= 0;) {
      used[static_cast<std::size_t>(e)] = 1;
      chain.push_back(edges[static_cast<std::size_t>(e)][1]);
      if (chain.back() == chain.front()) break;
      e = next_from(chain.back());
    }
    out.push_back(std::move(chain));
  };
  for (std::size_t i = 0; i < edges.size(); ++i) {
    if (!used[i] && !incoming.contains(edges[i][0])) follow(i);
  }
  for (std::size_t i = 0; i < edges.size(); ++i) {
    if (!used[i]) follow(i);
  }
  return out;
}

double distance_to_segment(const mesh::Point& p, const mesh::Point& a, const mesh::Point& b) {
  const mesh::Point along = b - a;
  const double length2 = along.squaredNorm();
  const double t = length2 > 0.0 ? std::clamp((p - a).dot(along) / length2, 0.0, 1.0) : 0.0;
  return (p - a - t * along).norm();
}

void keep_far_points(const Polyline& line, std::size_t first, std::size_t last, double tolerance,
                     std::vector<char>& keep) {
  std::vector<std::pair<std::size_t, std::size_t>> open{{first, last}};
  while (!open.empty()) {
    const auto [from, to] = open.back();
    open.pop_back();
    double greatest = tolerance;
    std::size_t split = 0;
    for (std::size_t i = from + 1; i < to; ++i) {
      const double distance = distance_to_segment(line[i], line[from], line[to]);
      if (distance > greatest) {
        greatest = distance;
        split = i;
      }
    }
    if (split == 0) continue;
    keep[split] = 1;
    open.push_back({from, split});
    open.push_back({split, to});
  }
}

}  // namespace

Polyline simplified(const Polyline& line, double tolerance) {
  if (line.size() < 3) return line;
  std::vector<char> keep(line.size(), 0);
  keep.front() = keep.back() = 1;
  std::size_t far = line.size() - 1;
  if (line.front() == line.back()) {
    for (std::size_t i = 0; i < line.size(); ++i) {
      if ((line[i] - line[0]).norm() > (line[far] - line[0]).norm()) far = i;
    }
    keep[far] = 1;
    keep_far_points(line, far, line.size() - 1, tolerance, keep);
  }
  keep_far_points(line, 0, far, tolerance, keep);
  Polyline out;
  for (std::size_t i = 0; i < line.size(); ++i) {
    if (keep[i]) out.push_back(line[i]);
  }
  return out;
}

/// The mesh cut at one level: points (corners and crossings) and the edges of the parts above.
struct ContourField::Cut {
  std::vector<mesh::Point> crossings;
  std::unordered_map<std::uint64_t, int> crossing_of_edge;
  std::vector<Edge> region, level;
};

ContourField::ContourField(const mesh::PassageMesh& mesh, const std::vector<double>& cell_values)
    : mesh_(&mesh) {
  for (std::size_t c = 0; c < cell_values.size(); ++c) {
    if (!std::isfinite(cell_values[c])) {
      throw OutputError(fmt::format(
          "cell {} of the flow field holds no finite number, so the picture cannot be drawn", c));
    }
  }
  values_ = node_values(mesh, cell_values);
  values_.insert(values_.end(), cell_values.begin(), cell_values.end());
  places_ = mesh.nodes();
  places_.insert(places_.end(), mesh.centroids().begin(), mesh.centroids().end());
  const auto [low, high] = std::minmax_element(cell_values.begin(), cell_values.end());
  least_ = *low;
  greatest_ = *high;
}

ContourField::Cut ContourField::cut(double level) const {
  Cut cut;
  const auto value = [&](int v) { return values_[static_cast<std::size_t>(v)]; };
  const auto crossing = [&](int a, int b) {
    const auto low = static_cast<std::uint64_t>(std::min(a, b));
    const auto high = static_cast<std::uint64_t>(std::max(a, b));
    const int next = static_cast<int>(places_.size() + cut.crossings.size());
    const auto [it, is_new] = cut.crossing_of_edge.try_emplace(low << 32 | high, next);
    if (is_new) {
      const mesh::Point& p = places_[low];
      const double t = (level - values_[low]) / (values_[high] - values_[low]);
      cut.crossings.push_back(p + t * (places_[high] - p));
    }
    return it->second;
  };
  const auto add_triangle = [&](const std::array<int, 3>& corners) {
    std::vector<int> part;
    int leaves = -1, enters = -1;
    for (std::size_t i = 0; i < 3; ++i) {
      const int a = corners[i], b = corners[(i + 1) % 3];
      const bool above_a = value(a) >= level, above_b = value(b) >= level;
      if (above_a) part.push_back(a);
      if (above_a == above_b) continue;
      part.push_back(crossing(a, b));
      (above_a ? leaves : enters) = part.back();
    }
    for (std::size_t i = 0; i < part.size(); ++i) {
      cut.region.push_back({part[i], part[(i + 1) % part.size()]});
    }
    if (leaves >= 0) cut.level.push_back({leaves, enters});
  };
  const int node_count = static_cast<int>(mesh_->nodes().size());
  for (int c = 0; c < mesh_->cell_count(); ++c) {
    const auto& nodes = mesh_->cells()[static_cast<std::size_t>(c)];
    const std::size_t corners = nodes[3] < 0 ? 3 : 4;
    for (std::size_t i = 0; i < corners; ++i) {
      add_triangle({nodes[i], nodes[(i + 1) % corners], node_count + c});
    }
  }
  return cut;
}

std::vector<Polyline> ContourField::region_above(double level, double tolerance) const {
  const Cut parts = cut(level);
  std::vector<Polyline> loops;
  for (const auto& chain : chains(without_shared(parts.region))) {
    Polyline line;
    for (const int v : chain) {
      const auto i = static_cast<std::size_t>(v);
      line.push_back(i < places_.size() ? places_[i] : parts.crossings[i - places_.size()]);
    }
    line = simplified(line, tolerance);
    line.pop_back();
    if (line.size() >= 3) loops.push_back(std::move(line));
  }
  return loops;
}

std::vector<Polyline> ContourField::level_lines(double level, double tolerance) const {
  const Cut parts = cut(level);
  std::vector<Polyline> lines;
  for (const auto& chain : chains(parts.level)) {
    Polyline line;
    for (const int v : chain) {
      line.push_back(parts.crossings[static_cast<std::size_t>(v) - places_.size()]);
    }
    lines.push_back(simplified(line, tolerance));
  }
  return lines;
}

}  // namespace falcate::post
