#include "cases/case_problems.h"

#include <fmt/format.h>

#include <algorithm>

namespace falcate::cases {
CaseError::CaseError(std::vector<std::string> problems)
    : std::runtime_error(fmt::format("{}", fmt::join(problems, "\n"))),
      problems_(std::move(problems)) {}

void CaseProblems::add(int line, const std::string& what) {
  const std::string text =
      line > 0 ? fmt::format("{}:{}: {}", file_, line, what) : fmt::format("{}: {}", file_, what);
  problems_.push_back({line, text});
}

void CaseProblems::raise() const {
  if (problems_.empty()) return;
  std::vector<Problem> sorted = problems_;
  std::stable_sort(sorted.begin(), sorted.end(),
                   [](const Problem& a, const Problem& b) { return a.line < b.line; });
  std::vector<std::string> texts;
  for (const Problem& problem : sorted) texts.push_back(problem.text);
  throw CaseError(texts);
}

}  // namespace falcate::cases
