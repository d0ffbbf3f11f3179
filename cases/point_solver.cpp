#include "cases/point_solver.h"

#include <fmt/format.h>

#include <array>
#include <cmath>
#include <exception>
#include <numbers>

#include "cases/blade_row.h"
#include "cases/flow_remarks.h"
#include "post/error_bar.h"
#include "post/mixed_out.h"
#include "post/passage_figures.h"
#include "solver/steady_solver.h"

namespace falcate::cases {
namespace {

using States = std::vector<solver::Primitive>;

/// a + b - c cell by cell, or nothing where that is no gas.
States moved(const States& a, const States& b, const States& c) {
  States sum = a;
  for (std::size_t i = 0; i < sum.size(); ++i) {
    sum[i].density += b[i].density - c[i].density;
    sum[i].u += b[i].u - c[i].u;
    sum[i].v += b[i].v - c[i].v;
    sum[i].pressure += b[i].pressure - c[i].pressure;
    if (!(sum[i].density > 0.1 * a[i].density) || !(sum[i].pressure > 0.1 * a[i].pressure))
      return {};
  }
  return sum;
}

class PointSolver {
 public:
  PointSolver(const Case& input, const mesh::MeshLevels& meshes, const OperatingPoint& point,
              const LevelStates& before, RunObserver& observer)
      : case_(input), meshes_(meshes), point_(point), before_(before), observer_(observer) {
    solved_.states.resize(meshes.levels.size());
  }

  SolvedPoint solve() {
    describe();
    try {
      if (!solve_levels() && supersonic_entry()) {
        behind_shock_ = true;
        forget();
        solve_levels();
      }
      gather();
    } catch (const std::exception& error) {
      solved_.result.failure = error.what();
    }
    return std::move(solved_);
  }

 private:
  void describe() {
    post::PointResult& result = solved_.result;
    result.id = point_.id;
    result.shape = case_.shape;
    result.wheel = case_.kind == CaseKind::wheel;
    result.speed_rpm = point_.speed * 30.0 / std::numbers::pi;
    result.blade_speed_m_s = point_.blade_speed;
    result.speed_ratio = point_.speed_ratio;
    result.cells = meshes_.levels.back().cell_count();
  }

  /// Relative flow faster than sound, its axial part slower: the row may not swallow it.
  bool supersonic_entry() const {
    const double mach = point_.inlet.mach.value_or(0.0);
    return mach > 1.0 && mach * std::sin(point_.inlet.angle) < 1.0;
  }

  /// Coarse to fine; false as soon as the stream turns out not to be swallowed as it comes.
  bool solve_levels() {
    for (std::size_t level = 0; level < meshes_.levels.size(); ++level) {
      solve_level(level);
      if (!behind_shock_ && supersonic_entry() && !swallowed()) return false;
    }
    return true;
  }

  /// A steady flow whose inlet is clear of the sonic limit, where simple waves end.
  bool swallowed() const {
    constexpr double clear_of_sonic = 1.02;
    return finest_.summary.status != solver::SolutionStatus::failed &&
           figures_.back().inlet.mach >= clear_of_sonic;
  }

  void forget() {
    for (States& states : solved_.states) states.clear();
    figures_.clear();
    solved_.result.remarks.clear();
  }

  solver::FlowProblem problem(std::size_t level) const {
    solver::FlowProblem problem;
    problem.mesh = &meshes_.levels[level];
    problem.gas = case_.gas;
    problem.inlet = point_.inlet;
    problem.inlet.behind_shock = behind_shock_;
    problem.exit_pressure = point_.exit_pressure;
    return problem;
  }

  States prolonged(std::size_t level, const LevelStates& states) const {
    if (level == 0 || states.size() <= level - 1 || states[level - 1].empty()) return {};
    return solver::prolong(states[level - 1], meshes_.levels[level - 1], meshes_.levels[level],
                           meshes_.parent[level]);
  }

  States start(std::size_t level) const {
    States coarse = prolonged(level, solved_.states);
    // Between the starting limit and the limit of steady swallowing there are two flows: a stream
    // faster than sound always starts cold, so that the point before does not choose between them.
    if (supersonic_entry()) return coarse;
    States before = level < before_.size() ? before_[level] : States{};
    if (level == 0 || before.empty()) return before.empty() ? coarse : before;
    const States coarse_before = prolonged(level, before_);
    if (coarse.empty() || coarse_before.empty()) return before;
    States start = moved(before, coarse, coarse_before);
    return start.empty() ? coarse : start;
  }

  States second_start(std::size_t level) const {
    const bool warm = !supersonic_entry() && level < before_.size() && !before_[level].empty();
    return warm ? prolonged(level, solved_.states) : States{};
  }

  solver::FlowSolution attempt(std::size_t level, const States& start) {
    solver::SteadyOptions options;
    options.residual_drop = case_.residual_drop;
    options.max_steps = case_.max_steps;
    options.averaging_steps = case_.averaging_steps;
    PointProgress progress{point_.id,
                           static_cast<int>(level),
                           static_cast<int>(meshes_.levels.size()),
                           {},
                           case_.residual_drop};
    auto solution = solver::solve_steady(problem(level), options, start,
                                         [&](const solver::ConvergencePoint& step) {
                                           progress.step = step;
                                           observer_.progress(progress);
                                         });
    solved_.result.seconds += solution.summary.seconds;
    return solution;
  }

