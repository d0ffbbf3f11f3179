#include "post/results_file.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>

#include "post/whole_file.h"

namespace falcate::post {
namespace {

using Json = nlohmann::ordered_json;

Json number(double value) { return std::isfinite(value) ? Json(value) : Json(nullptr); }

double number(const Json& json) {
  return json.is_null() ? std::numeric_limits<double>::quiet_NaN() : json.get<double>();
}

/// Numbers of a point that are not figures: always there, or of a wheel alone.
struct PointColumn {
  const char* key;
  double PointResult::*value;
};
constexpr PointColumn wheel_columns[] = {{"speed_rpm", &PointResult::speed_rpm},
                                         {"blade_speed_m_s", &PointResult::blade_speed_m_s},
                                         {"speed_ratio", &PointResult::speed_ratio}};

/// What must balance: told, but carrying no error bar.
struct BalanceColumn {
  const char* key;
  double PassageFigures::*value;
};
constexpr BalanceColumn balance_columns[] = {
    {"mass_imbalance", &PassageFigures::mass_imbalance},
    {"momentum_tangential_n_m", &PassageFigures::momentum_tangential_n_m},
    {"momentum_axial_n_m", &PassageFigures::momentum_axial_n_m}};

const Json& place(const Json& object, const FigureRow& row) {
  return *row.group == '\0' ? object.at(row.key) : object.at(row.group).at(row.key);
}

void put(Json& object, const FigureRow& row, Json value) {
  (*row.group == '\0' ? object[row.key] : object[row.group][row.key]) = std::move(value);
}

Json solution_json(const PointResult& point) {
  const solver::SteadySummary& s = point.solution;
  return {
      {"status", status_words(s.status)},         {"reason", s.reason},
      {"residual_drop", number(s.residual_drop)}, {"newton_steps", s.newton_steps},
      {"krylov_iterations", s.krylov_iterations}, {"residual_evaluations", s.residual_evaluations},
      {"seconds", number(point.seconds)},         {"cells", point.cells}};
}

/// Figures of a point that failed are null: nothing stands there to be read as a result.
Json point_json(const PointResult& point) {
  Json json = {{"id", point.id}, {"shape", point.shape}};
  const bool stands = point.failure.empty();
  if (point.wheel)
    for (const PointColumn& column : wheel_columns) json[column.key] = number(point.*column.value);
  Json error = Json::object();
  for (const FigureRow& row : figure_rows()) {
    if (row.wheel_only && !point.wheel) continue;
    put(json, row, stands ? number(figure_value(row, point.figures)) : Json(nullptr));
    put(error, row, stands ? number(figure_value(row, point.numerical_error)) : Json(nullptr));
  }
  for (const BalanceColumn& column : balance_columns)
    json["balance"][column.key] = stands ? number(point.figures.*column.value) : Json(nullptr);
  json["numerical_error"] = error;
  json["numerical_error_basis"] = point.numerical_error.basis;
  json["solution"] = solution_json(point);
  json["failure"] = point.failure;
  json["remarks"] = point.remarks;
  return json;
}

PointResult point_from(const Json& json) {
  PointResult point;
  point.id = json.at("id").get<std::string>();
  point.shape = json.at("shape").get<std::string>();
  point.wheel = json.contains(wheel_columns[0].key);
  if (point.wheel)
    for (const PointColumn& column : wheel_columns)
      point.*column.value = number(json.at(column.key));
  const Json& error = json.at("numerical_error");
  for (const FigureRow& row : figure_rows()) {
    if (row.wheel_only && !point.wheel) continue;
    figure_value(row, point.figures) = number(place(json, row));
    figure_value(row, point.numerical_error) = number(place(error, row));
  }
  for (const BalanceColumn& column : balance_columns)
    point.figures.*column.value = number(json.at("balance").at(column.key));
  point.numerical_error.basis = json.value("numerical_error_basis", std::string());
  const Json& solution = json.at("solution");
  point.solution.status = status_from_words(solution.at("status").get<std::string>());
  point.solution.reason = solution.at("reason").get<std::string>();
  point.solution.residual_drop = number(solution.at("residual_drop"));
  point.solution.newton_steps = solution.at("newton_steps").get<int>();
  point.solution.krylov_iterations = solution.at("krylov_iterations").get<long>();
  point.solution.residual_evaluations = solution.at("residual_evaluations").get<long>();
  point.seconds = number(solution.at("seconds"));
  point.cells = solution.at("cells").get<int>();
  point.failure = json.at("failure").get<std::string>();
  point.remarks = json.at("remarks").get<std::vector<std::string>>();
  return point;
}

/// A field of comma-separated values, quoted where it must be (RFC 4180).
std::string field(const std::string& text) {
  if (text.find_first_of(",\"\r\n") == std::string::npos) return text;
  std::string quoted = "\"";
  for (char c : text) quoted += c == '"' ? std::string("\"\"") : std::string(1, c);
  return quoted + '"';
}

std::string field(double value) {
  return std::isfinite(value) ? fmt::format("{}", value) : std::string();
}

std::string heading(bool wheel) {
  std::string line = "id,shape";
  if (wheel)
    for (const PointColumn& column : wheel_columns) line += fmt::format(",{}", column.key);
  for (const FigureRow& row : figure_rows()) {
    if (row.wheel_only && !wheel) continue;
    const std::string name =
        *row.group == '\0' ? std::string(row.key) : fmt::format("{}_{}", row.group, row.key);
    line += fmt::format(",{0},{0}_error", name);
  }
  return line + ",status,residual_drop,residual_evaluations,seconds,cells,failure\n";
}

std::string line_of(const PointResult& point, bool wheel) {
  std::string line = field(point.id) + ',' + field(point.shape);
  if (wheel)
    for (const PointColumn& column : wheel_columns)
      line += ',' + (point.wheel ? field(point.*column.value) : std::string());
  for (const FigureRow& row : figure_rows()) {
    if (row.wheel_only && !wheel) continue;
    const bool stands = point.failure.empty() && (point.wheel || !row.wheel_only);
    line += ',' + (stands ? field(figure_value(row, point.figures)) : std::string());
    line += ',' + (stands ? field(figure_value(row, point.numerical_error)) : std::string());
  }
  const solver::SteadySummary& s = point.solution;
  return line + fmt::format(",{},{},{},{},{},{}\n", status_words(s.status), field(s.residual_drop),
                            s.residual_evaluations, field(point.seconds), point.cells,
                            field(point.failure));
}

}  // namespace

void write_results_json(const Results& results, const std::string& path) {
  Json json = {{"title", results.title},
               {"version", results.version},
               {"case_sha256", results.case_sha256},
               {"points", Json::array()}};
  for (const PointResult& point : results.points) json["points"].push_back(point_json(point));
  write_whole_file(path, json.dump(2, ' ', false, Json::error_handler_t::replace) + '\n');
}

void write_results_csv(const Results& results, const std::string& path) {
  const bool wheel = std::any_of(results.points.begin(), results.points.end(),
                                 [](const PointResult& point) { return point.wheel; });
  std::string text = heading(wheel);
  for (const PointResult& point : results.points) text += line_of(point, wheel);
  write_whole_file(path, text);
}

Results read_results_json(const std::string& path) {
  const std::string text = read_whole_file(path);
  Results results;
  try {
    const Json json = Json::parse(text);
    results.title = json.at("title").get<std::string>();
    results.version = json.at("version").get<std::string>();
    results.case_sha256 = json.at("case_sha256").get<std::string>();
    for (const Json& point : json.at("points")) results.points.push_back(point_from(point));
  } catch (const std::exception& error) {
    throw OutputError(fmt::format("{}: not a results file: {}", path, error.what()));
  }
  return results;
}

}  // namespace falcate::post
