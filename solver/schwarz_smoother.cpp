#include "solver/schwarz_smoother.h"

#include <algorithm>
#include <cstdlib>

namespace falcate::solver {
namespace {

/// How far from the diagonal couplings reach.
int reach(const BlockMatrix& m) {
  int widest = 0;
  for (int row = 0; row < m.rows(); ++row)
    widest = std::max({widest, row - m.column(m.begin(row)), m.column(m.end(row) - 1) - row});
  return widest;
}

}  // namespace

SchwarzSmoother::SchwarzSmoother(const BlockMatrix& matrix, int level_of_fill, int rows_a_run) {
  const int n = matrix.rows(), count = std::max(1, n / rows_a_run), overlap = reach(matrix);
  const auto start = [&](int k) { return static_cast<int>(static_cast<long>(n) * k / count); };
  for (int k = 0; k < count; ++k) {
    const RowRange own{start(k), start(k + 1)};
    const RowRange rows{std::max(0, own.first - overlap), std::min(n, own.last + overlap)};
    runs_.push_back({own, rows, IncompleteLu(matrix, level_of_fill, rows), {}});
  }
}

void SchwarzSmoother::factor(const BlockMatrix& matrix) {
  const WeightedMatrix whole{&matrix, 1.0f};
  factor({&whole, 1});
}

void SchwarzSmoother::factor(std::span<const WeightedMatrix> sum) {
#pragma omp parallel for schedule(static)
  for (Run& run : runs_) run.factors.factor(sum);
}

void SchwarzSmoother::solve(const SingleVector& b, SingleVector& x) const {
  x.resize(b.size());
#pragma omp parallel for schedule(static)
  for (const Run& run : runs_) {
    run.factors.solve(b.segment(4 * run.rows.first, 4 * run.rows.size()), run.solution);
    x.segment(4 * run.own.first, 4 * run.own.size()) =
        run.solution.segment(4 * (run.own.first - run.rows.first), 4 * run.own.size());
  }
}

}  // namespace falcate::solver
