/// Blade rows with exact answers, for exact_cases.
#pragma once
#include <vector>

#include "tests/validation/exact_cases.h"

namespace falcate::validation {

std::vector<ExactCase> exact_row_cases();

}  // namespace falcate::validation
