#include "cases/runner.h"

#include <fmt/format.h>
#include <omp.h>

#include <algorithm>
#include <atomic>
#include <exception>
#include <mutex>
#include <thread>

#include "cases/blade_row.h"
#include "cases/operating_points.h"
#include "cases/point_solver.h"
#include "cases/results_folder.h"
#include "cases/run_outputs.h"
#include "mesh/mesh_levels_maker.h"

namespace falcate::cases {
namespace {

mesh::MeshLevels make_meshes(const Case& input, const BladeRow& row) {
  mesh::MeshOptions options;
  options.cells = input.cells;
  options.upstream = input.upstream;
  options.downstream = input.downstream;
  return mesh::make_mesh_levels(row.outline, row.pitch, row.inlet_angle, row.exit_angle, options);
}

class Run {
 public:
  Run(const Case& input, const ResultsFolder& folder, RunObserver& observer)
      : case_(input),
        folder_(folder),
        observer_(observer),
        points_(operating_points(input)),
        row_(make_blade_row(input)),
        meshes_(make_meshes(input, row_)),
        solved_(points_.size()),
        kept_(points_.size(), false) {}

  RunSummary solve_all(int threads) {
    load_finished();
    const auto parts = chains(static_cast<int>(points_.size()));
    const int workers = std::min(threads, static_cast<int>(parts.size()));
    std::atomic<std::size_t> next{0};
    const auto work = [&] {
      omp_set_num_threads(std::max(1, threads / workers));
      for (std::size_t k = next++; k < parts.size(); k = next++) guarded_chain(parts[k]);
    };
    {
      std::vector<std::jthread> crew;
      for (int i = 0; i < workers; ++i) crew.emplace_back(work);
    }
    if (trouble_) std::rethrow_exception(trouble_);
    write_outputs({case_, row_, meshes_.levels.back(), points_, solved_}, folder_);
    return summary();
  }

  int report() {
    load_finished();
    std::vector<OperatingPoint> points;
    std::vector<SolvedPoint> solved;
    for (std::size_t i = 0; i < points_.size(); ++i) {
      if (!kept_[i] && !load_failed(i)) continue;
      points.push_back(points_[i]);
      solved.push_back(solved_[i]);
    }
    if (solved.empty()) throw FolderError("no point is finished yet; go on with the run first");
    write_report_only({case_, row_, meshes_.levels.back(), points, solved}, folder_);
    return static_cast<int>(solved.size());
  }

 private:
  bool fits(const LevelStates& states) const {
    if (states.size() != meshes_.levels.size()) return false;
    for (std::size_t i = 0; i < states.size(); ++i)
      if (!states[i].empty() &&
          static_cast<int>(states[i].size()) != meshes_.levels[i].cell_count())
        return false;
    return !states.back().empty();
  }

  void load_finished() {
    int kept = 0;
    for (std::size_t i = 0; i < points_.size(); ++i) {
      auto point = folder_.point(points_[i].id);
      if (!point || !point->result.failure.empty() || !fits(point->states)) continue;
      solved_[i] = std::move(*point);
      kept_[i] = true;
      ++kept;
    }
    observer_.meshed(static_cast<int>(points_.size()), kept, meshes_.levels.back().cell_count());
  }

  /// A point that was tried and failed, with its reason.
  bool load_failed(std::size_t i) {
    auto point = folder_.point(points_[i].id);
    if (!point || point->result.failure.empty()) return false;
    solved_[i] = std::move(*point);
    return true;
  }

  void guarded_chain(const std::pair<int, int>& part) {
    try {
      solve_chain(part);
    } catch (...) {
      const std::lock_guard<std::mutex> lock(mutex_);
      if (!trouble_) trouble_ = std::current_exception();
    }
  }

  void solve_chain(const std::pair<int, int>& part) {
    LevelStates before;
    for (auto i = static_cast<std::size_t>(part.first); i < static_cast<std::size_t>(part.second);
         ++i) {
      if (!kept_[i]) {
        solved_[i] = solve_point(case_, meshes_, points_[i], before, observer_);
        folder_.keep(solved_[i]);
      }
      observer_.finished(solved_[i].result, kept_[i]);
      if (solved_[i].result.failure.empty()) before = solved_[i].states;
    }
  }

  RunSummary summary() const {
    RunSummary result;
    result.points = static_cast<int>(points_.size());
    for (std::size_t i = 0; i < points_.size(); ++i) {
      result.failed += solved_[i].result.failure.empty() ? 0 : 1;
      result.kept += kept_[i] ? 1 : 0;
    }
    return result;
  }

  const Case& case_;
  const ResultsFolder& folder_;
  RunObserver& observer_;
  std::vector<OperatingPoint> points_;
  BladeRow row_;
  mesh::MeshLevels meshes_;
  std::vector<SolvedPoint> solved_;
  std::vector<char> kept_;
  std::mutex mutex_;
  std::exception_ptr trouble_;
};

}  // namespace

std::vector<std::pair<int, int>> chains(int points) {
  constexpr int usual_length = 3;
  const int count = points < 4 ? 1 : std::max(2, (points + usual_length / 2) / usual_length);
  std::vector<std::pair<int, int>> parts;
  for (int k = 0; k < count; ++k) parts.emplace_back(points * k / count, points * (k + 1) / count);
  return parts;
}

RunSummary run_case(const Case& input, const std::string& folder, int threads,
                    RunObserver& observer) {
  const ResultsFolder results = ResultsFolder::open(folder, input);
  return Run(input, results, observer).solve_all(std::max(1, threads));
}

int rewrite_report(const std::string& folder) {
  const Case input = ResultsFolder::kept_case(folder);
  const ResultsFolder results = ResultsFolder::open(folder, input);
  RunObserver silent;
  return Run(input, results, silent).report();
}

}  // namespace falcate::cases
