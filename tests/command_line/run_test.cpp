// `falcate run` and `falcate report` from case file to results, as a user meets them.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <fstream>
#include <nlohmann/json.hpp>
#include <regex>

#include "tests/command_line/program.h"

namespace falcate::command_line {
namespace {

using cases::ScratchFolder;
using ::testing::HasSubstr;
namespace fs = std::filesystem;

/// Times differ from run to run; nothing else may.
std::string without_times(const std::string& json) {
  return std::regex_replace(json, std::regex("\"seconds\": [-+.0-9e]+"), "\"seconds\": 0");
}

void expect_same_results(const ScratchFolder& folder, const std::string& a, const std::string& b) {
  EXPECT_EQ(without_times(content(folder.path(a + "/results.json"))),
            without_times(content(folder.path(b + "/results.json"))));
  int files = 0;
  for (const auto& entry : fs::recursive_directory_iterator(folder.path(a))) {
    const std::string name = fs::relative(entry.path(), folder.path(a)).string();
    if (entry.path().extension() != ".state" && name.rfind("flow/", 0) != 0 &&
        name.rfind("shapes/", 0) != 0)
      continue;
    ++files;
    EXPECT_TRUE(content(folder.path(a + "/" + name)) == content(folder.path(b + "/" + name)))
        << name;
  }
  EXPECT_GE(files, 10);
}

TEST(Run, GivesTheSameResultsOnOneAndTwoThreadsAndAfterAStop) {
  const ScratchFolder folder;
  folder.write("quick.toml", quick_case());
  const Outcome one = falcate(folder, "run quick.toml --out one --threads 1");
  ASSERT_EQ(one.status, 0) << one.out << one.err;
  EXPECT_EQ(one.err, "");
  const Outcome two = falcate(folder, "run quick.toml --out two --threads 2");
  ASSERT_EQ(two.status, 0) << two.out << two.err;
  expect_same_results(folder, "one", "two");

  // As if stopped in the middle: a point not there, one half written, no results.
  fs::copy(folder.path("one"), folder.path("stopped"), fs::copy_options::recursive);
  fs::remove(folder.path("stopped/points/point-02.json"));
  fs::remove(folder.path("stopped/results.json"));
  fs::resize_file(folder.path("stopped/points/point-04.state"), 1000);
  const Outcome on = falcate(folder, "run quick.toml --out stopped");
  ASSERT_EQ(on.status, 0) << on.out << on.err;
  EXPECT_THAT(on.out, HasSubstr("2 finished before"));
  expect_same_results(folder, "one", "stopped");
}

TEST(Run, WritesResultsThatMeetTheirDescription) {
  const ScratchFolder folder;
  folder.write("quick.toml", quick_case());
  const Outcome outcome = falcate(folder, "run quick.toml --quiet");
  ASSERT_EQ(outcome.status, 0) << outcome.err;
  EXPECT_EQ(outcome.out, "");
  for (const char* name : {"results.json", "results.csv", "report.html", "log.txt", "flow/flow.pvd",
                           "flow/point-01.vtu", "flow/point-04.vtu", "shapes/channel.csv"})
    EXPECT_GT(content(folder.path("results-quick/" + std::string(name))).size(), 50U) << name;
  const auto json = nlohmann::json::parse(content(folder.path("results-quick/results.json")));
  EXPECT_EQ(json["title"], "quick");
  EXPECT_EQ(json["case_sha256"].get<std::string>().size(), 64U);
  ASSERT_EQ(json["points"].size(), 4U);
  double before = 0.0;
  for (const auto& point : json["points"]) {
    EXPECT_EQ(point["solution"]["status"], "steady");
    EXPECT_GT(point["speed_rpm"].get<double>(), before);
    before = point["speed_rpm"].get<double>();
    // A frictionless impulse stage of 20 deg cannot pass cos^2(20 deg) = 0.883 (handbook).
    EXPECT_GT(point["efficiency"]["blade"].get<double>(), 0.6);
    EXPECT_LT(point["efficiency"]["blade"].get<double>(), 0.883);
    EXPECT_GT(point["numerical_error"]["turning_deg"].get<double>(), 0.0);
    // Energy: what the supply gives is the shaft power and the losses.
    double sum = point["power_w"].get<double>();
    for (const auto& loss : point["losses"]) sum += loss.get<double>();
    EXPECT_NEAR(sum / point["supply_power_w"].get<double>(), 1.0, 1e-9);
  }

  fs::remove(folder.path("results-quick/report.html"));
  const Outcome report = falcate(folder, "report results-quick");
  EXPECT_EQ(report.status, 0) << report.err;
  EXPECT_THAT(content(folder.path("results-quick/report.html")), HasSubstr("</html>"));
}

TEST(Run, RecordsPointsThatFailAndSaysSoByItsStatus) {
  const ScratchFolder folder;
  folder.write("hasty.toml", quick_case() + "max_steps = 5\naveraging_steps = 0\n");
  const Outcome outcome = falcate(folder, "run hasty.toml --out hasty");
  EXPECT_EQ(outcome.status, 3);
  EXPECT_EQ(outcome.err, "4 of 4 points failed; the reasons are in hasty/log.txt\n");
  EXPECT_THAT(content(folder.path("hasty/log.txt")), HasSubstr("step limit reached"));
  const auto json = nlohmann::json::parse(content(folder.path("hasty/results.json")));
  ASSERT_EQ(json["points"].size(), 4U);
  for (const auto& point : json["points"]) EXPECT_EQ(point["solution"]["status"], "failed");
}

TEST(Report, OfARunInWhichEveryPointFailedTellsWhichAndWhy) {
  const ScratchFolder folder;
  folder.write("hasty.toml", quick_case() + "max_steps = 5\naveraging_steps = 0\n");
  ASSERT_EQ(falcate(folder, "run hasty.toml --out hasty").status, 3);
  const std::string first = content(folder.path("hasty/report.html"));
  fs::remove(folder.path("hasty/report.html"));
  const Outcome report = falcate(folder, "report hasty");
  EXPECT_EQ(report.status, 0) << report.err;
  EXPECT_EQ(report.out, "Report of 4 points: hasty/report.html\n");
  EXPECT_EQ(content(folder.path("hasty/report.html")), first);
  EXPECT_THAT(first, HasSubstr("No point could be solved; the reasons stand below."));
  EXPECT_THAT(first, HasSubstr("Points that failed"));
  EXPECT_THAT(first, HasSubstr("step limit reached before the residual target"));
}

TEST(Report, OfARunThatFinishedNoPointIsRefused) {
  const ScratchFolder folder;
  folder.write("hasty.toml", quick_case() + "max_steps = 5\naveraging_steps = 0\n");
  ASSERT_EQ(falcate(folder, "run hasty.toml --out hasty").status, 3);
  for (const char* point : {"point-01", "point-02", "point-03", "point-04"})
    fs::remove(folder.path(std::string("hasty/points/") + point + ".json"));
  const Outcome report = falcate(folder, "report hasty");
  EXPECT_EQ(report.status, 2);
  EXPECT_EQ(report.err, "no point is finished yet; go on with the run first\n");
}

TEST(Run, OfABadCaseWritesNothing) {
  const ScratchFolder folder;
  folder.write("good.toml", quick_case());
  folder.write("bad.toml", "[supply]\npressure = \"6 bar\"\n");
  EXPECT_EQ(falcate(folder, "run good.toml bad.toml --out results").status, 2);
  EXPECT_FALSE(fs::exists(folder.path("results")));
}

TEST(Run, LeavesTheFolderOfAnotherCaseAlone) {
  const ScratchFolder folder;
  folder.write("quick.toml", quick_case() + "max_steps = 5\naveraging_steps = 0\n");
  ASSERT_EQ(falcate(folder, "run quick.toml --out results").status, 3);
  folder.write("quick.toml", quick_case() + "max_steps = 6\naveraging_steps = 0\n");
  const Outcome other = falcate(folder, "run quick.toml --out results");
  EXPECT_EQ(other.status, 2);
  EXPECT_EQ(other.err,
            "results: holds the results of another case, an older state of this one or another "
            "version of the program; choose another folder with --out, or remove it\n");
  fs::create_directories(folder.path("letters"));
  folder.write("letters/dear.txt", "dear");
  const Outcome letters = falcate(folder, "run quick.toml --out letters");
  EXPECT_EQ(letters.status, 2);
  EXPECT_EQ(letters.err,
            "letters: is in use for something else; choose another folder with --out\n");
}

TEST(Run, SaysWhenItCannotWrite) {
  const ScratchFolder folder;
  folder.write("quick.toml", quick_case());
  const Outcome outcome = falcate(folder, "run quick.toml --out /proc/falcate");
  EXPECT_EQ(outcome.status, 4);
  EXPECT_THAT(outcome.err, HasSubstr("falcate: /proc/falcate"));
}

TEST(Report, OfAFolderWithoutResultsIsRefused) {
  const ScratchFolder folder;
  const Outcome outcome = falcate(folder, "report nothing");
  EXPECT_EQ(outcome.status, 2);
  EXPECT_EQ(outcome.err, "nothing: holds no results\n");
}

}  // namespace
}  // namespace falcate::command_line
