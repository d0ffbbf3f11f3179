#include "mesh/curved_mesh.h"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <limits>
#include <map>
#include <numbers>
#include <utility>

namespace falcate::mesh {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }
int count(const auto& container) { return static_cast<int>(container.size()); }
int sides(const std::array<int, 4>& cell) { return cell[3] < 0 ? 3 : 4; }
double cross(const Point& a, const Point& b) { return a.x() * b.y() - a.y() * b.x(); }

/// Parameters of an even number of edges, each as long as the field asks at its place.
std::vector<double> edge_parameters(const BoundaryCurve& curve, const SizeField& size) {
  constexpr int kSamples = 2000;
  std::vector<double> at_parameter{curve.from}, edges{0.0};
  Point last = curve.point(curve.from);
  for (int i = 1; i <= kSamples; ++i) {
    const double t = curve.from + (curve.to - curve.from) * i / kSamples;
    const Point here = curve.point(t);
    const Point middle = 0.5 * (here + last);
    edges.push_back(edges.back() + (here - last).norm() / size.at(middle.x(), middle.y()));
    at_parameter.push_back(t);
    last = here;
  }
  const int pairs = std::max(1, static_cast<int>(std::lround(0.5 * edges.back())));
  std::vector<double> result{curve.from};
  std::size_t k = 0;
  for (int i = 1; i < 2 * pairs; ++i) {
    const double target = edges.back() * i / (2 * pairs);
    while (edges[k + 1] < target) ++k;
    const double share = (target - edges[k]) / (edges[k + 1] - edges[k]);
    result.push_back(at_parameter[k] + share * (at_parameter[k + 1] - at_parameter[k]));
  }
  result.push_back(curve.to);
  return result;
}

/// The upper partner of a lower periodic curve: backwards and one pitch up.
void lift(const BoundaryNodes& nodes, std::size_t lower, double pitch,
          std::vector<double>& parameters, std::vector<Point>& points) {
  parameters.assign(nodes.parameters[lower].rbegin(), nodes.parameters[lower].rend());
  points.assign(nodes.points[lower].rbegin(), nodes.points[lower].rend());
  for (auto& p : points) p = p + Point(0.0, pitch);
}

using EdgeKey = std::pair<int, int>;
EdgeKey key(int a, int b) { return {std::min(a, b), std::max(a, b)}; }

/// Boundary nodes of the mesher's cells in order, fluid on the left, from the node nearest `start`.
std::vector<int> boundary_loop(const MesherAnswer& answer, const Point& start) {
  std::map<EdgeKey, int> uses;
  for (const auto& cell : answer.cells) {
    for (int k = 0; k < sides(cell); ++k) ++uses[key(cell[at(k)], cell[at((k + 1) % sides(cell))])];
  }
  std::map<int, int> next;
  for (const auto& cell : answer.cells) {
    for (int k = 0; k < sides(cell); ++k) {
      const int a = cell[at(k)], b = cell[at((k + 1) % sides(cell))];
      if (uses[key(a, b)] == 1 && !next.emplace(a, b).second) {
        throw MeshError("the mesher left a hole in the passage");
      }
    }
  }
  if (next.empty()) throw MeshError("the mesher made no cells");
  int first = next.begin()->first;
  for (const auto& [node, follower] : next) {
    if ((answer.nodes[at(node)] - start).norm() < (answer.nodes[at(first)] - start).norm())
      first = node;
  }
  std::vector<int> loop;
  for (int node = first; loop.empty() || node != first; node = next.at(node)) {
    loop.push_back(node);
    if (loop.size() > next.size() || !next.contains(node)) {
      throw MeshError("the mesher left a hole in the passage");
    }
  }
  if (loop.size() != next.size()) throw MeshError("the mesher left a hole in the passage");
  return loop;
}

/// Cells turned counter-clockwise.
MesherAnswer oriented(MesherAnswer answer) {
  for (auto& cell : answer.cells) {
    double area = 0.0;
    for (int k = 1; k + 1 < sides(cell); ++k) {
      area += cross(answer.nodes[at(cell[at(k)])] - answer.nodes[at(cell[0])],
                    answer.nodes[at(cell[at(k + 1)])] - answer.nodes[at(cell[0])]);
    }
    if (area < 0.0) std::reverse(cell.begin(), cell.begin() + sides(cell));
  }
  return answer;
}

