/// How error bars hold over the exact cases: the share of figures whose exact value lies within the
/// bar, and how many times the true error the bar is wide.
#pragma once
#include <string>
#include <vector>

#include "tests/validation/exact_cases.h"

namespace falcate::validation {

struct SolvedCase {
  const ExactCase* exact = nullptr;
  std::vector<Condition> conditions;
};

/// Every condition of every case, `workers` at a time on a thread each; the order of the result is
/// that of the cases.
std::vector<SolvedCase> solve_cases(const std::vector<ExactCase>& cases, int workers);

/// A figure's bar as `post::error_bar` makes it, with the spread of an average over time on top.
double half_width(const Finding& finding);
double true_error(const Finding& finding);

struct Coverage {
  int figures = 0, inside = 0;
  std::vector<double> widths;  ///< bar over true error, rising
  double share() const { return static_cast<double>(inside) / figures; }
  double median() const;
  /// The true error of the worst figure, over its bar.
  double worst() const { return 1.0 / widths.front(); }
};
Coverage coverage(const std::vector<const Finding*>& findings);

/// The section of docs/validation.md: what was done, the table by cases and that by figures.
std::string coverage_section(const std::vector<SolvedCase>& cases);

/// One line a figure, comma-separated: case, condition, figure, exact, meshes, error, half-width.
std::string coverage_list(const std::vector<SolvedCase>& cases);

}  // namespace falcate::validation
