/// Reads a case file (TOML) by the table of keys, fills in defaults and checks the whole.
/// Errors: `CaseError` with every problem of the file in one go.
#pragma once
#include <string>

#include "cases/case.h"
#include "cases/case_problems.h"

namespace falcate::cases {

/// `outline_path` reads the outline from there and not from where the case file says, for the copy
/// kept with the results.
Case read_case(const std::string& path, const std::string& outline_path = {});

}  // namespace falcate::cases