/// Boundary edges and periodic pairs; boundary nodes are numbered along the loop.
void add_boundary(const PassageBoundary& boundary, const BoundaryNodes& nodes, CurvedMesh& mesh) {
  std::vector<int> starts;
  int next = 0;
  for (const auto& points : nodes.points) {
    starts.push_back(next);
    next += count(points) - 1;
  }
  for (int c = 0; c < count(nodes.points); ++c) {
    const auto& t = nodes.parameters[at(c)];
    for (int i = 0; i + 1 < count(t); ++i) {
      const int first = starts[at(c)] + i;
      mesh.edges.push_back({first, (first + 1) % next, c, t[at(i)], t[at(i + 1)]});
    }
  }
  const auto pair = [&](std::size_t low, std::size_t high) {
    const int n = count(nodes.points[low]) - 1;
    for (int i = 0; i <= n; ++i) {
      mesh.periodic.push_back({(starts[low] + i) % next, (starts[high] + n - i) % next});
    }
  };
  pair(boundary.lower_downstream, boundary.upper_downstream);
  pair(boundary.lower_upstream, boundary.upper_upstream);
}

/// Inner nodes by place; cells begin with their least node and are sorted.
void put_in_order(const MesherAnswer& answer, const std::vector<int>& loop, CurvedMesh& mesh) {
  std::vector<int> place(answer.nodes.size(), -1), inner;
  for (int i = 0; i < count(loop); ++i) place[at(loop[at(i)])] = i;
  std::vector<char> used(answer.nodes.size(), 0);
  for (const auto& cell : answer.cells) {
    for (int k = 0; k < sides(cell); ++k) used[at(cell[at(k)])] = 1;
  }
  for (int n = 0; n < count(answer.nodes); ++n) {
    if (used[at(n)] && place[at(n)] < 0) inner.push_back(n);
  }
  std::sort(inner.begin(), inner.end(), [&](int a, int b) {
    const Point &p = answer.nodes[at(a)], &q = answer.nodes[at(b)];
    return std::pair{p.x(), p.y()} < std::pair{q.x(), q.y()};
  });
  for (int n : inner) {
    place[at(n)] = count(mesh.nodes);
    mesh.nodes.push_back(answer.nodes[at(n)]);
  }
  for (auto cell : answer.cells) {
    for (int k = 0; k < sides(cell); ++k) cell[at(k)] = place[at(cell[at(k)])];
    std::rotate(cell.begin(), std::min_element(cell.begin(), cell.begin() + sides(cell)),
                cell.begin() + sides(cell));
    mesh.cells.push_back(cell);
  }
  std::sort(mesh.cells.begin(), mesh.cells.end());
}

/// Corner quality that also tells apart long from square cells.
double corner_quality(const Point& a, const Point& b) {
  return 2.0 * cross(a, b) / (a.squaredNorm() + b.squaredNorm());
}

/// Along the walls the sides of a cell become, as it is split again and again, the curve itself:
/// what counts at a corner on the wall is the tangent as much as the chord.
class CellQuality {
 public:
  CellQuality(const CurvedMesh& mesh, const PassageBoundary& boundary) : mesh_(mesh) {
    for (const auto& edge : mesh.edges) {
      const auto& curve = boundary.curves[at(edge.curve)];
      if (!curve.kind || !is_wall(*curve.kind)) continue;
      const double h = 1e-4 * (edge.to - edge.from);
      const Point first = mesh.nodes[at(edge.first)], second = mesh.nodes[at(edge.second)];
      const double length = (second - first).norm();
      tangents_[{edge.first, edge.second}] =
          length * (curve.point(edge.from + h) - first).normalized();
      tangents_[{edge.second, edge.first}] =
          length * (curve.point(edge.to - h) - second).normalized();
    }
    wall_.assign(mesh.nodes.size(), 0);
    for (const auto& [edge, tangent] : tangents_) wall_[at(edge.first)] = 1;
  }

