// The layout of the house, checked on every source file; each rule is first shown to be able to
// fail.
#include "tests/architecture/source_rules.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iterator>

namespace falcate::architecture {

/// Names a row in the output of a failed test.
void PrintTo(const TextRule& rule, std::ostream* stream) { *stream << rule.name; }

namespace {

using ::testing::ElementsAre;
using ::testing::IsEmpty;
using ::testing::SizeIs;
namespace fs = std::filesystem;

SourceFile read(const fs::path& path) {
  std::ifstream stream(path, std::ios::binary);
  return {fs::relative(path, FALCATE_SOURCE_DIR).generic_string(),
          std::string(std::istreambuf_iterator<char>(stream), {})};
}

bool is_text(const fs::path& path) {
  static const std::vector<std::string> others = {".png", ".csv", ".svg", ".pdf", ".vtu"};
  return std::find(others.begin(), others.end(), path.extension().string()) == others.end();
}

/// Every text file of the repository, in the order of its path.
const std::vector<SourceFile>& repository() {
  static const std::vector<SourceFile> files = [] {
    std::vector<SourceFile> all;
    const fs::path root = FALCATE_SOURCE_DIR;
    for (const char* name : {"CMakeLists.txt", "README.md", "DEVELOPERS.md", ".clang-tidy"}) {
      if (fs::exists(root / name)) all.push_back(read(root / name));
    }
    for (const char* folder : {"mesh", "solver", "post", "cases", "tests", "docs", ".ci"}) {
      if (!fs::exists(root / folder)) continue;
      for (const auto& entry : fs::recursive_directory_iterator(root / folder)) {
        if (entry.is_regular_file() && is_text(entry.path())) all.push_back(read(entry.path()));
      }
    }
    std::sort(all.begin(), all.end(),
              [](const SourceFile& a, const SourceFile& b) { return a.path < b.path; });
    return all;
  }();
  return files;
}

std::string test_name(const ::testing::TestParamInfo<TextRule>& info) {
  std::string name = info.param.name;
  std::replace_if(
      name.begin(), name.end(), [](unsigned char c) { return !std::isalnum(c); }, '_');
  return name;
}

class TextRules : public ::testing::TestWithParam<TextRule> {};

TEST_P(TextRules, finds_the_invented_offence_and_passes_the_harmless_text) {
  EXPECT_THAT(offences(GetParam(), {GetParam().offence}), SizeIs(1));
  EXPECT_THAT(offences(GetParam(), {GetParam().harmless}), IsEmpty());
}

TEST_P(TextRules, holds_in_the_repository) {
  EXPECT_THAT(offences(GetParam(), repository()), IsEmpty());
}

INSTANTIATE_TEST_SUITE_P(Sources, TextRules, ::testing::ValuesIn(text_rules()), test_name);

TEST(Layers, an_include_against_the_direction_is_found) {
  const std::vector<SourceFile> files = {
      {"mesh/a.h", "#include <vector>\n#include \"solver/gas.h\"\n"},
      {"solver/b.cpp", "#include \"mesh/a.h\"\n#include \"solver/gas.h\"\n"},
      {"post/c.cpp", "// #include \"cases/d.h\"\n#include \"mesh/a.h\"\n"}};
  EXPECT_THAT(wrong_way_includes(files), ElementsAre("mesh/a.h:2: solver/gas.h"));
}

TEST(Layers, includes_run_from_cases_to_mesh) {
  EXPECT_THAT(wrong_way_includes(repository()), IsEmpty());
}

TEST(Layers, a_ring_of_includes_is_found) {
  const std::vector<SourceFile> files = {{"mesh/a.h", "#include \"mesh/b.h\"\n"},
                                         {"mesh/b.h", "#include \"mesh/c.h\"\n"},
                                         {"mesh/c.h", "#include \"mesh/b.h\"\n"},
                                         {"mesh/d.cpp", "#include \"mesh/a.h\"\n"}};
  EXPECT_THAT(include_rings(files), ElementsAre("mesh/b.h -> mesh/c.h -> mesh/b.h"));
}

TEST(Layers, a_header_may_end_with_the_bodies_of_its_templates) {
  EXPECT_THAT(include_rings({{"mesh/a.h", "#include \"mesh/a_terms.h\"\n"},
                             {"mesh/a_terms.h", "#include \"mesh/a.h\"\n"}}),
              IsEmpty());
}

TEST(Layers, no_includes_form_a_ring) { EXPECT_THAT(include_rings(repository()), IsEmpty()); }

TEST(Headers, one_without_description_or_guard_is_found) {
  const std::vector<SourceFile> files = {{"mesh/a.h", "/// Good.\n#pragma once\n"},
                                         {"mesh/b.h", "#pragma once\n"},
                                         {"mesh/c.h", "/// Unguarded.\n"}};
  EXPECT_THAT(undescribed_headers(files),
              ElementsAre("mesh/b.h: begins without ///", "mesh/b.h: #pragma once is missing",
                          "mesh/c.h: #pragma once is missing"));
}

TEST(Headers, every_one_begins_with_its_description) {
  EXPECT_THAT(undescribed_headers(repository()), IsEmpty());
}

TEST(TopLevel, a_stranger_and_a_gap_are_found) {
  EXPECT_THAT(misplaced_at_top({".git", "build", "CMakeLists.txt", "README.md", "DEVELOPERS.md",
                                "LICENSE", "solver", "mesh", "post", "cases", "tests", "scripts"}),
              ElementsAre("scripts: does not belong at the top level",
                          "docs: is missing at the top level"));
}

TEST(TopLevel, holds_what_belongs_there) {
  std::vector<std::string> names;
  for (const auto& entry : fs::directory_iterator(FALCATE_SOURCE_DIR)) {
    names.push_back(entry.path().filename().string());
  }
  EXPECT_THAT(misplaced_at_top(names), IsEmpty());
}

TEST(CommentStripping, blanks_comments_and_strings_and_keeps_lines) {
  EXPECT_EQ(without_comments("a // b\n/* c\n d */ e", false), "a     \n    \n      e");
  EXPECT_EQ(without_comments("f(\"x // y\", 'z');", false), "f(\"      \", ' ');");
  EXPECT_EQ(without_comments("f(\"x // y\"); // w", true), "f(\"x // y\");     ");
  EXPECT_EQ(without_comments("n = 1'000; // m", false), "n = 1'000;     ");
}

TEST(Repository, was_read) {
  EXPECT_GT(repository().size(), 20U);
  EXPECT_TRUE(std::any_of(repository().begin(), repository().end(),
                          [](const SourceFile& file) { return file.path == "mesh/point.h"; }));
}

}  // namespace
}  // namespace falcate::architecture
