#include "tests/validation/exact_cases.h"

#include "tests/validation/exact_channels.h"
#include "tests/validation/exact_rows.h"

namespace falcate::validation {

const std::vector<ExactCase>& exact_cases() {
  static const std::vector<ExactCase> cases = [] {
    std::vector<ExactCase> all = exact_row_cases();
    for (ExactCase& one : exact_channel_cases()) all.push_back(std::move(one));
    return all;
  }();
  return cases;
}

}  // namespace falcate::validation