  double operator()(int c) const {
    const auto& cell = mesh_.cells[at(c)];
    const int n = sides(cell);
    double least = 1e300;
    for (int k = 0; k < n; ++k) {
      const int here = cell[at(k)], next = cell[at((k + 1) % n)], last = cell[at((k + n - 1) % n)];
      const Point a = mesh_.nodes[at(next)] - mesh_.nodes[at(here)];
      const Point b = mesh_.nodes[at(last)] - mesh_.nodes[at(here)];
      least = std::min(least, corner_quality(a, b));
      if (wall_[at(here)]) {
        least = std::min(least, corner_quality(along(here, next, a), along(here, last, b)));
      }
    }
    return n == 4 ? least : least / (0.5 * std::sqrt(3.0));
  }

 private:
  Point along(int from, int to, const Point& chord) const {
    const auto found = tangents_.find({from, to});
    return found == tangents_.end() ? chord : found->second;
  }

  const CurvedMesh& mesh_;
  std::map<std::pair<int, int>, Point> tangents_;
  std::vector<char> wall_;
};

/// Nodes that move together: an inner node, or a periodic pair.
struct Mover {
  std::vector<int> nodes, cells;
};

std::vector<Mover> movers_of(const CurvedMesh& mesh, const std::vector<char>& fixed) {
  std::vector<std::vector<int>> cells_at(mesh.nodes.size());
  for (int c = 0; c < count(mesh.cells); ++c) {
    for (int k = 0; k < sides(mesh.cells[at(c)]); ++k)
      cells_at[at(mesh.cells[at(c)][at(k)])].push_back(c);
  }
  std::vector<Mover> movers;
  std::vector<char> boundary(mesh.nodes.size(), 0);
  for (const auto& edge : mesh.edges) boundary[at(edge.first)] = 1;
  for (const auto& [low, high] : mesh.periodic) {
    if (fixed[at(low)] || fixed[at(high)]) continue;
    Mover mover{{low, high}, cells_at[at(low)]};
    mover.cells.insert(mover.cells.end(), cells_at[at(high)].begin(), cells_at[at(high)].end());
    movers.push_back(std::move(mover));
  }
  for (int n = 0; n < count(mesh.nodes); ++n) {
    if (!boundary[at(n)]) movers.push_back({{n}, cells_at[at(n)]});
  }
  return movers;
}

double worst_around(const CellQuality& quality, const Mover& mover) {
  double worst = 1e300;
  for (int c : mover.cells) worst = std::min(worst, quality(c));
  return worst;
}

/// Eight directions, step halved where none helps.
void improve(CurvedMesh& mesh, const CellQuality& quality, const Mover& mover, double good_enough) {
  double best = worst_around(quality, mover);
  if (best >= good_enough) return;
  double step = 0.0;
  const auto& first = mesh.cells[at(mover.cells.front())];
  for (int k = 0; k < sides(first); ++k) {
    step +=
        0.25 *
        (mesh.nodes[at(first[at(k)])] - mesh.nodes[at(first[at((k + 1) % sides(first))])]).norm() /
        sides(first);
  }
  const auto move = [&](const Point& by) {
    for (int n : mover.nodes) mesh.nodes[at(n)] += by;
  };
  for (int round = 0; round < 6; ++round) {
    bool better = false;
    for (int k = 0; k < 8; ++k) {
      const auto before = mesh.nodes[at(mover.nodes.front())];
      const Point by = step * Point(std::cos(0.25 * std::numbers::pi * k),
                                    std::sin(0.25 * std::numbers::pi * k));
      move(by);
      if (const double now = worst_around(quality, mover); now > best + 1e-9) {
        best = now;
        better = true;
      } else {
        move(before - mesh.nodes[at(mover.nodes.front())]);
      }
    }
    if (!better) step *= 0.5;
  }
}

}  // namespace

