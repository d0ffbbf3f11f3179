#include "mesh/passage_mesh.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <map>
#include <tuple>
#include <utility>

namespace falcate::mesh {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }
int count(const auto& container) { return static_cast<int>(container.size()); }
double cross(const Point& a, const Point& b) { return a.x() * b.y() - a.y() * b.x(); }
int sides(const std::array<int, 4>& cell) { return cell[3] < 0 ? 3 : 4; }

/// One side of one cell, seen counter-clockwise; `low` and `high` make the key that sides share.
struct CellSide {
  int low, high, cell, first, second;
};

/// A face before it is put in its place: cells in raw numbering.
struct Link {
  int left = -1, right = -1;
  std::array<int, 2> nodes{};
  double shift = 0.0;  // added to the right cell's y to see it from the left
  int boundary = -1;   // index in raw.boundary
};

void check_nodes(const RawMesh& raw) {
  for (int n = 0; n < count(raw.nodes); ++n) {
    if (!raw.nodes[at(n)].allFinite()) {
      throw MeshError(fmt::format("mesh node {} has a coordinate that is not a number", n));
    }
  }
}

void check_cell_nodes(const RawMesh& raw, int c) {
  const auto& cell = raw.cells[at(c)];
  for (int k = 0; k < sides(cell); ++k) {
    const int node = cell[at(k)];
    if (node < 0 || node >= count(raw.nodes)) {
      throw MeshError(fmt::format("mesh cell {} names node {}, but there are nodes 0 to {} only", c,
                                  node, count(raw.nodes) - 1));
    }
    for (int other = 0; other < k; ++other) {
      if (cell[at(other)] == node) {
        throw MeshError(fmt::format("mesh cell {} names node {} twice", c, node));
      }
    }
  }
}

/// Area of the triangle a, b, c; positive counter-clockwise.
double triangle_area(const Point& a, const Point& b, const Point& c) {
  return 0.5 * cross(b - a, c - a);
}

/// A quadrilateral is simple and counter-clockwise if one of its diagonals cuts it into two
/// counter-clockwise triangles.
bool is_sound(const RawMesh& raw, const std::array<int, 4>& cell) {
  const auto p = [&](int k) -> const Point& { return raw.nodes[at(cell[at(k)])]; };
  if (sides(cell) == 3) return triangle_area(p(0), p(1), p(2)) > 0.0;
  return (triangle_area(p(0), p(1), p(2)) > 0.0 && triangle_area(p(0), p(2), p(3)) > 0.0) ||
         (triangle_area(p(0), p(1), p(3)) > 0.0 && triangle_area(p(1), p(2), p(3)) > 0.0);
}

void check_cells(const RawMesh& raw) {
  if (raw.cells.empty()) throw MeshError("the mesh has no cells");
  for (int c = 0; c < count(raw.cells); ++c) {
    check_cell_nodes(raw, c);
    const auto& cell = raw.cells[at(c)];
    if (!is_sound(raw, cell)) {
      const Point& corner = raw.nodes[at(cell[0])];
      throw MeshError(
          fmt::format("mesh cell {} near x = {:.6g} m, y = {:.6g} m is turned inside out", c,
                      corner.x(), corner.y()));
    }
  }
}

/// For each lower node its upper partner, -1 elsewhere.
std::vector<int> periodic_partners(const RawMesh& raw) {
  std::vector<int> upper(raw.nodes.size(), -1);
  if (!raw.periodic.empty() && !(raw.pitch > 0.0)) {
    throw MeshError("the mesh has periodic nodes, but its pitch is not positive");
  }
  for (const auto& [low, high] : raw.periodic) {
    if (low < 0 || high < 0 || low >= count(raw.nodes) || high >= count(raw.nodes)) {
      throw MeshError(
          fmt::format("periodic pair {} and {} names a node that does not exist", low, high));
    }
    const Point gap = raw.nodes[at(high)] - raw.nodes[at(low)] - Point(0.0, raw.pitch);
    if (gap.norm() > 1e-10 * raw.pitch) {
      throw MeshError(
          fmt::format("periodic nodes {} and {} are not one pitch apart: they miss by {:.3g} m",
                      low, high, gap.norm()));
    }
    upper[at(low)] = high;
  }
  return upper;
}

std::vector<CellSide> sorted_sides(const RawMesh& raw) {
  std::vector<CellSide> result;
  result.reserve(4 * raw.cells.size());
  for (int c = 0; c < count(raw.cells); ++c) {
    const auto& cell = raw.cells[at(c)];
    for (int k = 0; k < sides(cell); ++k) {
      const int a = cell[at(k)], b = cell[at((k + 1) % sides(cell))];
      result.push_back({std::min(a, b), std::max(a, b), c, a, b});
    }
  }
  std::sort(result.begin(), result.end(), [](const CellSide& a, const CellSide& b) {
    return std::tie(a.low, a.high, a.cell) < std::tie(b.low, b.high, b.cell);
  });
  return result;
}

