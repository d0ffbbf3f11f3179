#include "solver/agglomeration.h"

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

}  // namespace

Agglomeration::Agglomeration(const BlockMatrix& pattern) : group_(at(pattern.rows()), -1) {
  for (int cell = 0; cell < pattern.rows(); ++cell) {
    if (group_[at(cell)] >= 0) continue;
    std::vector<int> members;
    const int name = count_++;
    for (int next = cell; next >= 0 && members.size() < group_size;
         next = best_linked(pattern, members, group_)) {
      group_[at(next)] = name;
      members.push_back(next);
    }
  }
}

BlockMatrix Agglomeration::coarse_pattern(const BlockMatrix& fine) const {
  std::vector<std::vector<int>> columns(at(count_));
  for (int row = 0; row < fine.rows(); ++row)
    for (std::size_t k = fine.begin(row); k < fine.end(row); ++k)
      columns[at(group(row))].push_back(group(fine.column(k)));
  for (auto& list : columns) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
  }
  return BlockMatrix(columns);
}

void Agglomeration::sum(const BlockMatrix& fine, BlockMatrix& coarse) {
  if (target_.empty())
    for (int row = 0; row < fine.rows(); ++row)
      for (std::size_t k = fine.begin(row); k < fine.end(row); ++k)
        target_.push_back(coarse.place(group(row), group(fine.column(k))));
  coarse.set_zero();
  for (std::size_t k = 0; k < target_.size(); ++k) coarse.block(target_[k]) += fine.block(k);
}

void Agglomeration::restrict_to(const SingleVector& fine, SingleVector& coarse) const {
  coarse.setZero(4 * count_);
  for (Eigen::Index i = 0; i < fine.size() / 4; ++i)
    coarse.segment<4>(4 * group(static_cast<int>(i))) += fine.segment<4>(4 * i);
}

void Agglomeration::add_to(const SingleVector& coarse, SingleVector& fine) const {
#pragma omp parallel for schedule(static)
  for (Eigen::Index i = 0; i < fine.size() / 4; ++i)
    fine.segment<4>(4 * i) += coarse.segment<4>(4 * group(static_cast<int>(i)));
}

}  // namespace falcate::solver
