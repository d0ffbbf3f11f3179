/// Strength and safety rows of a wheel case, with the material of the case.
#pragma once
#include <optional>
#include <vector>

#include "cases/case.h"
#include "post/safety.h"

namespace falcate::cases {

/// `runaway_rpm` computed from the speed line; without it the bound u = c1 cos(alpha1) is used.
std::vector<post::SafetyRow> wheel_safety(const Case& input,
                                          std::optional<double> runaway_rpm = std::nullopt);

}  // namespace falcate::cases