using EdgeMap = std::map<std::pair<int, int>, int>;
std::pair<int, int> key(int a, int b) { return {std::min(a, b), std::max(a, b)}; }

/// Pairs sides that two cells share; what only one cell has is left in `single`.
std::vector<Link> shared_sides(const RawMesh& raw, std::vector<CellSide>& single) {
  const auto all = sorted_sides(raw);
  std::vector<Link> links;
  for (std::size_t i = 0; i < all.size();) {
    std::size_t end = i + 1;
    while (end < all.size() && all[end].low == all[i].low && all[end].high == all[i].high) ++end;
    if (end - i == 1) {
      single.push_back(all[i]);
    } else if (end - i == 2 && all[i].first == all[i + 1].second) {
      links.push_back({all[i].cell, all[i + 1].cell, {all[i].first, all[i].second}, 0.0, -1});
    } else {
      throw MeshError(fmt::format("mesh cells overlap at the side between nodes {} and {}",
                                  all[i].low, all[i].high));
    }
    i = end;
  }
  return links;
}

EdgeMap boundary_edges(const RawMesh& raw) {
  EdgeMap marked;
  for (int b = 0; b < count(raw.boundary); ++b) {
    const auto& edge = raw.boundary[at(b)];
    if (!marked.emplace(key(edge.first, edge.second), b).second) {
      throw MeshError(fmt::format("the boundary side between nodes {} and {} is marked twice",
                                  edge.first, edge.second));
    }
    if (!edge.midpoint.allFinite()) {
      throw MeshError(fmt::format(
          "the boundary side between nodes {} and {} has a midpoint that is not a number",
          edge.first, edge.second));
    }
  }
  return marked;
}

/// Boundary and periodic faces from the sides that only one cell has.
void add_outer_links(const RawMesh& raw, const std::vector<CellSide>& single,
                     std::vector<Link>& links) {
  const auto upper = periodic_partners(raw);
  auto marked = boundary_edges(raw);
  EdgeMap open;
  for (int s = 0; s < count(single); ++s) {
    const auto& side = single[at(s)];
    const auto found = marked.find({side.low, side.high});
    if (found == marked.end()) {
      open.emplace(std::pair{side.low, side.high}, s);
      continue;
    }
    links.push_back({side.cell, -1, {side.first, side.second}, 0.0, found->second});
    marked.erase(found);
  }
  if (!marked.empty()) {
    throw MeshError(
        fmt::format("the boundary side between nodes {} and {} is not a side of the mesh's edge",
                    marked.begin()->first.first, marked.begin()->first.second));
  }
  std::vector<char> used(single.size(), 0);
  for (const auto& [nodes, s] : open) {
    const int a = upper[at(nodes.first)], b = upper[at(nodes.second)];
    if (a < 0 || b < 0) continue;
    const auto partner = open.find(key(a, b));
    if (partner == open.end() || partner->second == s) continue;
    const auto& low = single[at(s)];
    const auto& high = single[at(partner->second)];
    // Seen from the lower cell its neighbour across the line lies one pitch further down.
    links.push_back({low.cell, high.cell, {low.first, low.second}, -raw.pitch, -1});
    used[at(s)] = used[at(partner->second)] = 1;
  }
  for (int s = 0; s < count(single); ++s) {
    const auto& side = single[at(s)];
    if (!used[at(s)] && open.contains({side.low, side.high})) {
      const Point middle = 0.5 * (raw.nodes[at(side.first)] + raw.nodes[at(side.second)]);
      throw MeshError(
          fmt::format("the mesh side at x = {:.6g} m, y = {:.6g} m is on the edge of the mesh, but "
                      "neither marked "
                      "as boundary nor periodic",
                      middle.x(), middle.y()));
    }
  }
}

using Graph = std::vector<std::vector<int>>;

Graph cell_graph(int cells, const std::vector<Link>& links) {
  Graph graph(at(cells));
  for (const auto& link : links) {
    if (link.right < 0 || link.right == link.left) continue;
    graph[at(link.left)].push_back(link.right);
    graph[at(link.right)].push_back(link.left);
  }
  for (int c = 0; c < cells; ++c) {
    auto& row = graph[at(c)];
    std::sort(row.begin(), row.end());
    row.erase(std::unique(row.begin(), row.end()), row.end());
    std::stable_sort(row.begin(), row.end(),
                     [&](int a, int b) { return graph[at(a)].size() < graph[at(b)].size(); });
  }
  return graph;
}

