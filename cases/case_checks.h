/// What no single key shows: contradictions, keys that need each other, blades that touch.
/// Checks look only at keys that were read well, so that one mistake gives one message.
#pragma once
#include "cases/case.h"
#include "cases/case_problems.h"
#include "cases/case_source.h"

namespace falcate::cases {

void check_case(const Case& input, const CaseSource& source, CaseProblems& problems);

}  // namespace falcate::cases
