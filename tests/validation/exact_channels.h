/// Flows between walls with exact answers, on mapped meshes, for exact_cases: a supersonic vortex,
/// Ringleb's flow through Mach 1 and below it, and a shock reflected at a wall.
#pragma once
#include <vector>

#include "tests/validation/exact_cases.h"

namespace falcate::validation {

std::vector<ExactCase> exact_channel_cases();

}  // namespace falcate::validation