/// Breadth-first order of what can be reached from `start` and is not yet `seen`.
std::vector<int> breadth_first(const Graph& graph, int start, std::vector<char>& seen) {
  std::vector<int> order{start};
  seen[at(start)] = 1;
  for (std::size_t head = 0; head < order.size(); ++head) {
    for (int next : graph[at(order[head])]) {
      if (seen[at(next)]) continue;
      seen[at(next)] = 1;
      order.push_back(next);
    }
  }
  return order;
}

/// Reverse Cuthill-McKee: new place -> old cell. A few sweeps to the far end find a good start.
/// Source: Cuthill & McKee, Proc. 24th ACM National Conference (1969); reversal by A. George
/// (1971).
std::vector<int> reverse_cuthill_mckee(const Graph& graph) {
  std::vector<int> order;
  std::vector<char> seen(graph.size(), 0);
  for (int c = 0; c < count(graph); ++c) {
    if (seen[at(c)]) continue;
    int start = c;
    for (int sweep = 0; sweep < 3; ++sweep) {
      auto trial = seen;
      start = breadth_first(graph, start, trial).back();
    }
    const auto part = breadth_first(graph, start, seen);
    order.insert(order.end(), part.begin(), part.end());
  }
  std::reverse(order.begin(), order.end());
  return order;
}

struct AreaAndCentroid {
  double area;
  Point centroid;
};

/// The polygon of a cell; sums are taken from its first node to keep round-off small.
AreaAndCentroid polygon_of(const std::vector<Point>& nodes, const std::array<int, 4>& cell) {
  const Point origin = nodes[at(cell[0])];
  double area = 0.0;
  Point moment(0.0, 0.0);
  for (int k = 1; k + 1 < sides(cell); ++k) {
    const Point a = nodes[at(cell[at(k)])] - origin, b = nodes[at(cell[at(k + 1)])] - origin;
    const double part = 0.5 * cross(a, b);
    area += part;
    moment += part / 3.0 * (a + b);
  }
  return {area, origin + moment / area};
}

/// Adds the segment between the chord of a boundary face and the parabola through its ends and its
/// midpoint: area 2/3 chord x sagitta (a circular segment to the third order of the sagitta),
/// centroid 2/5 of the sagitta off the chord.
void add_segment(const Point& first, const Point& second, const Point& midpoint,
                 AreaAndCentroid& cell) {
  const Point chord = second - first, bulge = midpoint - 0.5 * (first + second);
  const double segment = -2.0 / 3.0 * cross(chord, bulge);  // positive where the cell grows
  const Point centroid = 0.5 * (first + second) + 0.4 * bulge;
  const double total = cell.area + segment;
  cell.centroid = (cell.area * cell.centroid + segment * centroid) / total;
  cell.area = total;
}

/// Orders boundary edges along the curve: each chain of joined edges from its upstream end on
/// (least x, then least y), chains in the order of their starts.
std::vector<Link> along_chains(const RawMesh& raw, std::vector<Link> edges) {
  const auto upstream = [&](const Point& a, const Point& b) {
    return std::pair{a.x(), a.y()} < std::pair{b.x(), b.y()};
  };
  std::map<int, std::vector<int>> at_node;
  for (int e = 0; e < count(edges); ++e) {
    for (int node : edges[at(e)].nodes) at_node[node].push_back(e);
  }
  std::vector<int> starts;  // free ends first, then any node, which serves closed curves
  for (const auto& [node, list] : at_node) starts.push_back(node);
  std::sort(starts.begin(), starts.end(), [&](int a, int b) {
    const bool inner_a = at_node[a].size() > 1, inner_b = at_node[b].size() > 1;
    if (inner_a != inner_b) return inner_b;
    return upstream(raw.nodes[at(a)], raw.nodes[at(b)]);
  });
  std::vector<char> used(edges.size(), 0);
  std::vector<Link> ordered;
  for (int node : starts) {
    for (bool more = true; more;) {
      more = false;
      for (int e : at_node[node]) {
        if (used[at(e)]) continue;
        used[at(e)] = 1;
        ordered.push_back(edges[at(e)]);
        const auto& ends = edges[at(e)].nodes;
        node = ends[0] == node ? ends[1] : ends[0];
        more = true;
        break;
      }
    }
  }
  return ordered;
}

std::vector<Link> in_patch_order(const RawMesh& raw, PatchKind kind, std::vector<Link> edges) {
  if (kind != PatchKind::inlet && kind != PatchKind::outlet)
    return along_chains(raw, std::move(edges));
  std::stable_sort(edges.begin(), edges.end(), [&](const Link& a, const Link& b) {
    return raw.boundary[at(a.boundary)].midpoint.y() < raw.boundary[at(b.boundary)].midpoint.y();
  });
  return edges;
}

