#include "mesh/structured.h"

#include <cassert>
#include <cstddef>
#include <cstdint>

namespace falcate::mesh {
namespace {

/// -1..1 from a counter: the splitmix64 mixer (Steele, Lea & Flood, OOPSLA 2014).
double scatter(std::uint64_t counter) {
  std::uint64_t z = (counter + 1) * 0x9e3779b97f4a7c15ULL;
  z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9ULL;
  z = (z ^ (z >> 27)) * 0x94d049bb133111ebULL;
  z ^= z >> 31;
  return 2.0 * static_cast<double>(z >> 11) * 0x1.0p-53 - 1.0;
}

bool splits(CellKind kind, int i, int j) {
  if (kind == CellKind::mixed) return (i / 2 + j / 2) % 2 == 0;
  return kind == CellKind::triangles;
}

}  // namespace

RawMesh structured(int ni, int nj, CellKind kind, const std::function<Point(double, double)>& map,
                   const std::array<PatchKind, 4>& sides, double pitch, double perturbation) {
  assert(ni >= 1 && nj >= 1);
  RawMesh raw;
  raw.pitch = pitch;
  const auto node = [&](int i, int j) { return j * (ni + 1) + i; };
  for (int j = 0; j <= nj; ++j) {
    for (int i = 0; i <= ni; ++i) {
      double a = i, b = j;
      if (i > 0 && i < ni && j > 0 && j < nj) {
        const auto counter = static_cast<std::uint64_t>(node(i, j));
        a += perturbation * scatter(2 * counter);
        b += perturbation * scatter(2 * counter + 1);
      }
      raw.nodes.push_back(map(a / ni, b / nj));
    }
  }
  for (int j = 0; j < nj; ++j) {
    for (int i = 0; i < ni; ++i) {
      const std::array<int, 4> quad{node(i, j), node(i + 1, j), node(i + 1, j + 1), node(i, j + 1)};
      if (!splits(kind, i, j)) {
        raw.cells.push_back(quad);
      } else if ((i + j) % 2 == 0) {
        raw.cells.push_back({quad[0], quad[1], quad[2], -1});
        raw.cells.push_back({quad[0], quad[2], quad[3], -1});
      } else {
        raw.cells.push_back({quad[0], quad[1], quad[3], -1});
        raw.cells.push_back({quad[1], quad[2], quad[3], -1});
      }
    }
  }
  for (int i = 0; i < ni; ++i) {
    const double middle = (i + 0.5) / ni;
    if (pitch > 0.0) continue;
    raw.boundary.push_back({node(i, 0), node(i + 1, 0), sides[0], map(middle, 0.0)});
    raw.boundary.push_back({node(i, nj), node(i + 1, nj), sides[2], map(middle, 1.0)});
  }
  for (int i = 0; i <= ni && pitch > 0.0; ++i) {
    const auto low = static_cast<std::size_t>(node(i, 0)),
               high = static_cast<std::size_t>(node(i, nj));
    raw.nodes[high] = raw.nodes[low] + Point(0.0, pitch);
    raw.periodic.push_back({node(i, 0), node(i, nj)});
  }
  for (int j = 0; j < nj; ++j) {
    const double middle = (j + 0.5) / nj;
    raw.boundary.push_back({node(ni, j), node(ni, j + 1), sides[1], map(1.0, middle)});
    raw.boundary.push_back({node(0, j), node(0, j + 1), sides[3], map(0.0, middle)});
  }
  return raw;
}

}  // namespace falcate::mesh
