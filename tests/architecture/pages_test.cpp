// The pages for people: their links lead somewhere and the case file they show is a sound one.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <fstream>
#include <iterator>
#include <regex>
#include <string>
#include <vector>

#include "cases/case_file.h"

namespace falcate::architecture {
namespace {

using ::testing::IsEmpty;
using ::testing::Not;
namespace fs = std::filesystem;

std::string read(const fs::path& path) {
  std::ifstream stream(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(stream), {}};
}

/// Targets of [text](target) and ![text](target) that are files of the repository.
std::vector<std::string> link_targets(const std::string& page) {
  static const std::regex link(R"(\]\(([^)#:]+)(#[^)]*)?\))");
  std::vector<std::string> targets;
  for (auto at = std::sregex_iterator(page.begin(), page.end(), link); at != std::sregex_iterator();
       ++at) {
    targets.push_back((*at)[1].str());
  }
  return targets;
}

/// What stands between ```LANGUAGE and ``` in a page.
std::vector<std::string> code_blocks(const std::string& page, const std::string& language) {
  std::vector<std::string> blocks;
  const std::string open = "```" + language + "\n";
  for (std::size_t at = page.find(open); at != std::string::npos; at = page.find(open, at + 1)) {
    const std::size_t begin = at + open.size();
    blocks.push_back(page.substr(begin, page.find("\n```", begin) + 1 - begin));
  }
  return blocks;
}

class Pages : public ::testing::TestWithParam<const char*> {};

TEST_P(Pages, links_lead_to_files_of_the_repository) {
  const fs::path page = fs::path(FALCATE_SOURCE_DIR) / GetParam();
  ASSERT_THAT(read(page), Not(IsEmpty()));
  for (const auto& target : link_targets(read(page))) {
    EXPECT_TRUE(fs::exists(page.parent_path() / target)) << GetParam() << " links to " << target;
  }
}

INSTANTIATE_TEST_SUITE_P(All, Pages,
                         ::testing::Values("README.md", "DEVELOPERS.md", "docs/method.md",
                                           "docs/decisions.md", "docs/case-file.md",
                                           "docs/validation.md"),
                         [](const auto& info) {
                           return std::regex_replace(std::string(info.param), std::regex("\\W"),
                                                     "_");
                         });

TEST(PageReading, finds_links_and_blocks) {
  const std::string page =
      "See [a](docs/a.md#top), ![b](b.png), [c](https://example.org).\n"
      "```toml\nx = 1\n```\n```sh\nls\n```\n";
  EXPECT_THAT(link_targets(page), ::testing::ElementsAre("docs/a.md", "b.png"));
  EXPECT_THAT(code_blocks(page, "toml"), ::testing::ElementsAre("x = 1\n"));
}

TEST(Readme, shows_a_case_file_that_the_reader_takes) {
  const auto blocks = code_blocks(read(fs::path(FALCATE_SOURCE_DIR) / "README.md"), "toml");
  ASSERT_EQ(blocks.size(), 1U);
  const fs::path path = fs::path(::testing::TempDir()) / "readme_case.toml";
  std::ofstream(path, std::ios::binary) << blocks.front();
  EXPECT_NO_THROW({
    const cases::Case shown = cases::read_case(path.string());
    EXPECT_EQ(shown.title, "Deburring spindle, 46 mm ringed wheel");
    EXPECT_THAT(shown.speed_ratios, ::testing::SizeIs(5));
  });
}

}  // namespace
}  // namespace falcate::architecture
