#include "cases/run_outputs.h"

#include <fmt/format.h>

#include <algorithm>

#include "cases/derived_state.h"
#include "cases/wheel_safety.h"
#include "post/flow_file.h"
#include "post/report.h"
#include "post/results_file.h"
#include "post/speed_line.h"
#include "post/whole_file.h"

namespace falcate::cases {
namespace {

bool stands(const SolvedPoint& point) { return point.result.failure.empty(); }

std::vector<post::PointResult> results_of(const RunOutputs& run) {
  std::vector<post::PointResult> results;
  for (const SolvedPoint& point : run.solved) results.push_back(point.result);
  return results;
}

void write_shape(const RunOutputs& run, const ResultsFolder& folder) {
  std::string text = "# blade outline, mm: x axial, y the way the wheel turns\nx,y\n";
  for (const mesh::Point& point : run.row.outline.polygon())
    text += fmt::format("{:.9f},{:.9f}\n", point.x() * 1e3, point.y() * 1e3);
  post::write_whole_file(folder.file("shapes/" + run.input.shape + ".csv"), text);
}

void write_flow(const RunOutputs& run, const ResultsFolder& folder) {
  std::vector<post::CollectionEntry> entries;
  for (std::size_t i = 0; i < run.solved.size(); ++i) {
    const SolvedPoint& point = run.solved[i];
    if (!stands(point)) continue;
    post::FlowField field;
    field.title = fmt::format("{}: {}", run.input.title, point.result.id);
    field.mesh = &run.mesh;
    field.cells = &point.states.back();
    field.gas = run.input.gas;
    field.inlet_total_pressure = run.points[i].inlet.total_pressure;
    field.inlet_total_temperature = run.points[i].inlet.total_temperature;
    field.passages = run.input.passages;
    post::write_flow_file(field, folder.file("flow/" + point.result.id + ".vtu"));
    entries.push_back({point.result.speed_rpm, point.result.id + ".vtu"});
  }
  post::write_flow_collection(entries, folder.file("flow/flow.pvd"));
}

/// Pictures: the best point first, then the ends of the speed line.
std::vector<post::PictureField> pictures(const RunOutputs& run) {
  std::vector<std::size_t> standing;
  for (std::size_t i = 0; i < run.solved.size(); ++i)
    if (stands(run.solved[i])) standing.push_back(i);
  if (standing.empty()) return {};
  const std::size_t best =
      *std::max_element(standing.begin(), standing.end(), [&](std::size_t a, std::size_t b) {
        return run.solved[a].result.figures.blade_efficiency <
               run.solved[b].result.figures.blade_efficiency;
      });
  std::vector<std::size_t> shown{best};
  for (const std::size_t i : {standing.front(), standing.back()})
    if (std::find(shown.begin(), shown.end(), i) == shown.end()) shown.push_back(i);
  std::vector<post::PictureField> fields;
  for (const std::size_t i : shown)
    fields.push_back({run.solved[i].result.id, &run.mesh, &run.solved[i].states.back()});
  return fields;
}

std::vector<std::pair<std::string, std::string>> flat_rows(const DerivedState& state) {
  std::vector<std::pair<std::string, std::string>> rows;
  for (const DerivedGroup& group : state.groups)
    rows.insert(rows.end(), group.rows.begin(), group.rows.end());
  return rows;
}

/// The computed runaway speed says more than the bound that `check` goes by.
void add_computed_safety(const RunOutputs& run, const post::SpeedLine& line, DerivedState& state) {
  if (!line.runaway_speed_rpm || line.runaway_extrapolated) return;
  for (const post::SafetyRow& row : wheel_safety(run.input, line.runaway_speed_rpm)) {
    const std::string text = fmt::format("{}: {}", row.quantity, row.caution);
    if (!row.caution.empty() &&
        std::find(state.cautions.begin(), state.cautions.end(), text) == state.cautions.end())
      state.cautions.push_back(text);
  }
}

post::ReportInput report_input(const RunOutputs& run) {
  DerivedState state = derived_state(run.input, run.row, run.points);
  post::ReportInput report;
  report.title = run.input.title;
  report.version = FALCATE_VERSION;
  report.case_text = run.input.text;
  report.derived = flat_rows(state);
  report.heat_capacity_ratio = run.input.gas.heat_capacity_ratio;
  report.gas_constant = run.input.gas.gas_constant;
  report.pitch = run.row.pitch;
  report.blade = run.row.outline.polygon();
  report.points = results_of(run);
  if (run.input.kind == CaseKind::wheel) {
    for (const OperatingPoint& point : run.points) report.triangles.push_back(*point.triangle);
    if (std::count_if(run.solved.begin(), run.solved.end(), stands) > 1) {
      report.speed_line = post::make_speed_line(report.points);
      add_computed_safety(run, *report.speed_line, state);
    }
  }
  report.cautions = state.cautions;
  report.pictures = pictures(run);
  return report;
}

void write_log(const RunOutputs& run, const ResultsFolder& folder) {
  std::string text =
      fmt::format("falcate {}\ncase {}\ncase_sha256 {}\nmesh {} cells\n", FALCATE_VERSION,
                  run.input.title, run.input.sha256, run.mesh.cell_count());
  for (const SolvedPoint& point : run.solved) {
    text += point_line(point.result) + "\n";
    text += fmt::format(
        "  {} steps, {} residual evaluations, residual {:.1e}, {:.2f} s: {}\n",
        point.result.solution.newton_steps, point.result.solution.residual_evaluations,
        point.result.solution.residual_drop, point.result.seconds, point.result.solution.reason);
    for (const std::string& remark : point.result.remarks) text += "  " + remark + "\n";
  }
  post::write_whole_file(folder.file("log.txt"), text);
}

}  // namespace

std::string point_line(const post::PointResult& point) {
  const std::string head = point.wheel ? fmt::format("{}  {:>7.0f} rpm  u/c1 {:.3f}", point.id,
                                                     point.speed_rpm, point.speed_ratio)
                                       : point.id;
  if (!point.failure.empty()) return fmt::format("{}  FAILED: {}", head, point.failure);
  const auto& figures = point.figures;
  const auto& error = point.numerical_error;
  std::string text =
      fmt::format("{}  exit {:.2f} +- {:.2f} deg  Mach {:.3f} +- {:.3f}", head,
                  figures.exit.angle_deg, error.exit.angle_deg, figures.exit.mach, error.exit.mach);
  if (point.wheel)
    text += fmt::format("  blade efficiency {:.1f} +- {:.1f} %", 100.0 * figures.blade_efficiency,
                        100.0 * error.blade_efficiency);
  return text;
}

void write_report_only(const RunOutputs& run, const ResultsFolder& folder) {
  post::write_report(report_input(run), folder.file("report.html"));
}

void write_outputs(const RunOutputs& run, const ResultsFolder& folder) {
  const post::Results results{run.input.title, FALCATE_VERSION, run.input.sha256, results_of(run)};
  post::write_results_json(results, folder.file("results.json"));
  post::write_results_csv(results, folder.file("results.csv"));
  write_shape(run, folder);
  write_flow(run, folder);
  write_log(run, folder);
  write_report_only(run, folder);
}

}  // namespace falcate::cases