  void solve_level(std::size_t level) {
    const States first = start(level);
    solver::FlowSolution solution = attempt(level, first);
    const bool failed = solution.summary.status == solver::SolutionStatus::failed;
    // A started flow that does not settle is left for the one behind a shock.
    if (failed && !first.empty() && (behind_shock_ || !supersonic_entry())) {
      // Once more without the point before it, or, where that was not used, cold.
      solver::FlowSolution again = attempt(level, second_start(level));
      if (again.summary.residual_drop < solution.summary.residual_drop) solution = std::move(again);
    }
    const bool settled = solution.summary.status != solver::SolutionStatus::failed;
    finest_ = std::move(solution);
    const std::string trouble = settled ? add_figures(level) : finest_.summary.reason;
    if (trouble.empty()) {
      solved_.states[level] = finest_.cells;
      return;
    }
    finest_.summary.status = solver::SolutionStatus::failed;
    finest_.summary.reason = trouble;
    figures_.clear();  // the error bar needs neighbouring levels
    if (level + 1 < meshes_.levels.size())
      solved_.result.remarks.push_back(
          fmt::format("On the mesh of {} cells the flow did not settle: {}.",
                      meshes_.levels[level].cell_count(), trouble));
  }

  /// Returns why there are none, or nothing.
  std::string add_figures(std::size_t level) {
    try {
      figures_.push_back(post::passage_figures(problem(level), finest_, point_.duty));
    } catch (const post::MixedOutError& error) {
      return error.what();
    }
    return {};
  }

  EntryFacts entry() const {
    return {point_.inlet_mach,
            point_.inlet.angle,
            throat_ratio(make_blade_row(case_), point_.inlet.angle),
            case_.gas.heat_capacity_ratio,
            point_.exit_pressure,
            case_.kind == CaseKind::wheel};
  }

  void gather() {
    post::PointResult& result = solved_.result;
    result.solution = finest_.summary;
    if (finest_.summary.status == solver::SolutionStatus::failed) {
      const std::string words =
          unsolved_words(entry(), unsolved_flow(problem(meshes_.levels.size() - 1), finest_));
      result.failure = fmt::format("{}: {} (residual fell to {:.1e})", words,
                                   finest_.summary.reason, finest_.summary.residual_drop);
      return;
    }
    if (figures_.size() < 2) {
      result.failure =
          "the flow was solved on the finest mesh alone, so that its figures have no error bars";
      return;
    }
    result.figures = figures_.back();
    result.numerical_error = post::error_bars(figures_);
    if (finest_.summary.status == solver::SolutionStatus::averaged) add_spread();
    const auto surface = post::surface_distribution(problem(meshes_.levels.size() - 1), finest_,
                                                    result.figures.inlet.total_pressure_pa);
    result.suction = surface.suction;
    result.pressure = surface.pressure;
    add_remarks();
  }

  /// The halves of the averaging time differ: that belongs into the error bars.
  void add_spread() {
    const std::size_t finest = meshes_.levels.size() - 1;
    std::array<post::PassageFigures, 2> halves;
    for (std::size_t i = 0; i < 2; ++i) {
      solver::FlowSolution half = finest_;
      half.boundary = finest_.halves[i];
      halves[i] = post::passage_figures(problem(finest), half, point_.duty);
    }
    for (const post::FigureRow& row : post::figure_rows())
      post::figure_value(row, solved_.result.numerical_error) +=
          std::abs(post::figure_value(row, halves[1]) - post::figure_value(row, halves[0]));
    solved_.result.remarks.push_back(
        "The flow does not settle: its figures are averages over time, and the error bars count "
        "how "
        "far the two halves of that time differ.");
  }

  void add_remarks() {
    post::PointResult& result = solved_.result;
    for (std::string& remark : flow_remarks(entry(), result.figures, behind_shock_))
      result.remarks.push_back(std::move(remark));
    if (figures_.size() < meshes_.levels.size())
      result.remarks.push_back("The error bars rest on fewer than three meshes.");
    if (case_.friction) result.remarks.push_back("Friction is not counted in this version.");
    if (case_.kind == CaseKind::wheel && case_.rim == "open")
      result.remarks.push_back("Spill over the open rim is not counted in this version.");
  }

  const Case& case_;
  const mesh::MeshLevels& meshes_;
  const OperatingPoint& point_;
  const LevelStates& before_;
  RunObserver& observer_;
  SolvedPoint solved_;
  std::vector<post::PassageFigures> figures_;
  solver::FlowSolution finest_;
  bool behind_shock_ = false;
};

}  // namespace

SolvedPoint solve_point(const Case& input, const mesh::MeshLevels& meshes,
                        const OperatingPoint& point, const LevelStates& before,
                        RunObserver& observer) {
  return PointSolver(input, meshes, point, before, observer).solve();
}

}  // namespace falcate::cases
