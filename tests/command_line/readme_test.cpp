// README.md against the program: its commands, its output tree, its case file and its message.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <regex>
#include <set>

#include "tests/command_line/program.h"

namespace falcate::command_line {
namespace {

using cases::ScratchFolder;
using ::testing::Contains;
using ::testing::HasSubstr;
namespace fs = std::filesystem;

std::string readme() { return content(FALCATE_SOURCE_DIR "/README.md"); }

/// All that the first group of the pattern finds in a text.
std::vector<std::string> found(const std::string& text, const std::string& pattern) {
  const std::regex expression(pattern);
  std::vector<std::string> all;
  for (auto at = std::sregex_iterator(text.begin(), text.end(), expression);
       at != std::sregex_iterator(); ++at)
    all.push_back((*at)[1].str());
  return all;
}

/// The part of the page between two headings.
std::string section(const std::string& heading) {
  const std::string page = readme();
  const std::size_t begin = page.find("\n## " + heading + "\n");
  if (begin == std::string::npos) return "";
  return page.substr(begin, page.find("\n## ", begin + 1) - begin);
}

/// The demo with two speeds and few cells, so that it solves in seconds.
std::string shortened_demo() {
  std::string text = content(FALCATE_SOURCE_DIR "/cases/examples/deburring-spindle.toml");
  text = std::regex_replace(text, std::regex("speed_ratios = \\[[^\\]]*\\]"),
                            "speed_ratios = [0.4, 0.5]");
  return std::regex_replace(text, std::regex("cells = \\d+"), "cells = 1000");
}

TEST(Readme, ItsCommandsWorkAndFillTheFolderAsDescribed) {
  const ScratchFolder folder;
  fs::create_directories(folder.path("cases/examples"));
  folder.write("cases/examples/deburring-spindle.toml", shortened_demo());
  const auto commands = found(section("Commands"), "\nbuild/falcate ([^#\n]*)");
  ASSERT_EQ(commands.size(), 4U);
  for (const std::string& command : commands) {
    const Outcome outcome = falcate(folder, command);
    EXPECT_EQ(outcome.status, 0) << command << "\n" << outcome.err;
    EXPECT_NE(outcome.out, "") << command;
  }

  const std::string results = folder.path("results/deburring-spindle");
  std::set<std::string> described;
  for (const std::string& row : found(section("What you get"), "\n\\| (`[^|]*`) \\|"))
    for (std::string name : found(row, "`([^`]*)`")) {
      name = std::regex_replace(name, std::regex("POINT"), "point-01");
      name = std::regex_replace(name, std::regex("SHAPE"), "channel");
      EXPECT_TRUE(fs::exists(results + "/" + name)) << name;
      described.insert(name.substr(0, name.find('/')));
    }
  for (const auto& entry : fs::directory_iterator(results))
    EXPECT_THAT(described, Contains(entry.path().filename().string()));
}

TEST(Readme, NamesEveryCommandOfTheProgram) {
  const ScratchFolder folder;
  const std::string help = falcate(folder, "--help").out;
  const auto commands = found(help.substr(help.find("Subcommands:")), "\n  ([a-z]+) ");
  ASSERT_GE(commands.size(), 4U);
  for (const std::string& command : commands)
    EXPECT_THAT(section("Commands"), HasSubstr("| `falcate " + command));
  for (const std::string& command : found(section("Commands"), "\\| `falcate ([a-z]+)"))
    EXPECT_THAT(commands, Contains(command));
}

TEST(Readme, ShowsACaseFileThatPassesTheCheck) {
  const ScratchFolder folder;
  const auto shown = found(readme(), "```toml\n([^`]*)```");
  ASSERT_EQ(shown.size(), 1U);
  folder.write("case.toml", shown.front());
  const Outcome outcome = falcate(folder, "check case.toml");
  EXPECT_EQ(outcome.status, 0) << outcome.err;
  EXPECT_THAT(outcome.out, HasSubstr("at its design pressure ratio"));
}

TEST(Readme, QuotesAMessageAsItIs) {
  const ScratchFolder folder;
  auto lines = cases::wheel_lines();
  lines[4] = "pressure = \"6 bar\"";
  folder.write("wheel.toml", cases::joined(lines));
  const Outcome outcome = falcate(folder, "check wheel.toml");
  EXPECT_EQ(outcome.status, 2);
  EXPECT_THAT(section("Commands"), HasSubstr("```\n" + outcome.err + "```"));
}

}  // namespace
}  // namespace falcate::command_line
