#include "post/results_file.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <limits>
#include <nlohmann/json.hpp>
#include <sstream>
#include <string>
#include <vector>

#include "post/whole_file.h"

namespace falcate::post {
namespace {

namespace fs = std::filesystem;

class ResultsFileTest : public testing::Test {
 protected:
  void SetUp() override {
    const auto* test = testing::UnitTest::GetInstance()->current_test_info();
    folder_ = fs::path(testing::TempDir()) / (std::string("falcate_results_") + test->name());
    fs::remove_all(folder_);
    fs::create_directories(folder_);
  }
  void TearDown() override { fs::remove_all(folder_); }
  std::string path(const std::string& name) const { return (folder_ / name).string(); }
  fs::path folder_;
};

/// Invented figures, none a short decimal, so that a lost bit shows.
PointResult point(bool wheel) {
  PointResult p;
  p.id = "p1";
  p.shape = "channel";
  p.wheel = wheel;
  double value = 1.0 / 3.0;
  for (const FigureRow& row : figure_rows()) {
    if (row.wheel_only && !wheel) continue;
    figure_value(row, p.figures) = value *= 1.7;
    figure_value(row, p.numerical_error) = value * 1e-3;
  }
  p.figures.mass_imbalance = 1e-13 / 3.0;
  p.figures.momentum_tangential_n_m = 0.1 + 0.2;
  p.figures.momentum_axial_n_m = -1.0 / 7.0;
  if (wheel) {
    p.speed_rpm = 45000.0;
    p.blade_speed_m_s = 108.38;
    p.speed_ratio = 0.1 * 3.0;
  }
  p.solution.status = solver::SolutionStatus::averaged;
  p.solution.reason = "no steady state: averaged over \"12\" periods";
  p.solution.residual_drop = 3.3e-11;
  p.solution.newton_steps = 31;
  p.solution.krylov_iterations = 1234567890123L;
  p.solution.residual_evaluations = 4321;
  p.solution.seconds = 0.7;
  p.solution.history = {{1, 1.0, 5.0, 12}, {2, 1.0 / 3.0, 1e300, 14}};
  p.suction = {{1e-3, 2e-3, 0.0, 1e5 / 3.0, 0.7}, {2e-3, 2e-3, 1e-3, 9e4, -0.0}};
  p.pressure = {{1e-3, 1e-3, 5e-324, 1.2e5, 0.4}};
  p.cells = 8000;
  p.seconds = 1.25;
  p.numerical_error.basis = "21 converging, 4 differing by round-off alone";
  p.remarks = {"choked", "tab\there, \xc3\xa9"};
  return p;
}

void expect_same_figures(const PassageFigures& a, const PassageFigures& b) {
  for (const FigureRow& row : figure_rows())
    EXPECT_EQ(figure_value(row, a), figure_value(row, b)) << row.group << ' ' << row.key;
  EXPECT_EQ(a.mass_imbalance, b.mass_imbalance);
  EXPECT_EQ(a.momentum_tangential_n_m, b.momentum_tangential_n_m);
  EXPECT_EQ(a.momentum_axial_n_m, b.momentum_axial_n_m);
}

void expect_same(const PointResult& a, const PointResult& b) {
  EXPECT_EQ(a.id, b.id);
  EXPECT_EQ(a.shape, b.shape);
  EXPECT_EQ(a.wheel, b.wheel);
  EXPECT_EQ(a.speed_rpm, b.speed_rpm);
  EXPECT_EQ(a.blade_speed_m_s, b.blade_speed_m_s);
  EXPECT_EQ(a.speed_ratio, b.speed_ratio);
  expect_same_figures(a.figures, b.figures);
  for (const FigureRow& row : figure_rows())
    EXPECT_EQ(figure_value(row, a.numerical_error), figure_value(row, b.numerical_error));
  EXPECT_EQ(a.numerical_error.basis, b.numerical_error.basis);
  EXPECT_EQ(a.solution.status, b.solution.status);
  EXPECT_EQ(a.solution.reason, b.solution.reason);
  EXPECT_EQ(a.solution.residual_drop, b.solution.residual_drop);
  EXPECT_EQ(a.solution.newton_steps, b.solution.newton_steps);
  EXPECT_EQ(a.solution.krylov_iterations, b.solution.krylov_iterations);
  EXPECT_EQ(a.solution.residual_evaluations, b.solution.residual_evaluations);
  EXPECT_EQ(a.cells, b.cells);
  EXPECT_EQ(a.seconds, b.seconds);
  EXPECT_EQ(a.failure, b.failure);
  EXPECT_EQ(a.remarks, b.remarks);
}

TEST_F(ResultsFileTest, RoundTrip) {
  for (bool wheel : {true, false}) {
    Results results{"Spindle \"46 mm\" <b>", "0.1.0", "abc123", {point(wheel), point(wheel)}};
    results.points[1].id = "p2";
    write_results_json(results, path("results.json"));
    const Results read = read_results_json(path("results.json"));
    EXPECT_EQ(read.title, results.title);
    EXPECT_EQ(read.version, "0.1.0");
    EXPECT_EQ(read.case_sha256, "abc123");
    ASSERT_EQ(read.points.size(), 2u);
    for (std::size_t i = 0; i < 2; ++i) expect_same(results.points[i], read.points[i]);
  }
}

TEST_F(ResultsFileTest, SameResultsGiveTheSameBytes) {
  const Results results{"t", "0.1.0", "abc", {point(true)}};
  write_results_json(results, path("a.json"));
  write_results_json(read_results_json(path("a.json")), path("b.json"));
  EXPECT_EQ(read_whole_file(path("a.json")), read_whole_file(path("b.json")));
}

TEST_F(ResultsFileTest, KeysInTheirOrder) {
  write_results_json({"t", "0.1.0", "abc", {point(true)}}, path("a.json"));
  const auto json = nlohmann::ordered_json::parse(read_whole_file(path("a.json")));
  const auto keys = [](const nlohmann::ordered_json& object) {
    std::string all;
    for (const auto& item : object.items()) all += item.key() + ' ';
    return all;
  };
  EXPECT_EQ(keys(json), "title version case_sha256 points ");
  EXPECT_EQ(keys(json["points"][0]),
            "id shape speed_rpm blade_speed_m_s speed_ratio inlet exit absolute_exit_velocity_m_s "
            "turning_deg mass_flow_kg_s_m capacity_ratio total_pressure_loss force torque_n_m "
            "power_w efficiency supply_power_w losses balance numerical_error "
            "numerical_error_basis solution failure "
            "remarks ");
  EXPECT_EQ(keys(json["points"][0]["inlet"]),
            "angle_deg mach velocity_m_s pressure_pa total_pressure_pa total_temperature_k ");
  EXPECT_EQ(keys(json["points"][0]["force"]), "tangential_n_m axial_n_m tangential_n axial_n ");
  EXPECT_EQ(keys(json["points"][0]["efficiency"]), "blade wheel ");
  EXPECT_EQ(keys(json["points"][0]["numerical_error"]),
            "inlet exit absolute_exit_velocity_m_s turning_deg mass_flow_kg_s_m capacity_ratio "
            "total_pressure_loss force torque_n_m power_w efficiency supply_power_w losses ");
  EXPECT_EQ(keys(json["points"][0]["losses"]), "nozzle_w spill_w entry_w blade_w leaving_w ");
}

TEST_F(ResultsFileTest, RigHasTheFlowPartAlone) {
  write_results_json({"t", "0.1.0", "abc", {point(false)}}, path("a.json"));
  const auto json = nlohmann::json::parse(read_whole_file(path("a.json")))["points"][0];
  for (const char* key : {"speed_rpm", "efficiency", "capacity_ratio", "torque_n_m", "losses"})
    EXPECT_FALSE(json.contains(key)) << key;
  for (const char* key : {"turning_deg", "total_pressure_loss", "force"})
    EXPECT_TRUE(json.contains(key)) << key;
  EXPECT_FALSE(json["force"].contains("tangential_n"));
}

TEST_F(ResultsFileTest, NotFiniteIsNullAndReadsAsNotANumber) {
  PointResult p = point(true);
  p.figures.turning_deg = std::numeric_limits<double>::infinity();
  p.numerical_error.turning_deg = std::nan("");
  write_results_json({"t", "0.1.0", "abc", {p}}, path("a.json"));
  const auto json = nlohmann::json::parse(read_whole_file(path("a.json")))["points"][0];
  EXPECT_TRUE(json["turning_deg"].is_null());
  EXPECT_TRUE(json["numerical_error"]["turning_deg"].is_null());
  EXPECT_TRUE(std::isnan(read_results_json(path("a.json")).points[0].figures.turning_deg));
}

TEST_F(ResultsFileTest, FailedPointHasNoFigures) {
  PointResult p = point(true);
  p.failure = "The passage did not start.";
  write_results_json({"t", "0.1.0", "abc", {p}}, path("a.json"));
  const auto json = nlohmann::json::parse(read_whole_file(path("a.json")))["points"][0];
  for (const FigureRow& row : figure_rows()) {
    const auto& holder = *row.group == '\0' ? json : json[row.group];
    EXPECT_TRUE(holder[row.key].is_null()) << row.key;
  }
  EXPECT_EQ(json["failure"], p.failure);
  EXPECT_EQ(read_results_json(path("a.json")).points[0].failure, p.failure);
}

TEST_F(ResultsFileTest, TextThatIsNotUtf8IsReplacedNotFatal) {
  write_results_json({"caf\xe9", "0.1.0", "abc", {}}, path("a.json"));
  EXPECT_EQ(read_results_json(path("a.json")).title, "caf\xef\xbf\xbd");
}

TEST_F(ResultsFileTest, UnreadableFileSaysWhichAndWhy) {
  write_whole_file(path("a.json"), R"({"title":"t","version":"1"})");
  EXPECT_THAT([&] { read_results_json(path("a.json")); },
              testing::ThrowsMessage<OutputError>(
                  path("a.json") + ": not a results file: [json.exception.out_of_range.403] key "
                                   "'case_sha256' not found"));
  write_whole_file(path("b.json"), "{ half");
  EXPECT_THAT([&] { read_results_json(path("b.json")); },
              testing::ThrowsMessage<OutputError>(
                  testing::StartsWith(path("b.json") + ": not a results file: ")));
}

std::vector<std::string> lines(const std::string& text) {
  std::vector<std::string> all;
  std::istringstream stream(text);
  for (std::string line; std::getline(stream, line);) all.push_back(line);
  return all;
}

long commas(const std::string& line) { return std::count(line.begin(), line.end(), ','); }

TEST_F(ResultsFileTest, TableHasEveryFigureAndItsError) {
  write_results_csv({"t", "0.1.0", "abc", {point(true)}}, path("a.csv"));
  const auto rows = lines(read_whole_file(path("a.csv")));
  ASSERT_EQ(rows.size(), 2u);
  EXPECT_EQ(commas(rows[0]), commas(rows[1]));
  for (const FigureRow& row : figure_rows()) {
    const std::string name = *row.group == '\0' ? row.key : std::string(row.group) + '_' + row.key;
    EXPECT_THAT(rows[0], testing::HasSubstr(',' + name + ',' + name + "_error,"));
    EXPECT_THAT(rows[1],
                testing::HasSubstr(
                    ',' + nlohmann::json(figure_value(row, point(true).figures)).dump() + ','))
        << name;
  }
}

TEST_F(ResultsFileTest, TableQuotesTextAndLeavesFailedFiguresEmpty) {
  PointResult p = point(false);
  p.id = "a,\"b\"";
  p.failure = "no flow";
  write_results_csv({"t", "0.1.0", "abc", {p}}, path("a.csv"));
  const auto rows = lines(read_whole_file(path("a.csv")));
  EXPECT_EQ(commas(rows[0]) + 1, commas(rows[1]));  // one comma inside the quotes
  EXPECT_THAT(rows[1], testing::StartsWith("\"a,\"\"b\"\"\",channel,,,"));
  EXPECT_THAT(rows[1], testing::EndsWith(",8000,no flow"));
  EXPECT_THAT(rows[0], testing::Not(testing::HasSubstr("torque")));
}

TEST_F(ResultsFileTest, RecordKeepsEveryBit) {
  PointResult p = point(true);
  p.numerical_error.turning_deg = std::nan("");
  p.figures.power_w = -std::numeric_limits<double>::infinity();
  write_point_record(p, path("p1.json"));
  PointResult read = read_point_record(path("p1.json"));
  EXPECT_TRUE(std::isnan(read.numerical_error.turning_deg));
  read.numerical_error.turning_deg = p.numerical_error.turning_deg = 0.0;
  expect_same(p, read);
  EXPECT_EQ(read.solution.seconds, p.solution.seconds);
  ASSERT_EQ(read.solution.history.size(), 2u);
  for (std::size_t i = 0; i < 2; ++i) {
    EXPECT_EQ(read.solution.history[i].step, p.solution.history[i].step);
    EXPECT_EQ(read.solution.history[i].residual, p.solution.history[i].residual);
    EXPECT_EQ(read.solution.history[i].cfl, p.solution.history[i].cfl);
    EXPECT_EQ(read.solution.history[i].krylov_iterations, p.solution.history[i].krylov_iterations);
  }
  ASSERT_EQ(read.suction.size(), 2u);
  ASSERT_EQ(read.pressure.size(), 1u);
  EXPECT_EQ(read.suction[0].pressure_pa, p.suction[0].pressure_pa);
  EXPECT_EQ(read.suction[1].arc_length, 1e-3);
  EXPECT_TRUE(std::signbit(read.suction[1].isentropic_mach));
  EXPECT_EQ(read.pressure[0].arc_length, 5e-324);
  EXPECT_EQ(read.pressure[0].x, 1e-3);
  EXPECT_EQ(read.pressure[0].y, 1e-3);
}

TEST_F(ResultsFileTest, BadRecordSaysWhichAndWhy) {
  write_whole_file(path("p1.json"), R"({"kind":"another","version":1})");
  EXPECT_THAT([&] { read_point_record(path("p1.json")); },
              testing::ThrowsMessage<OutputError>(path("p1.json") +
                                                  ": not a record of a point: of another kind"));
  write_point_record(point(true), path("p2.json"));
  std::string text = read_whole_file(path("p2.json"));
  const auto place = text.find("averaged\"");
  text.replace(place, 8, "finished");
  write_whole_file(path("p2.json"), text);
  EXPECT_THAT(
      [&] { read_point_record(path("p2.json")); },
      testing::ThrowsMessage<OutputError>(
          path("p2.json") + ": not a record of a point: 'finished' is not a solution status"));
}

}  // namespace
}  // namespace falcate::post
