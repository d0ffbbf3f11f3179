#include "solver/multigrid.h"

namespace falcate::solver {
namespace {

Eigen::MatrixXf dense(const BlockMatrix& m) {
  Eigen::MatrixXf out = Eigen::MatrixXf::Zero(4 * m.rows(), 4 * m.rows());
  for (int row = 0; row < m.rows(); ++row)
    for (std::size_t k = m.begin(row); k < m.end(row); ++k)
      out.block<4, 4>(4 * row, 4 * m.column(k)) = m.block(k);
  return out;
}

}  // namespace

void Multigrid::add_level(const BlockMatrix& matrix) {
  levels_.push_back(std::make_unique<Level>(
      Level{matrix,
            SchwarzSmoother(matrix, options_.level_of_fill, options_.rows_a_run),
            Agglomeration(matrix),
            {},
            {},
            {},
            {}}));
}

Multigrid::Multigrid(const BlockMatrix& finest, const MultigridOptions& options)
    : options_(options) {
  add_level(finest);
  while (levels_.back()->matrix.rows() > options.coarsest) {
    const Level& fine = *levels_.back();
    if (fine.joined.group_count() == fine.matrix.rows()) break;
    coarse_.push_back(std::make_unique<BlockMatrix>(fine.joined.coarse_pattern(fine.matrix)));
    add_level(*coarse_.back());
  }
}

void Multigrid::factor() {
  for (std::size_t i = 0; i + 1 < levels_.size(); ++i) {
    Level& fine = *levels_[i];
    fine.joined.sum(fine.matrix, *coarse_[i]);
    fine.smoother.factor(fine.matrix);
  }
  direct_.compute(dense(levels_.back()->matrix));
}

void Multigrid::cycle(std::size_t level) const {
  const Level& now = *levels_[level];
  if (level + 1 == levels_.size()) {
    now.solution = direct_.solve(now.rhs);
    return;
  }
  const Level& next = *levels_[level + 1];
  now.smoother.solve(now.rhs, now.solution);
  now.matrix.residual(now.rhs, now.solution, now.rest);
  now.joined.restrict_to(now.rest, next.rhs);
  cycle(level + 1);
  now.joined.add_to(next.solution, now.solution);
  now.matrix.residual(now.rhs, now.solution, now.rest);
  now.smoother.solve(now.rest, now.change);
  now.solution += now.change;
}

void Multigrid::solve(const SingleVector& b, SingleVector& x) const {
  levels_.front()->rhs = b;
  cycle(0);
  x = levels_.front()->solution;
}

}  // namespace falcate::solver
