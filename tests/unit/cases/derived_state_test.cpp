#include "cases/derived_state.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "cases/case_file.h"
#include "tests/unit/cases/case_text.h"

namespace falcate::cases {
namespace {

std::vector<std::string> cautions_of(const std::vector<std::string>& lines) {
  const ScratchFolder folder;
  const Case input = read_case(folder.write("case.toml", joined(lines)));
  return derived_state(input, make_blade_row(input), operating_points(input)).cautions;
}

// A wheel that stands in a fast jet, with narrow passages, an open rim and friction asked for.
TEST(Cautions, AreSentencesWithAFullStop) {
  auto lines = wheel_lines();
  lines[18] = "rim = \"open\"";
  lines[19] = "speed_ratios = [0.24, 0.28, 0.33]";
  lines[21] += "\ninlet_angle = \"30 deg\"";
  lines[4] = "pressure = \"3 bar(g)\"";
  lines[15] = "blade_count = 54";
  lines[16] = "blade_height = \"1.2 mm\"";
  lines.push_back("friction = true");
  const auto cautions = cautions_of(lines);
  for (const char* start : {"Nozzle: its exit bore", "Open rim: ", "Friction: ", "Passage at "})
    EXPECT_THAT(cautions, testing::Contains(testing::StartsWith(start)));
  EXPECT_THAT(cautions, testing::Each(testing::EndsWith(".")));
}

}  // namespace
}  // namespace falcate::cases
