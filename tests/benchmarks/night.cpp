// A night's work: rows of the robustness matrix at many speeds, side by side on all cores, one
// thread each, meshing included; extrapolated to eight hours on two cores.
#include <fmt/format.h>
#include <omp.h>

#include <algorithm>
#include <atomic>
#include <exception>
#include <mutex>
#include <thread>

#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/table.h"
#include "tests/benchmarks/timing.h"
#include "tests/robustness/matrix_page.h"
#include "tests/robustness/matrix_rows.h"

namespace falcate::benchmarks {
namespace {

using robustness::Answer;
using robustness::MatrixRow;

std::size_t point_count(const std::vector<MatrixRow>& rows) {
  std::size_t count = 0;
  for (const MatrixRow& row : rows) count += row.points.size();
  return count;
}

/// Wheels get so many speeds from standstill to u/c1 = 1 that all rows have the points wanted.
void add_speeds(std::vector<MatrixRow>& rows, std::size_t points) {
  std::vector<double> ratios;
  for (std::size_t n = 10; point_count(rows) < points; ++n) {
    ratios.clear();
    for (std::size_t i = 0; i < n; ++i)
      ratios.push_back(static_cast<double>(i) / static_cast<double>(n - 1));
    for (MatrixRow& row : rows) {
      if (row.input.kind != cases::CaseKind::wheel) continue;
      row.input.speed_ratios = ratios;
      row.points = cases::operating_points(row.input);
    }
  }
}

/// Rows spread over the matrix, at least so many points.
std::vector<MatrixRow> rows_for(std::size_t points, int cells) {
  const std::vector<MatrixRow> all = robustness::matrix_rows(cells);
  constexpr std::size_t fewest = 9;  // points of a row
  const std::size_t count = std::min(all.size(), (points + fewest - 1) / fewest);
  std::vector<MatrixRow> rows;
  for (std::size_t i = 0; i < count; ++i)
    rows.push_back(all[(2 * i + 1) * all.size() / (2 * count)]);
  add_speeds(rows, points);
  return rows;
}

struct Night {
  std::vector<Answer> answers;
  std::size_t lost = 0;  ///< points of rows that could not be meshed
  double busy = 0.0;     ///< s, of all workers together
};

class Shift {
 public:
  explicit Shift(const std::vector<MatrixRow>& rows) : rows_(rows) {}
  Night work(int workers) {
    {
      std::vector<std::jthread> crew;
      for (int i = 0; i < workers; ++i) crew.emplace_back([&] { take_rows(); });
    }
    return std::move(night_);
  }

 private:
  void take_rows() {
    omp_set_num_threads(1);
    for (std::size_t i = next_++; i < rows_.size(); i = next_++) {
      std::vector<Answer> answers;
      const double seconds = seconds_of([&] { answers = answers_of(rows_[i]); });
      const std::lock_guard<std::mutex> lock(mutex_);
      night_.busy += seconds;
      night_.lost += rows_[i].points.size() - answers.size();
      night_.answers.insert(night_.answers.end(), answers.begin(), answers.end());
    }
  }
  static std::vector<Answer> answers_of(const MatrixRow& row) {
    try {
      return robustness::solve_row(row);
    } catch (const std::exception&) {
      return {};
    }
  }

  const std::vector<MatrixRow>& rows_;
  std::atomic<std::size_t> next_{0};
  std::mutex mutex_;
  Night night_;
};

std::string by_ending(const Night& night) {
  Table table({"ended", "points", "seconds a point", "share of the time"});
  for (const char* kind : {"steady", "averaged", "failed", "without error bar"}) {
    int count = 0;
    double seconds = 0.0;
    for (const Answer& answer : night.answers) {
      if (robustness::kind_words(answer) != kind) continue;
      ++count;
      seconds += answer.wall_seconds;
    }
    table.add({kind, fmt::format("{}", count), count ? fmt::format("{:.2f}", seconds / count) : "-",
               fmt::format("{:.0f} %", 100.0 * seconds / night.busy)});
  }
  if (night.lost > 0) table.add({"not meshed", fmt::format("{}", night.lost), "-", "-"});
  return table.text();
}

std::string summary(const Night& night, std::size_t rows, int workers, double wall) {
  constexpr double eight_hours = 8.0 * 3600.0, cores = 2.0;
  const auto points = static_cast<double>(night.answers.size() + night.lost);
  double solving = 0.0;
  for (const Answer& answer : night.answers) solving += answer.wall_seconds;
  Table table({"points", "rows", "side by side", "wall, s", "seconds of a core a point",
               "of it meshing", "in 8 h on 2 cores", "aim"});
  table.add({fmt::format("{:.0f}", points), fmt::format("{}", rows), fmt::format("{}", workers),
             fmt::format("{:.0f}", wall), fmt::format("{:.3f}", night.busy / points),
             fmt::format("{:.3f}", (night.busy - solving) / points),
             fmt::format("{:.0f}", cores * eight_hours * points / night.busy), "100000"});
  return table.text();
}

}  // namespace

std::string night(const Scale& scale) {
  const auto rows = rows_for(static_cast<std::size_t>(scale.night_points), scale.night_cells);
  const int workers = std::max(1, omp_get_num_procs());
  Night done;
  const double wall = seconds_of([&] { done = Shift(rows).work(workers); });
  return fmt::format(
      "Rows of the robustness matrix (wheels from standstill to u/c1 = 1, streams from Mach 0.1 "
      "to\n"
      "2.5, channel and cup blades), finest mesh of about {} cells, three meshes, error bars, "
      "each\n"
      "row meshed and solved by one thread as a run of the program does. The time of a point is\n"
      "that of all its core does, meshing included; a core that has no row left does not count.\n\n"
      "{}\n{}",
      scale.night_cells, summary(done, rows.size(), workers, wall), by_ending(done));
}

}  // namespace falcate::benchmarks
