// Wrong case files and the exact words they are answered with.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <map>

#include "cases/case_file.h"
#include "tests/unit/cases/case_text.h"

namespace falcate::cases {
namespace {

using Lines = std::vector<std::string>;

/// A sound case with some lines put in the place of others (number 0: added at the end).
struct BadCase {
  const char* name;
  Lines base;
  std::map<int, std::string> changes;
  Lines messages;  ///< all of them, without the name of the file
};

void PrintTo(const BadCase& bad, std::ostream* stream) { *stream << bad.name; }

std::vector<BadCase> bad_cases() {
  const Lines wheel = wheel_lines(), rig = rig_lines();
  return {
      // Units and numbers.
      {"supply_neither_absolute_nor_gauge",
       wheel,
       {{5, "pressure = \"6 bar\""}},
       {":5: [supply] pressure = \"6 bar\": a pressure must say absolute or gauge: write \"6 "
        "bar(a)\" "
        "or \"6 bar(g)\""}},
      {"stream_neither_absolute_nor_gauge",
       rig,
       {{2, "total_pressure = \"1.5 bar\""}},
       {":2: [stream] total_pressure = \"1.5 bar\": a pressure must say absolute or gauge: write "
        "\"1.5 bar(a)\" or \"1.5 bar(g)\""}},
      {"atmosphere_as_gauge",
       wheel,
       {{7, "[site]\natmospheric_pressure = \"1 bar(g)\"\n[exhaust]"}},
       {":8: [site] atmospheric_pressure = \"1 bar(g)\": must be absolute: write \"1 bar(a)\""}},
      {"unit_of_another_kind",
       wheel,
       {{15, "mean_diameter = \"46 bar\""}},
       {":15: [wheel] mean_diameter = \"46 bar\": \"bar\" is not a unit of length; give a length, "
        "such as \"44 mm\""}},
      {"unit_unknown",
       wheel,
       {{15, "mean_diameter = \"46 milimetre\""}},
       {":15: [wheel] mean_diameter = \"46 milimetre\": \"milimetre\" is no known unit; give a "
        "length, such as \"44 mm\""}},
      {"unit_missing",
       wheel,
       {{17, "blade_height = \"3\""}},
       {":17: [wheel] blade_height = \"3\": the unit is missing; give a length, such as \"44 "
        "mm\""}},
      {"quantity_without_quotes",
       wheel,
       {{13, "angle = 20"}},
       {":13: [nozzle] angle = 20: must be text with a unit, such as \"20 deg\""}},
      {"speed_as_frequency",
       wheel,
       {{20, "speed = \"750 Hz\""}},
       {":20: [wheel] speed = \"750 Hz\": \"Hz\" is not a unit of rotational speed; give a "
        "rotational speed, such as \"60000 rpm\""}},
      {"thousands_comma",
       wheel,
       {{20, "speed = \"45,000 rpm\""}},
       {":20: [wheel] speed = \"45,000 rpm\": a number has a point before its decimals and no "
        "comma, "
        "such as \"6.5\" or \"60000\""}},
      {"coulomb_for_celsius",
       wheel,
       {{6, "temperature = \"20 C\""}},
       {":6: [supply] temperature = \"20 C\": \"C\" is not a unit of temperature; give a "
        "temperature; write \"degC\" for degrees"}},
      {"whole_number_with_decimals",
       wheel,
       {{16, "blade_count = 34.5"}},
       {":16: [wheel] blade_count = 34.5: must be a whole number within 3 to 500"}},
      {"number_in_quotes",
       wheel,
       {{12, "velocity_coefficient = \"0.95\""}},
       {":12: [nozzle] velocity_coefficient = \"0.95\": must be a number within 0.5 to 1, without "
        "quotes"}},
      {"not_a_number",
       wheel,
       {{12, "velocity_coefficient = nan"}},
       {":12: [nozzle] velocity_coefficient = nan: must be a number within 0.5 to 1, without "
        "quotes"}},
      {"flag_in_quotes",
       wheel,
       {{24, "friction = \"no\""}},
       {":24: [flow] friction = \"no\": must be true or false, without quotes"}},
      {"text_without_quotes",
       wheel,
       {{1, "title = 12"}},
       {":1: title = 12: must be text in quotes"}},
      // Ranges.
      {"angle_too_steep",
       wheel,
       {{13, "angle = \"75 deg\""}},
       {":13: [nozzle] angle = \"75 deg\": must lie within 5 deg to 60 deg; measure it from the "
        "plane "
        "of rotation: 12 to 25 deg is common practice"}},
      {"coefficient_above_one",
       wheel,
       {{12, "discharge_coefficient = 1.1"}},
       {":12: [nozzle] discharge_coefficient = 1.1: must lie within 0.3 to 1; 0.85 to 0.98 is "
        "common "
        "practice"}},
      {"too_few_blades",
       wheel,
       {{16, "blade_count = 2"}},
       {":16: [wheel] blade_count = 2: must lie within 3 to 500; give a whole number"}},
      {"no_nozzle",
       wheel,
       {{12, "count = 0"}},
       {":12: [nozzle] count = 0: must lie within 1 to 100; give a whole number"}},
      {"too_few_cells",
       wheel,
       {{24, "cells = 10"}},
       {":24: [flow] cells = 10: must lie within 1000 to 500000; 8000 is right for most work"}},
      {"speed_out_of_range",
       wheel,
       {{20, "speed = \"-5 rpm\""}},
       {":20: [wheel] speed = \"-5 rpm\": must lie within 0 rpm to 500000 rpm; give one of speed, "
        "speeds and speed_ratios"}},
      {"colder_than_possible",
       wheel,
       {{6, "temperature = \"-300 degC\""}},
       {":6: [supply] temperature = \"-300 degC\": must lie within -200 degC to 1500 degC; give it "
        "as "
        "degC or K"}},
      {"mach_out_of_range",
       rig,
       {{3, "mach = 9.0"}},
       {":3: [stream] mach = 9: must lie within 0.02 to 5; leave it out for a subsonic stream"}},
      // Words and names.
      {"rim_misspelt",
       wheel,
       {{19, "rim = \"ring\""}},
       {":19: [wheel] rim = \"ring\": must be ringed or open; did you mean \"ringed\"?"}},
      {"shape_of_a_later_day",
       wheel,
       {{22, "shape = \"vortex\""}},
       {":22: [blade] shape = \"vortex\": must be channel, cup or coordinates"}},
      {"gas_unknown",
       wheel,
       {{3, "name = \"xenon\""}},
       {":3: [gas] name = \"xenon\": must be air, nitrogen, carbon-dioxide, argon, helium or "
        "steam-ideal"}},
      {"key_misspelt",
       wheel,
       {{16, "blade_cuont = 34"}},
       {":14: [wheel] blade_count is missing: give a number within 3 to 500; give a whole number",
        ":16: [wheel] blade_cuont = 34: no known key; did you mean blade_count?"}},
      {"key_of_another_table",
       wheel,
       {{12, "blade_count = 30"}},
       {":12: [nozzle] blade_count = 30: no known key; did you mean [wheel] blade_count?"}},
      {"key_of_nothing",
       wheel,
       {{24, "zzzz = 1"}},
       {":24: [flow] zzzz = 1: no known key; known here are cells, friction, passages, upstream, "
        "downstream, max_steps, averaging_steps, residual_drop"}},
      {"table_misspelt",
       wheel,
       {{23, "[flwo]"}},
       {":23: [flwo] is no known table; did you mean [flow]?"}},
      {"table_of_nothing",
       wheel,
       {{23, "[weather]"}},
       {":23: [weather] is no known table; known are [gas], [supply], [exhaust], [site], [nozzle], "
        "[wheel], [stream], [row], [blade], [flow]"}},
      {"key_in_no_table",
       wheel,
       {{1, "speed = \"45000 rpm\""}},
       {":1: speed = \"45000 rpm\": no known key; did you mean [wheel] speed?"}},
      {"table_written_twice",
       wheel,
       {{23, "[[flow]]"}},
       {":23: flow must be a table, written once as [flow] with its keys below it"}},
      // Missing.
      {"pressure_missing",
       wheel,
       {{5, ""}},
       {":4: [supply] pressure is missing: give a pressure within 0.01 bar(a) to 1000 bar(a); give "
        "the pressure just before the nozzles while gas flows"}},
      {"shape_missing",
       wheel,
       {{22, ""}},
       {":21: [blade] shape is missing: give channel, cup or coordinates"}},
      {"blade_missing", wheel, {{21, ""}, {22, ""}}, {": [blade] is missing; add it with shape"}},
      {"nozzle_missing",
       wheel,
       {{9, ""}, {10, ""}, {11, ""}, {12, ""}, {13, ""}},
       {": [nozzle] is missing; add it with throat_diameter"}},
      {"pitch_missing",
       rig,
       {{7, ""}},
       {":6: [row] pitch is missing: give a length within 0.1 mm to 2000 mm; give it at the height "
        "that is computed"}},
      {"speed_missing",
       wheel,
       {{20, ""}},
       {":14: [wheel] speed is missing: give speed = \"45000 rpm\", or a list as speeds or "
        "speed_ratios"}},
      {"neither_wheel_nor_rig",
       {"[blade]", "shape = \"channel\""},
       {},
       {": says neither what wheel nor what rig it is about; give [supply], [nozzle] and [wheel] "
        "for "
        "a wheel, or [stream] and [row] for a blade row alone"}},
      // Contradictions.
      {"wheel_and_rig",
       wheel,
       {{0, "[row]\npitch = \"4 mm\""}},
       {":25: [row] belongs to a blade row alone and [supply] to a wheel; keep one of the two "
        "kinds"}},
      {"speed_with_no_wheel",
       rig,
       {{8, "width = \"10 mm\"\nspeed = \"45000 rpm\""}},
       {":9: [row] speed = \"45000 rpm\": no known key; did you mean [wheel] speed?"}},
      {"speed_and_speeds",
       wheel,
       {{19, "speeds = [\"20000 rpm\", \"40000 rpm\"]"}},
       {":19: [wheel] speeds = [\"20000 rpm\", \"40000 rpm\"]: speed is given as well; keep one of "
        "speed, speeds and speed_ratios"}},
      {"speeds_not_a_list",
       wheel,
       {{20, "speeds = \"20000 rpm\""}},
       {":20: [wheel] speeds = \"20000 rpm\": must be a list, such as [\"20000 rpm\", \"60000 "
        "rpm\"]"}},
      {"speeds_empty",
       wheel,
       {{20, "speed_ratios = []"}},
       {":20: [wheel] speed_ratios = []: must not be empty; give a list such as [0.2, 0.4]"}},
      {"one_of_the_speeds_bad",
       wheel,
       {{20, "speeds = [\"20000 rpm\", 40000]"}},
       {":20: [wheel] speeds = [\"20000 rpm\", 40000]: 40000 must be text with a unit, such as "
        "\"60000 rpm\""}},
      {"speed_twice",
       wheel,
       {{20, "speed_ratios = [0.2, 0.3, 0.2]"}},
       {":20: [wheel] speed_ratios = [0.2, 0.3, 0.2]: 39455 rpm is given twice; give each speed "
        "once"}},
      {"faster_than_the_jet",
       wheel,
       {{20, "speed_ratios = [0.3, 0.96]"}},
       {":20: [wheel] speed_ratios = [0.3, 0.96]: at 189383 rpm the blades run away from the jet "
        "(u/c1 = 0.960); stay below 185377 rpm (u/c1 = 0.940)"}},
      {"exit_narrower_than_throat",
       wheel,
       {{11, "exit_diameter = \"1.2 mm\""}},
       {":11: [nozzle] exit_diameter = \"1.2 mm\": the exit is narrower than the throat of 1.6 mm; "
        "make it at least as wide, or leave it out for a convergent nozzle"}},
      {"too_many_nozzles",
       wheel,
       {{12, "count = 40"}},
       {":12: [nozzle] count = 40: 40 nozzles take up 187.1 mm of a circumference of 144.5 mm; use "
        "fewer, smaller or steeper ones"}},
      {"no_pressure_to_drive",
       wheel,
       {{8, "pressure = \"8 bar(a)\""}},
       {":5: [supply] pressure = \"6 bar(g)\": 7.013 bar(a) is not above the exhaust pressure of 8 "
        "bar(a), so that no gas flows; raise it or lower [exhaust] pressure"}},
      {"no_pressure_across_the_row",
       rig,
       {{5, "exit_pressure = \"2 bar(a)\""}},
       {":5: [stream] exit_pressure = \"2 bar(a)\": 2 bar(a) is not below the total pressure of "
        "1.5 "
        "bar(a), so that no gas flows; lower it"}},
      {"gas_named_and_given",
       wheel,
       {{3, "name = \"air\"\ngas_constant = \"287 J/(kg K)\""}},
       {":3: [gas] name = \"air\": the gas has a name and constants of its own; keep the name, or "
        "heat_capacity_ratio and gas_constant"}},
      {"gas_half_given",
       wheel,
       {{3, "heat_capacity_ratio = 1.3"}},
       {":3: [gas] heat_capacity_ratio = 1.3: a gas of your own needs gas_constant as well"}},
      {"material_half_given",
       wheel,
       {{19, "density = \"2700 kg/m3\""}},
       {":19: [wheel] density = \"2700 kg/m3\": a material of your own needs allowable_stress as "
        "well"}},
      {"blades_longer_than_the_wheel",
       wheel,
       {{17, "blade_height = \"25 mm\""}},
       {":17: [wheel] blade_height = \"25 mm\": is more than half the mean diameter of 46 mm; make "
        "the blades shorter or the wheel larger"}},
      {"bore_through_the_blades",
       wheel,
       {{19, "bore_diameter = \"44 mm\""}},
       {":19: [wheel] bore_diameter = \"44 mm\": the bore reaches the blade roots at 43 mm; make "
        "it "
        "smaller"}},
      {"passage_leaves_no_blade",
       wheel,
       {{22, "shape = \"channel\"\ninlet_angle = \"30 deg\"\npassage_width = \"3 mm\""}},
       {":24: [blade] passage_width = \"3 mm\": leaves no room for a blade; stay below the pitch "
        "times "
        "the sine of the inlet angle, 2.125 mm"}},
      {"no_turning",
       wheel,
       {{22, "shape = \"channel\"\ninlet_angle = \"60 deg\"\nexit_angle = \"65 deg\""}},
       {":24: [blade] exit_angle = \"65 deg\": the blade turns the flow from 60.0 deg to 65.0 deg, "
        "less than 10 deg; give an exit angle further above the inlet angle"}},
      {"wall_of_a_channel",
       wheel,
       {{22, "shape = \"channel\"\nwall_thickness = \"0.4 mm\""}},
       {":23: [blade] wall_thickness = \"0.4 mm\": has no meaning for shape = \"channel\", only "
        "for "
        "cup; leave it out"}},
      {"coordinates_without_file",
       rig,
       {{10, "shape = \"coordinates\""}},
       {":10: [blade] shape = \"coordinates\": needs file, the CSV file with the outline"}},
      {"outline_not_there",
       rig,
       {{10, "shape = \"coordinates\"\nfile = \"blade.csv\""}},
       {":11: [blade] file = \"blade.csv\": there is no such file; the name counts from the folder "
        "of "
        "the case file"}},
      // The language of the file.
      {"key_twice",
       wheel,
       {{12, "count = 2\ncount = 3"}},
       {":13: is not TOML: Error while parsing key-value pair: cannot redefine existing integer "
        "'count'"}},
      {"quote_not_closed",
       wheel,
       {{5, "pressure = \"6 bar(g)"}},
       {":5: is not TOML: Error while parsing string: unescaped control characters other than TAB "
        "(U+0009) are explicitly prohibited"}},
      // All in one go.
      {"many_at_once",
       wheel,
       {{5, "pressure = \"6 bar\""},
        {13, "angle = \"75 deg\""},
        {16, "blade_count = 2"},
        {19, "rin = \"open\""},
        {20, ""},
        {24, "friction = 1"}},
       {":5: [supply] pressure = \"6 bar\": a pressure must say absolute or gauge: write \"6 "
        "bar(a)\" "
        "or \"6 bar(g)\"",
        ":13: [nozzle] angle = \"75 deg\": must lie within 5 deg to 60 deg; measure it from the "
        "plane "
        "of rotation: 12 to 25 deg is common practice",
        ":14: [wheel] speed is missing: give speed = \"45000 rpm\", or a list as speeds or "
        "speed_ratios",
        ":16: [wheel] blade_count = 2: must lie within 3 to 500; give a whole number",
        ":19: [wheel] rin = \"open\": no known key; did you mean rim?",
        ":24: [flow] friction = 1: must be true or false, without quotes"}},
  };
}

std::string spoilt(const BadCase& bad) {
  Lines lines = bad.base;
  for (const auto& [number, text] : bad.changes) {
    if (number == 0)
      lines.push_back(text);
    else
      lines.at(static_cast<std::size_t>(number) - 1) = text;
  }
  return joined(lines);
}

class BadCases : public ::testing::TestWithParam<BadCase> {};

TEST_P(BadCases, AreAnsweredWithTheseWords) {
  const ScratchFolder folder;
  const std::string path = folder.write("case.toml", spoilt(GetParam()));
  std::vector<std::string> messages;
  try {
    read_case(path);
  } catch (const CaseError& error) {
    for (const std::string& problem : error.problems()) {
      ASSERT_EQ(problem.rfind(path, 0), 0U) << problem;
      messages.push_back(problem.substr(path.size()));
    }
  }
  EXPECT_THAT(messages, ::testing::ElementsAreArray(GetParam().messages));
}

INSTANTIATE_TEST_SUITE_P(Table, BadCases, ::testing::ValuesIn(bad_cases()),
                         [](const auto& info) { return std::string(info.param.name); });

TEST(BadCaseFile, ThatIsNotThereIsSaidPlainly) {
  try {
    read_case("/nowhere/case.toml");
    FAIL() << "was read";
  } catch (const CaseError& error) {
    EXPECT_STREQ(error.what(),
                 "/nowhere/case.toml: cannot be read; check the name and the rights of the file");
  }
}

TEST(BadCaseFile, ThatIsAFolderIsSaidPlainly) {
  const ScratchFolder folder;
  try {
    read_case(folder.path());
    FAIL() << "was read";
  } catch (const CaseError& error) {
    EXPECT_EQ(std::string(error.what()), folder.path() + ": is a folder; name the case file in it");
  }
}

}  // namespace
}  // namespace falcate::cases
