// A report of invented data, read as text and opened in a real browser.
#include "post/report.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cstdlib>
#include <filesystem>
#include <regex>
#include <set>

#include "post/output_error.h"
#include "post/whole_file.h"
#include "tests/unit/post/invented_report.h"

namespace falcate::post {
namespace {

namespace fs = std::filesystem;
using testing::HasSubstr;
using testing::Not;

const std::string hostile = "</title><script>console.error('broken out')</script>&amp; \"'";

fs::path fresh_folder(const std::string& name) {
  const fs::path folder = fs::path(testing::TempDir()) / ("falcate_report_" + name);
  fs::remove_all(folder);
  fs::create_directories(folder);
  return folder;
}

std::string written(const ReportInput& input, const fs::path& path) {
  write_report(input, path.string());
  return read_whole_file(path.string());
}

TEST(Report, AnswersFirstWithErrorBars) {
  const auto report = invented::report(2, 6);
  const std::string html = written(report.input, fresh_folder("answer") / "report.html");
  EXPECT_THAT(html, HasSubstr("The blade efficiency is highest at the highest speed computed, "
                              "23\u202f000 rpm (speed ratio 0.129): 38.86 ± 0.16 %. The best speed "
                              "lies beyond; add higher speeds to find it."));
  EXPECT_LT(html.find("class=\"answer\""), html.find("<svg"));
  EXPECT_THAT(html, HasSubstr("The passage chokes: it swallows 97 % of the flow offered."));
}

TEST(Report, FailedPointsStandWithTheirReasons) {
  const auto report = invented::report(4, 6);
  const std::string html = written(report.input, fresh_folder("failed") / "report.html");
  EXPECT_THAT(html, HasSubstr("1 of 4 points failed; the reasons stand below."));
  EXPECT_THAT(html,
              HasSubstr("<li><b>36\u202f000 rpm:</b> the flow did not settle: the residual rose "
                        "after 200 steps (invented)</li>"));
}

TEST(Report, RigIsToldByTurningMachAndLoss) {
  auto report = invented::report(1, 6);
  ReportInput& input = report.input;
  input.speed_line.reset();
  input.triangles.clear();
  input.points[0].wheel = false;
  input.points[0].id = "rig <1>";
  const std::string html = written(input, fresh_folder("rig") / "report.html");
  EXPECT_THAT(html,
              HasSubstr("The blade row turns the flow by 130.14 ± 0.52°, from 21.158 ± 0.085° to "
                        "151.30 ± 0.61° from the plane of rotation."));
  EXPECT_THAT(html, HasSubstr("loss of 8.700 ± 0.035 %"));
  EXPECT_THAT(html, HasSubstr("rig &lt;1&gt;"));
  EXPECT_THAT(html, Not(HasSubstr("Wheel efficiency")));
}

TEST(Report, EveryPointFailedIsStillAReport) {
  ReportInput input;
  input.title = "Nothing stands";
  PointResult point;
  point.id = "only";
  point.failure = "the mesh could not be made (invented)";
  input.points = {point};
  const std::string html = written(input, fresh_folder("nothing") / "report.html");
  EXPECT_THAT(html, HasSubstr("No point could be solved; the reasons stand below."));
  EXPECT_THAT(html, HasSubstr("<li><b>only:</b> the mesh could not be made (invented)</li>"));
}

TEST(Report, FieldWithoutNumbersIsToldNotDrawn) {
  auto report = invented::report(2, 6);
  (*report.fields[1])[3].pressure = std::nan("");
  const std::string html = written(report.input, fresh_folder("nan") / "report.html");
  EXPECT_THAT(html,
              HasSubstr("the flow field holds values that are no numbers; there is no picture"));
}

TEST(Report, SameInputSameBytesAndNoOutsideAddress) {
  const auto report = invented::report(2, 6);
  const fs::path folder = fresh_folder("same");
  const std::string html = written(report.input, folder / "a.html");
  EXPECT_EQ(html, written(report.input, folder / "b.html"));
  for (const char* word : {"src=", "url(http", "@import", "<link rel=\"stylesheet"}) {
    EXPECT_THAT(html, Not(HasSubstr(word)));
  }
  const std::regex names("\\bid=[\"']([^\"']+)[\"']");
  std::set<std::string> seen;
  for (std::sregex_iterator it(html.begin(), html.end(), names), end; it != end; ++it) {
    EXPECT_TRUE(seen.insert((*it)[1]).second) << "twice: " << (*it)[1];
  }
  EXPECT_GT(seen.size(), 20u);
}

TEST(Report, FolderThatIsMissingIsAnError) {
  const std::string path = (fresh_folder("missing") / "none" / "report.html").string();
  try {
    write_report(invented::report(1, 6).input, path);
    FAIL() << "no error";
  } catch (const OutputError& error) {
    EXPECT_EQ(error.what(), path + ": cannot write: No such file or directory");
  }
}

TEST(Report, OpensInABrowserWithAQuietConsole) {
  auto report = invented::report(2, 12);
  report.input.title += hostile;
  report.input.case_text += hostile;
  report.input.cautions.push_back(hostile);
  report.input.derived.push_back({hostile, hostile});
  report.input.points[1].remarks.push_back(hostile);
  const fs::path folder = fresh_folder("browser");
  write_report(report.input, (folder / "report.html").string());
  const std::string command = fmt::format(
      "cd '{0}' && chromium --headless --no-sandbox --disable-gpu --disable-quic --no-first-run "
      "--disable-background-networking --disable-component-update --disable-sync "
      "--user-data-dir='{0}/profile' --enable-logging=stderr --v=0 --dump-dom "
      "'file://{0}/report.html' > dom.html 2> log.txt",
      folder.string());
  ASSERT_EQ(std::system(command.c_str()), 0) << "chromium is missing or failed";
  const std::string dom = read_whole_file((folder / "dom.html").string());
  const std::string log = read_whole_file((folder / "log.txt").string());
  EXPECT_THAT(log, Not(HasSubstr("CONSOLE"))) << log;
  for (const char* id :
       {"speeds", "cautions", "case", "flow", "surface", "mesh", "figures", "method", "casefile"}) {
    EXPECT_THAT(dom, HasSubstr(fmt::format("<section id=\"{}\">", id)));
  }
  EXPECT_THAT(dom, Not(HasSubstr("<script")));
  EXPECT_THAT(dom, HasSubstr("Invented deburring spindle, 46 mm ringed wheel&lt;/title&gt;"));
  EXPECT_THAT(dom, HasSubstr("</main>"));
}

// The check above can fail: a page that does report an error is caught by it.
TEST(Report, ConsoleErrorWouldBeSeen) {
  const fs::path folder = fresh_folder("console");
  write_whole_file((folder / "page.html").string(), "<script>console.error('seen')</script>");
  const std::string command = fmt::format(
      "cd '{0}' && chromium --headless --no-sandbox --disable-gpu --disable-quic --no-first-run "
      "--disable-background-networking --disable-component-update --disable-sync "
      "--user-data-dir='{0}/profile' --enable-logging=stderr --v=0 --dump-dom "
      "'file://{0}/page.html' > dom.html 2> log.txt",
      folder.string());
  ASSERT_EQ(std::system(command.c_str()), 0) << "chromium is missing or failed";
  EXPECT_THAT(read_whole_file((folder / "log.txt").string()), HasSubstr("CONSOLE"));
}

}  // namespace
}  // namespace falcate::post
