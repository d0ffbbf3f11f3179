/// Cell values carried to the nodes, and which nodes are one and the same through the periodicity.
///   value(node) = sum w_c value(c) / sum w_c,  w_c = 1 / distance(node, centroid of c),
/// over the cells round the node, neighbours across the periodic lines included.
#pragma once
#include <array>
#include <vector>

#include "mesh/passage_mesh.h"

namespace falcate::post {

/// Pairs {upper, lower} of node indices with upper = lower + (0, pitch), each once, sorted.
std::vector<std::array<int, 2>> periodic_node_pairs(const mesh::PassageMesh& mesh);

/// One value a node. Between the least and greatest of the cells round it.
std::vector<double> node_values(const mesh::PassageMesh& mesh, const std::vector<double>& cells);

}  // namespace falcate::post