BoundaryNodes discretised(const PassageBoundary& boundary, const SizeField& size) {
  BoundaryNodes nodes;
  const std::size_t n = boundary.curves.size();
  nodes.parameters.resize(n), nodes.points.resize(n);
  for (std::size_t c = 0; c < n; ++c) {
    nodes.parameters[c] = edge_parameters(boundary.curves[c], size);
    for (double t : nodes.parameters[c]) nodes.points[c].push_back(boundary.curves[c].point(t));
  }
  const std::size_t down = boundary.lower_downstream, up = boundary.lower_upstream;
  nodes.points[down].front() = nodes.points[down - 1].back();
  nodes.points[up].back() = nodes.points[0].front();
  for (const auto& [low, high] :
       {std::pair{down, boundary.upper_downstream}, {up, boundary.upper_upstream}}) {
    lift(nodes, low, size.pitch, nodes.parameters[high], nodes.points[high]);
  }
  for (std::size_t c = down + 1; c < n; ++c) {  // whoever is not periodic joins its neighbours
    if (c == boundary.upper_downstream || c == boundary.upper_upstream || c == up) continue;
    nodes.points[c].front() = nodes.points[c - 1].back();
    if (c + 1 == boundary.upper_downstream || c + 1 == boundary.upper_upstream || c + 1 == up) {
      nodes.points[c].back() = nodes.points[c + 1].front();
    }
  }
  for (std::size_t c = 1; c < down; ++c) nodes.points[c].front() = nodes.points[c - 1].back();
  return nodes;
}

CurvedMesh curved_mesh(const PassageBoundary& boundary, const BoundaryNodes& nodes,
                       const MesherAnswer& raw_answer, double pitch) {
  const auto answer = oriented(raw_answer);
  const auto loop = boundary_loop(answer, nodes.points.front().front());
  CurvedMesh mesh;
  mesh.pitch = pitch;
  for (const auto& points : nodes.points) {
    mesh.nodes.insert(mesh.nodes.end(), points.begin(), points.end() - 1);
  }
  if (loop.size() != mesh.nodes.size())
    throw MeshError("the mesher changed the passage's boundary");
  // The full-quad recombination keeps every second node and puts the others on the chord between.
  for (std::size_t i = 0; i < loop.size(); i += 2) {
    const double edge = (mesh.nodes[i] - mesh.nodes[i + 1]).norm();
    if ((answer.nodes[at(loop[i])] - mesh.nodes[i]).norm() > 1e-3 * edge) {
      throw MeshError("the mesher moved the passage's boundary");
    }
  }
  put_in_order(answer, loop, mesh);
  add_boundary(boundary, nodes, mesh);
  return mesh;
}

