#include "solver/multigrid.h"

#include <algorithm>

namespace falcate::solver {
namespace {

constexpr std::size_t group_size = 4;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

/// Among the free neighbours of a group the one with most links to it; -1 where there is none.
int best_linked(const BlockMatrix& m, const std::vector<int>& members,
                const std::vector<int>& group) {
  int best = -1, most = 0;
  for (const int member : members)
    for (std::size_t k = m.begin(member); k < m.end(member); ++k) {
      const int candidate = m.column(k);
      if (group[at(candidate)] >= 0) continue;
      int links = 0;
      for (std::size_t j = m.begin(candidate); j < m.end(candidate); ++j)
        links += std::find(members.begin(), members.end(), m.column(j)) != members.end() ? 1 : 0;
      if (links > most) best = candidate, most = links;
    }
  return best;
}

BlockMatrix coarse_pattern(const BlockMatrix& fine, const std::vector<int>& group) {
  std::vector<std::vector<int>> columns(at(*std::max_element(group.begin(), group.end()) + 1));
  for (int row = 0; row < fine.rows(); ++row)
    for (std::size_t k = fine.begin(row); k < fine.end(row); ++k)
      columns[at(group[at(row)])].push_back(group[at(fine.column(k))]);
  for (auto& list : columns) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
  }
  return BlockMatrix(columns);
}

Eigen::MatrixXf dense(const BlockMatrix& m) {
  Eigen::MatrixXf out = Eigen::MatrixXf::Zero(4 * m.rows(), 4 * m.rows());
  for (int row = 0; row < m.rows(); ++row)
    for (std::size_t k = m.begin(row); k < m.end(row); ++k)
      out.block<4, 4>(4 * row, 4 * m.column(k)) = m.block(k);
  return out;
}

}  // namespace

std::vector<int> agglomerate(const BlockMatrix& pattern) {
  std::vector<int> group(at(pattern.rows()), -1);
  int count = 0;
  for (int cell = 0; cell < pattern.rows(); ++cell) {
    if (group[at(cell)] >= 0) continue;
    std::vector<int> members;
    const int name = count++;
    for (int next = cell; next >= 0 && members.size() < group_size;
         next = best_linked(pattern, members, group)) {
      group[at(next)] = name;
      members.push_back(next);
    }
  }
  return group;
}

void Multigrid::add_level(const BlockMatrix& matrix) {
  levels_.push_back(std::make_unique<Level>(
      Level{matrix,
            SchwarzSmoother(matrix, options_.level_of_fill, options_.rows_a_run),
            {},
            {},
            {},
            {},
            {},
            {}}));
}

Multigrid::Multigrid(const BlockMatrix& finest, const MultigridOptions& options)
    : options_(options) {
  add_level(finest);
  while (levels_.back()->matrix.rows() > options.coarsest) {
    Level& fine = *levels_.back();
    fine.group = agglomerate(fine.matrix);
    auto coarse = std::make_unique<BlockMatrix>(coarse_pattern(fine.matrix, fine.group));
    if (coarse->rows() == fine.matrix.rows()) break;
    for (int row = 0; row < fine.matrix.rows(); ++row)
      for (std::size_t k = fine.matrix.begin(row); k < fine.matrix.end(row); ++k)
        fine.target.push_back(
            coarse->place(fine.group[at(row)], fine.group[at(fine.matrix.column(k))]));
    coarse_.push_back(std::move(coarse));
    add_level(*coarse_.back());
  }
}

void Multigrid::factor() {
  for (std::size_t i = 0; i + 1 < levels_.size(); ++i) {
    Level& fine = *levels_[i];
    BlockMatrix& coarse = *coarse_[i];
    coarse.set_zero();
    for (std::size_t k = 0; k < fine.target.size(); ++k)
      coarse.block(fine.target[k]) += fine.matrix.block(k);
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
  next.rhs.setZero(4 * next.matrix.rows());
  for (int i = 0; i < now.matrix.rows(); ++i)
    next.rhs.segment<4>(4 * now.group[at(i)]) += now.rest.segment<4>(4 * i);
  cycle(level + 1);
  for (int i = 0; i < now.matrix.rows(); ++i)
    now.solution.segment<4>(4 * i) += next.solution.segment<4>(4 * now.group[at(i)]);
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
