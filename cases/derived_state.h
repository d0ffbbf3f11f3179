/// What follows from a case without solving: jet, velocity triangles, blade row, strength. People
/// read it (`falcate check`, the report), so values are text with units.
#pragma once
#include <string>
#include <utility>
#include <vector>

#include "cases/blade_row.h"
#include "cases/case.h"
#include "cases/operating_points.h"

namespace falcate::cases {

struct DerivedGroup {
  std::string title;
  std::vector<std::pair<std::string, std::string>> rows;  ///< label, value
};

struct DerivedState {
  std::vector<DerivedGroup> groups;
  std::vector<std::string> speed_heading;  ///< one line a point; empty for a rig
  std::vector<std::vector<std::string>> speed_rows;
  std::vector<std::string> cautions;  ///< each beside its number: "label: ..."
};

/// Reynolds number of the flow through the passage: w1, throat width, gas of the jet.
double passage_reynolds_number(const Case& input, const BladeRow& row, const OperatingPoint& point);

DerivedState derived_state(const Case& input, const BladeRow& row,
                           const std::vector<OperatingPoint>& points);

/// As an aligned table for a terminal.
std::string derived_text(const Case& input, const DerivedState& state);

}  // namespace falcate::cases
