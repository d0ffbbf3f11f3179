#include "post/whole_file.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/resource.h>
#include <unistd.h>

#include <csignal>
#include <filesystem>
#include <fstream>
#include <string>

namespace falcate::post {
namespace {

namespace fs = std::filesystem;

class WholeFileTest : public testing::Test {
 protected:
  void SetUp() override {
    const auto* test = testing::UnitTest::GetInstance()->current_test_info();
    folder_ = fs::path(testing::TempDir()) / (std::string("falcate_") + test->name());
    fs::remove_all(folder_);
    fs::create_directories(folder_);
  }
  void TearDown() override { fs::remove_all(folder_); }
  std::string path(const std::string& name) const { return (folder_ / name).string(); }
  long entries() const {
    return std::distance(fs::directory_iterator(folder_), fs::directory_iterator());
  }
  fs::path folder_;
};

TEST_F(WholeFileTest, WritesAndReadsBack) {
  const std::string content("line\n\0binary\xff", 13);
  write_whole_file(path("a.json"), content);
  EXPECT_EQ(read_whole_file(path("a.json")), content);
  write_whole_file(path("a.json"), "");
  EXPECT_EQ(read_whole_file(path("a.json")), "");
  EXPECT_EQ(entries(), 1);
}

TEST_F(WholeFileTest, NameWithoutFolderIsInTheWorkingFolder) {
  const fs::path here = fs::current_path();
  fs::current_path(folder_);
  write_whole_file("b.csv", "x\n");
  fs::current_path(here);
  EXPECT_EQ(read_whole_file(path("b.csv")), "x\n");
}

TEST_F(WholeFileTest, MissingFolder) {
  EXPECT_THAT([&] { write_whole_file(path("none/a.json"), "x"); },
              testing::ThrowsMessage<OutputError>(path("none/a.json") +
                                                  ": cannot write: No such file or directory"));
}

TEST_F(WholeFileTest, MissingFileAndFolderInItsPlace) {
  EXPECT_THAT([&] { read_whole_file(path("a.json")); },
              testing::ThrowsMessage<OutputError>(path("a.json") +
                                                  ": cannot read: No such file or directory"));
  EXPECT_THAT(
      [&] { read_whole_file(folder_.string()); },
      testing::ThrowsMessage<OutputError>(folder_.string() + ": cannot read: Is a directory"));
}

TEST_F(WholeFileTest, FolderInTheWay) {
  fs::create_directories(folder_ / "a.json" / "deeper");
  EXPECT_THAT(
      [&] { write_whole_file(path("a.json"), "x"); },
      testing::ThrowsMessage<OutputError>(path("a.json") + ": cannot write: Is a directory"));
  EXPECT_EQ(entries(), 1);
}

/// A limit on the size of files stands for the end of the disk: write() fails part of the way.
TEST_F(WholeFileTest, NoRoomLeavesTheOldFileAndNothingElse) {
  write_whole_file(path("a.json"), "old");
  rlimit before{};
  ASSERT_EQ(getrlimit(RLIMIT_FSIZE, &before), 0);
  const rlimit small{4096, before.rlim_max};
  const auto handler = std::signal(SIGXFSZ, SIG_IGN);
  ASSERT_EQ(setrlimit(RLIMIT_FSIZE, &small), 0);
  std::string message;
  try {
    write_whole_file(path("a.json"), std::string(1 << 20, 'x'));
  } catch (const OutputError& error) {
    message = error.what();
  }
  setrlimit(RLIMIT_FSIZE, &before);
  std::signal(SIGXFSZ, handler);
  EXPECT_EQ(message, path("a.json") + ": cannot write: File too large");
  EXPECT_EQ(read_whole_file(path("a.json")), "old");
  EXPECT_EQ(entries(), 1);
}

TEST_F(WholeFileTest, AbandonedTemporaryIsRemoved) {
  {
    WholeFile file(path("flow.vtu"));
    std::ofstream(file.temporary()) << "half";
    EXPECT_EQ(fs::path(file.temporary()).extension(), ".vtu");
    EXPECT_EQ(fs::path(file.temporary()).parent_path(), folder_);
    EXPECT_EQ(entries(), 1);
  }
  EXPECT_EQ(entries(), 0);
}

TEST_F(WholeFileTest, KeptTemporaryTakesItsPlace) {
  WholeFile file(path("flow.vtu"));
  std::ofstream(file.temporary()) << "whole";
  file.keep();
  EXPECT_EQ(read_whole_file(path("flow.vtu")), "whole");
  EXPECT_EQ(entries(), 1);
}

TEST_F(WholeFileTest, KeepingWhatWasNeverWritten) {
  WholeFile file(path("flow.vtu"));
  EXPECT_THAT([&] { file.keep(); },
              testing::ThrowsMessage<OutputError>(path("flow.vtu") +
                                                  ": cannot write: No such file or directory"));
}

}  // namespace
}  // namespace falcate::post
