// Solves the whole matrix of operating points and writes docs/robustness.md:
//   robustness_matrix [--cells N] [--workers N] [--rows FIRST:LAST] [--out FILE]
// Each worker solves on one thread. A line per point goes to standard output.
#include <fmt/format.h>
#include <omp.h>

#include <atomic>
#include <cstdlib>
#include <cstring>
#include <exception>
#include <mutex>
#include <thread>

#include "post/whole_file.h"
#include "robustness/matrix_page.h"
#include "robustness/matrix_rows.h"

namespace falcate::robustness {
namespace {

struct Arguments {
  int cells = 8000, workers = 2;
  std::size_t first = 0, last = 1000;
  std::string out;
};

bool read(int argc, char** argv, Arguments& to) {
  for (int i = 1; i + 1 < argc; i += 2) {
    const std::string key = argv[i], value = argv[i + 1];
    if (key == "--cells")
      to.cells = std::atoi(value.c_str());
    else if (key == "--workers")
      to.workers = std::atoi(value.c_str());
    else if (key == "--out")
      to.out = value;
    else if (key == "--rows" && value.find(':') != std::string::npos)
      to.first = std::stoul(value), to.last = std::stoul(value.substr(value.find(':') + 1));
    else
      return false;
  }
  return argc % 2 == 1 && to.cells > 0 && to.workers > 0;
}

void say(const Answer& a) {
  fmt::print("{}; Mach {:.3f}, flow {:.2f} deg, u/c1 {:.2f}: {} {:.2f} s {} steps {:.1e}; {}\n",
             a.row, a.relative_mach, a.flow_angle_deg, a.result.speed_ratio, kind_words(a),
             a.wall_seconds, a.result.solution.newton_steps, a.result.solution.residual_drop,
             a.result.failure.empty() ? fmt::format("capacity {:.3f}, loss {:.4f} +- {:.4f}",
                                                    a.result.figures.capacity_ratio,
                                                    a.result.figures.total_pressure_loss,
                                                    a.result.numerical_error.total_pressure_loss)
                                      : a.result.failure);
  for (const std::string& remark : a.result.remarks) fmt::print("    {}\n", remark);
  std::fflush(stdout);
}

/// Written after every row, so that a matrix that is stopped leaves what it has.
void write_page(const std::vector<std::vector<Answer>>& answers, const Arguments& arguments) {
  std::vector<Answer> all;
  for (const auto& part : answers) all.insert(all.end(), part.begin(), part.end());
  const std::string page = matrix_page(all, arguments.cells);
  if (arguments.out.empty())
    fmt::print("{}", page);
  else
    post::write_whole_file(arguments.out, page);
}

int run(const Arguments& arguments) {
  const std::vector<MatrixRow> rows = matrix_rows(arguments.cells);
  const std::size_t last = std::min(arguments.last, rows.size());
  std::vector<std::vector<Answer>> answers(rows.size());
  std::atomic<std::size_t> next{arguments.first};
  std::mutex mutex;
  bool whole = true;
  const auto work = [&] {
    omp_set_num_threads(1);
    for (std::size_t i = next++; i < last; i = next++) {
      std::vector<Answer> found;
      std::string trouble;
      try {
        found = solve_row(rows[i]);
      } catch (const std::exception& error) {
        trouble = error.what();
      }
      const std::lock_guard<std::mutex> lock(mutex);
      for (const Answer& answer : found) say(answer);
      if (!trouble.empty()) fmt::print("{}: {}\n", rows[i].name, trouble);
      whole = whole && trouble.empty();
      answers[i] = std::move(found);
      if (!arguments.out.empty()) write_page(answers, arguments);
    }
  };
  {
    std::vector<std::jthread> crew;
    for (int k = 0; k < arguments.workers; ++k) crew.emplace_back(work);
  }
  write_page(answers, arguments);
  return whole ? 0 : 3;
}

}  // namespace
}  // namespace falcate::robustness

int main(int argc, char** argv) {
  falcate::robustness::Arguments arguments;
  if (!falcate::robustness::read(argc, argv, arguments)) {
    fmt::print(stderr,
               "robustness_matrix [--cells N] [--workers N] [--rows FIRST:LAST] [--out FILE]\n");
    return 2;
  }
  return falcate::robustness::run(arguments);
}