CurvedMesh split_in_four(const CurvedMesh& mesh, const PassageBoundary& boundary) {
  CurvedMesh fine;
  fine.pitch = mesh.pitch;
  fine.nodes = mesh.nodes;
  fine.periodic = mesh.periodic;
  std::map<EdgeKey, int> middles;
  const auto add = [&](int a, int b, const Point& place) {
    middles[key(a, b)] = count(fine.nodes);
    fine.nodes.push_back(place);
    return count(fine.nodes) - 1;
  };
  std::map<int, int> upper;
  for (const auto& [low, high] : mesh.periodic) upper[low] = high;
  for (const auto& edge : mesh.edges) {
    const double half = 0.5 * (edge.from + edge.to);
    const auto& curve = boundary.curves[at(edge.curve)];
    const bool wall = curve.kind && is_wall(*curve.kind);
    const Point chord = 0.5 * (mesh.nodes[at(edge.first)] + mesh.nodes[at(edge.second)]);
    const int middle = add(edge.first, edge.second, wall ? curve.point(half) : chord);
    fine.edges.push_back({edge.first, middle, edge.curve, edge.from, half});
    fine.edges.push_back({middle, edge.second, edge.curve, half, edge.to});
  }
  for (const auto& edge : mesh.edges) {
    if (boundary.curves[at(edge.curve)].kind || !upper.contains(edge.first) ||
        !upper.contains(edge.second)) {
      continue;
    }
    const int low = middles.at(key(edge.first, edge.second));
    const int high = middles.at(key(upper[edge.first], upper[edge.second]));
    fine.nodes[at(high)] = fine.nodes[at(low)] + Point(0.0, mesh.pitch);
    fine.periodic.push_back({low, high});
  }
  const auto middle_of = [&](int a, int b) {
    const auto found = middles.find(key(a, b));
    if (found != middles.end()) return found->second;
    return add(a, b, 0.5 * (mesh.nodes[at(a)] + mesh.nodes[at(b)]));
  };
  for (const auto& cell : mesh.cells) {
    const auto [a, b, c, d] = cell;
    const int ab = middle_of(a, b), bc = middle_of(b, c);
    if (d < 0) {
      const int ca = middle_of(c, a);
      for (const auto& child :
           {std::array{a, ab, ca, -1}, {ab, b, bc, -1}, {ca, bc, c, -1}, {ab, bc, ca, -1}}) {
        fine.cells.push_back(child);
      }
      continue;
    }
    const int cd = middle_of(c, d), da = middle_of(d, a), m = count(fine.nodes);
    const auto& p = fine.nodes;
    const Point centre = 0.5 * (p[at(ab)] + p[at(bc)] + p[at(cd)] + p[at(da)]) -
                         0.25 * (p[at(a)] + p[at(b)] + p[at(c)] + p[at(d)]);
    fine.nodes.push_back(centre);
    for (const auto& child :
         {std::array{a, ab, m, da}, {ab, b, bc, m}, {m, bc, c, cd}, {da, m, cd, d}}) {
      fine.cells.push_back(child);
    }
  }
  return fine;
}

double scaled_jacobian(const std::vector<Point>& nodes, const std::array<int, 4>& cell) {
  const int n = sides(cell);
  double least = 1e300;
  for (int k = 0; k < n; ++k) {
    const Point& here = nodes[at(cell[at(k)])];
    const Point a = nodes[at(cell[at((k + 1) % n)])] - here;
    const Point b = nodes[at(cell[at((k + n - 1) % n)])] - here;
    least = std::min(least, cross(a, b) / (a.norm() * b.norm()));
  }
  return n == 4 ? least : least / (0.5 * std::sqrt(3.0));
}

void smooth(CurvedMesh& mesh, const PassageBoundary& boundary) {
  const CellQuality quality(mesh, boundary);
  std::vector<char> fixed(mesh.nodes.size(), 0);
  std::map<int, int> edges_at;
  std::vector<char> on_periodic(mesh.nodes.size(), 0);
  for (const auto& [low, high] : mesh.periodic) on_periodic[at(low)] = on_periodic[at(high)] = 1;
  for (const auto& edge : mesh.edges) {  // also where a wall or the inlet meets a periodic line
    const bool free = on_periodic[at(edge.first)] && on_periodic[at(edge.second)];
    if (!free) fixed[at(edge.first)] = fixed[at(edge.second)] = 1;
  }
  const auto movers = movers_of(mesh, fixed);
  for (int sweep = 0; sweep < 12; ++sweep) {
    for (const auto& mover : movers) improve(mesh, quality, mover, 0.65);
  }
  for (const auto& [low, high] : mesh.periodic) {
    mesh.nodes[at(high)] = mesh.nodes[at(low)] + Point(0.0, mesh.pitch);
  }
}

RawMesh raw_mesh(const CurvedMesh& mesh, const PassageBoundary& boundary) {
  RawMesh raw;
  raw.pitch = mesh.pitch;
  raw.nodes = mesh.nodes;
  raw.cells = mesh.cells;
  raw.periodic = mesh.periodic;
  for (const auto& edge : mesh.edges) {
    const auto& curve = boundary.curves[at(edge.curve)];
    if (!curve.kind) continue;
    const Point chord = 0.5 * (mesh.nodes[at(edge.first)] + mesh.nodes[at(edge.second)]);
    const Point middle = is_wall(*curve.kind) ? curve.point(0.5 * (edge.from + edge.to)) : chord;
    raw.boundary.push_back({edge.first, edge.second, *curve.kind, middle});
  }
  return raw;
}

}  // namespace falcate::mesh
