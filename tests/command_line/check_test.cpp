// `falcate check`, `falcate keys` and wrong arguments, as a user meets them.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>

#include "tests/command_line/program.h"

namespace falcate::command_line {
namespace {

using cases::ScratchFolder;
using ::testing::HasSubstr;
namespace fs = std::filesystem;

TEST(CommandLine, TellsItsVersion) {
  const ScratchFolder folder;
  const Outcome outcome = falcate(folder, "--version");
  EXPECT_EQ(outcome.status, 0);
  EXPECT_THAT(outcome.out, ::testing::MatchesRegex("falcate [0-9]+\\.[0-9]+\\.[0-9]+\n"));
}

TEST(CommandLine, AnswersWrongArgumentsWithStatusTwo) {
  const ScratchFolder folder;
  for (const char* arguments :
       {"", "fly", "check", "check a.toml --fast", "run a.toml --threads 0"}) {
    SCOPED_TRACE(arguments);
    const Outcome outcome = falcate(folder, arguments);
    EXPECT_EQ(outcome.status, 2);
    EXPECT_NE(outcome.err, "");
  }
}

TEST(Check, PrintsWhatFollowsFromASoundCase) {
  const ScratchFolder folder;
  folder.write("wheel.toml", cases::joined(cases::wheel_lines()));
  const Outcome outcome = falcate(folder, "check wheel.toml");
  EXPECT_EQ(outcome.status, 0) << outcome.err;
  EXPECT_EQ(outcome.err, "");
  for (const char* words : {"Test wheel", "Spouting velocity", "500.2 m/s", "Jet Mach number",
                            "Pitch", "4.250 mm", "Velocity triangles", "45000", "Cautions"})
    EXPECT_THAT(outcome.out, HasSubstr(words));
}

TEST(Check, SaysEverythingWrongAndGoesOnWithTheOthers) {
  const ScratchFolder folder;
  folder.write("good.toml", cases::joined(cases::wheel_lines()));
  auto lines = cases::wheel_lines();
  lines[4] = "pressure = \"6 bar\"";
  lines[15] = "blade_count = 2";
  folder.write("bad.toml", cases::joined(lines));
  const Outcome outcome = falcate(folder, "check bad.toml good.toml");
  EXPECT_EQ(outcome.status, 2);
  EXPECT_THAT(outcome.out, HasSubstr("Test wheel"));
  EXPECT_EQ(
      outcome.err,
      "bad.toml:5: [supply] pressure = \"6 bar\": a pressure must say absolute or gauge: "
      "write \"6 bar(a)\" or \"6 bar(g)\"\n"
      "bad.toml:16: [wheel] blade_count = 2: must lie within 3 to 500; give a whole number\n");
}

TEST(Check, FindsNothingWrongWithTheExamples) {
  const ScratchFolder folder;
  int examples = 0;
  for (const auto& entry : fs::directory_iterator(FALCATE_SOURCE_DIR "/cases/examples")) {
    if (entry.path().extension() != ".toml") continue;
    SCOPED_TRACE(entry.path().string());
    ++examples;
    const Outcome outcome = falcate(folder, "check '" + entry.path().string() + "'");
    EXPECT_EQ(outcome.status, 0) << outcome.err;
  }
  EXPECT_GE(examples, 3);
}

TEST(Keys, WritesThePageOfTheDocumentation) {
  const ScratchFolder folder;
  const Outcome outcome = falcate(folder, "keys --markdown");
  EXPECT_EQ(outcome.status, 0);
  EXPECT_EQ(outcome.out, content(FALCATE_SOURCE_DIR "/docs/case-file.md"));
}

}  // namespace
}  // namespace falcate::command_line
