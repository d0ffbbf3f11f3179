#include "post/node_values.h"

#include <algorithm>
#include <cassert>
#include <cstddef>

namespace falcate::post {
namespace {

int nearest_node(const mesh::PassageMesh& mesh, int cell, const mesh::Point& place) {
  int best = -1;
  double least = 0.0;
  for (const int node : mesh.cells()[static_cast<std::size_t>(cell)]) {
    if (node < 0) continue;
    const double distance = (mesh.nodes()[static_cast<std::size_t>(node)] - place).norm();
    if (best < 0 || distance < least) {
      best = node;
      least = distance;
    }
  }
  return best;
}

}  // namespace

std::vector<std::array<int, 2>> periodic_node_pairs(const mesh::PassageMesh& mesh) {
  std::vector<std::array<int, 2>> pairs;
  for (int f = 0; f < mesh.interior_face_count(); ++f) {
    const auto& face = mesh.faces()[static_cast<std::size_t>(f)];
    if (face.right_shift.isZero()) continue;
    for (const int node : face.nodes) {
      const mesh::Point place = mesh.nodes()[static_cast<std::size_t>(node)] - face.right_shift;
      const int partner = nearest_node(mesh, face.right, place);
      if (face.right_shift.y() > 0.0) {
        pairs.push_back({node, partner});
      } else {
        pairs.push_back({partner, node});
      }
    }
  }
  std::sort(pairs.begin(), pairs.end());
  pairs.erase(std::unique(pairs.begin(), pairs.end()), pairs.end());
  return pairs;
}

std::vector<double> node_values(const mesh::PassageMesh& mesh, const std::vector<double>& cells) {
  assert(cells.size() == mesh.cells().size());
  std::vector<double> sum(mesh.nodes().size(), 0.0), weight(mesh.nodes().size(), 0.0);
  for (std::size_t c = 0; c < cells.size(); ++c) {
    for (const int node : mesh.cells()[c]) {
      if (node < 0) continue;
      const auto n = static_cast<std::size_t>(node);
      const double w = 1.0 / (mesh.nodes()[n] - mesh.centroids()[c]).norm();
      sum[n] += w * cells[c];
      weight[n] += w;
    }
  }
  for (const auto& [upper, lower] : periodic_node_pairs(mesh)) {
    const auto a = static_cast<std::size_t>(upper), b = static_cast<std::size_t>(lower);
    sum[a] = sum[b] = sum[a] + sum[b];
    weight[a] = weight[b] = weight[a] + weight[b];
  }
  for (std::size_t n = 0; n < sum.size(); ++n) {
    if (weight[n] > 0.0) sum[n] /= weight[n];
  }
  return sum;
}

}  // namespace falcate::post
