/// docs/robustness.md from the answers of the matrix: counts by status, kind and range, every
/// failure in its words, seconds per point.
#pragma once
#include <string>
#include <vector>

#include "robustness/matrix_rows.h"

namespace falcate::robustness {

/// "steady", "averaged", "failed", or "without error bar".
std::string kind_words(const Answer& answer);

std::string matrix_page(const std::vector<Answer>& answers, int cells);

}  // namespace falcate::robustness
