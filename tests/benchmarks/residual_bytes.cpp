#include "tests/benchmarks/residual_bytes.h"

namespace falcate::benchmarks {
namespace {

/// How many there are of what an array holds one of.
struct Counts {
  double cells = 0.0, faces = 0.0, interior = 0.0, cell_faces = 0.0, neighbours = 0.0;
};

Counts counts_of(const solver::Residual& residual) {
  const mesh::PassageMesh& mesh = residual.mesh();
  Counts n;
  n.cells = mesh.cell_count();
  n.faces = mesh.face_count();
  n.interior = mesh.interior_face_count();
  n.cell_faces = n.faces + n.interior;
  for (int i = 0; i < mesh.cell_count(); ++i)
    n.neighbours += static_cast<double>(residual.stencil().of(i).size());
  return n;
}

struct ArrayRow {
  const char* words;
  double size;  ///< bytes, each time
  double Counts::*count;
  bool intermediate;  ///< moved twice
};

constexpr double number = 8.0, index = 4.0, vector = 2.0 * number, state = 4.0 * number;

const ArrayRow rows[] = {
    {"states, read", state, &Counts::cells, false},
    {"stencil of gradients: neighbour and weights, read", index + vector, &Counts::neighbours,
     false},
    {"stencil: where each cell begins, read", index, &Counts::cells, false},
    {"gradients, written and read", 2.0 * state, &Counts::cells, true},
    {"faces: cells on both sides, read", 2.0 * index, &Counts::faces, false},
    {"faces: normal, read", vector, &Counts::faces, false},
    {"faces: offset of the midpoint, read", vector, &Counts::faces, false},
    {"faces: difference of centroids, read", vector, &Counts::interior, false},
    {"faces: threshold of the limiter, read", number, &Counts::interior, false},
    {"fluxes, written and read", state, &Counts::faces, true},
    {"faces of each cell with their sign, read", index, &Counts::cell_faces, false},
    {"faces of each cell: where they begin, read", index, &Counts::cells, false},
    {"residual, written", state, &Counts::cells, false},
};

}  // namespace

std::vector<ArrayBytes> residual_bytes(const solver::Residual& residual) {
  const Counts n = counts_of(residual);
  std::vector<ArrayBytes> arrays;
  for (const ArrayRow& row : rows)
    arrays.push_back(
        {row.words, row.size * n.*row.count * (row.intermediate ? 2.0 : 1.0), row.intermediate});
  return arrays;
}

double total(const std::vector<ArrayBytes>& arrays, bool with_intermediates) {
  double sum = 0.0;
  for (const ArrayBytes& array : arrays)
    if (with_intermediates || !array.intermediate) sum += array.bytes;
  return sum;
}

}  // namespace falcate::benchmarks