PassageMesh::Face face_of(const RawMesh& raw, const Link& link) {
  PassageMesh::Face face;
  face.left = link.left;
  face.right = link.right;
  face.nodes = link.nodes;
  const Point &a = raw.nodes[at(link.nodes[0])], &b = raw.nodes[at(link.nodes[1])];
  face.normal = Point(b.y() - a.y(), a.x() - b.x());
  face.midpoint =
      link.boundary < 0 ? Point(0.5 * (a + b)) : raw.boundary[at(link.boundary)].midpoint;
  face.right_shift = Point(0.0, link.shift);
  return face;
}

/// Turns a link round where its right cell has the lower number, so that faces sort by left cell.
void turn_to_lower_cell(const std::vector<int>& upper_of, const std::vector<int>& lower_of,
                        Link& link) {
  if (link.right < 0 || link.left <= link.right) return;
  std::swap(link.left, link.right);
  std::swap(link.nodes[0], link.nodes[1]);
  if (link.shift != 0.0) {
    const auto& partner = link.shift < 0.0 ? upper_of : lower_of;
    for (int& node : link.nodes) node = partner[at(node)];
    link.shift = -link.shift;
  }
}

}  // namespace

PassageMesh PassageMesh::build(const RawMesh& raw) {
  check_nodes(raw);
  check_cells(raw);
  for (const auto& edge : raw.boundary) {
    if (std::min(edge.first, edge.second) < 0 ||
        std::max(edge.first, edge.second) >= count(raw.nodes)) {
      throw MeshError(
          fmt::format("the boundary side between nodes {} and {} names a node that does not exist",
                      edge.first, edge.second));
    }
  }
  std::vector<CellSide> single;
  auto links = shared_sides(raw, single);
  add_outer_links(raw, single, links);

  PassageMesh mesh;
  mesh.pitch_ = raw.pitch;
  mesh.nodes_ = raw.nodes;
  mesh.raw_index_ = reverse_cuthill_mckee(cell_graph(count(raw.cells), links));
  std::vector<int> place(raw.cells.size());
  for (int c = 0; c < count(raw.cells); ++c) place[at(mesh.raw_index_[at(c)])] = c;
  for (int c : mesh.raw_index_) {
    const auto [area, centroid] = polygon_of(raw.nodes, raw.cells[at(c)]);
    mesh.cells_.push_back(raw.cells[at(c)]);
    mesh.areas_.push_back(area);
    mesh.centroids_.push_back(centroid);
  }

  const auto upper_of = periodic_partners(raw);
  std::vector<int> lower_of(raw.nodes.size(), -1);
  for (const auto& [low, high] : raw.periodic) lower_of[at(high)] = low;
  std::map<PatchKind, std::vector<Link>> outer;
  std::vector<Link> inner;
  for (auto& link : links) {
    link.left = place[at(link.left)];
    if (link.right >= 0) link.right = place[at(link.right)];
    turn_to_lower_cell(upper_of, lower_of, link);
    if (link.boundary < 0) {
      inner.push_back(link);
    } else {
      outer[raw.boundary[at(link.boundary)].kind].push_back(link);
    }
  }
  std::stable_sort(inner.begin(), inner.end(), [](const Link& a, const Link& b) {
    return std::pair{a.left, a.right} < std::pair{b.left, b.right};
  });
  for (const auto& link : inner) mesh.faces_.push_back(face_of(raw, link));
  mesh.interior_face_count_ = count(inner);
  for (auto& [kind, edges] : outer) {
    mesh.patches_.push_back({kind, count(mesh.faces_), count(edges)});
    for (const auto& link : in_patch_order(raw, kind, std::move(edges))) {
      mesh.faces_.push_back(face_of(raw, link));
      AreaAndCentroid cell{mesh.areas_[at(link.left)], mesh.centroids_[at(link.left)]};
      const auto& face = mesh.faces_.back();
      add_segment(raw.nodes[at(face.nodes[0])], raw.nodes[at(face.nodes[1])], face.midpoint, cell);
      if (!(cell.area > 0.0)) {
        throw MeshError(
            fmt::format("the curved wall at x = {:.6g} m, y = {:.6g} m swallows its mesh cell",
                        face.midpoint.x(), face.midpoint.y()));
      }
      mesh.areas_[at(link.left)] = cell.area;
      mesh.centroids_[at(link.left)] = cell.centroid;
    }
  }
  return mesh;
}

}  // namespace falcate::mesh
