#include "mesh/program_directory.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <fstream>

#include "mesh/passage_mesh.h"

namespace falcate::mesh {
namespace {

namespace fs = std::filesystem;

class ProgramDirectory : public testing::Test {
 protected:
  void SetUp() override {
    const auto* test = testing::UnitTest::GetInstance()->current_test_info();
    folder_ = fs::canonical(testing::TempDir()) / (std::string("falcate_program_") + test->name());
    fs::remove_all(folder_);
    fs::create_directories(folder_ / "real");
    fs::create_directories(folder_ / "links");
    std::ofstream(folder_ / "real" / "tool") << "program";
    fs::create_symlink(folder_ / "real" / "tool", folder_ / "links" / "tool");
  }
  void TearDown() override { fs::remove_all(folder_); }
  std::string at(const std::string& name) const { return (folder_ / name).string(); }
  fs::path folder_;
};

TEST_F(ProgramDirectory, IsThatOfTheLinkOfTheSystem) {
  EXPECT_EQ(program_directory({at("links/tool"), "/elsewhere", ""}), at("real"));
}

TEST_F(ProgramDirectory, IsThatOfThePathByWhichTheProgramWasStarted) {
  EXPECT_EQ(program_directory({at("none"), at("links/tool"), ""}), at("real"));
  const std::string relative = fs::relative(folder_ / "real" / "tool").string();
  EXPECT_EQ(program_directory({at("none"), relative, ""}), at("real"));
}

TEST_F(ProgramDirectory, OfABareNameIsOnTheSearchPath) {
  EXPECT_EQ(program_directory({at("none"), "tool", at("none") + "::" + at("links")}), at("real"));
}

TEST_F(ProgramDirectory, ThatNothingLeadsToIsAnError) {
  for (const ProgramTraces& traces :
       {ProgramTraces{at("none"), "", ""}, ProgramTraces{at("none"), "tool", at("none")},
        ProgramTraces{at("none"), at("none/tool"), at("links")}}) {
    try {
      program_directory(traces);
      FAIL() << "no error";
    } catch (const MeshError& error) {
      EXPECT_STREQ(error.what(),
                   "the directory of this program cannot be found, and the mesher lies there; "
                   "start the program by its full path");
    }
  }
}

// Both ways lead to this very program.
TEST_F(ProgramDirectory, OfTheRunningProgramIsFoundBothWays) {
  ProgramTraces traces = traces_of_this_program();
  const std::string directory = program_directory(traces);
  EXPECT_TRUE(fs::exists(fs::path(directory) / "mesh_tests"));
  traces.self_link = at("none");
  EXPECT_EQ(program_directory(traces), directory);
}

}  // namespace
}  // namespace falcate::mesh
