#include "tests/benchmarks/child_solve.h"

#include <fmt/format.h>
#include <omp.h>

#include <cstdio>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <stdexcept>

#include "tests/benchmarks/passages.h"
#include "tests/benchmarks/timing.h"

namespace falcate::benchmarks {
namespace {

/// Peak resident memory of this process, kB (proc(5), VmHWM).
long peak_memory() {
  std::ifstream status("/proc/self/status");
  for (std::string word; status >> word;)
    if (word == "VmHWM:") {
      long kb = 0;
      status >> kb;
      return kb;
    }
  throw std::runtime_error("the system does not tell the peak memory of a process");
}

std::string words(const ChildSolve& s) {
  return fmt::format("{} {} {} {} {} {} {} {}\n", s.cells, s.mesh_seconds, s.solve_seconds,
                     s.residual_seconds, s.steps, s.krylov_iterations, s.peak_kb,
                     static_cast<int>(s.steady));
}

}  // namespace

std::string child_report(int cells) {
  omp_set_num_threads(1);
  ChildSolve out;
  if (cells == 0) {
    out.peak_kb = peak_memory();
    return words(out);
  }
  const PassageRow& row = passage_row("S1, Mach 2.0");
  mesh::MeshLevels meshes;
  out.mesh_seconds = seconds_of([&] { meshes = passage_meshes(row, cells); });
  const ColdSolve solve = solve_from_cold(row, meshes);
  out.peak_kb = peak_memory();
  solver::FlowProblem problem = passage_problem(row);
  problem.mesh = &meshes.levels.back();
  out.cells = problem.mesh->cell_count();
  out.solve_seconds = solve.time.wall;
  out.residual_seconds = residual_seconds(problem, solve.finest.cells);
  out.steps = solve.steps;
  out.krylov_iterations = solve.krylov_iterations;
  out.steady = solve.finest.summary.status == solver::SolutionStatus::steady;
  return words(out);
}

ChildSolve solve_in_child(int cells) {
  const std::string program = std::filesystem::read_symlink("/proc/self/exe").string();
  const std::string command = fmt::format("'{}' --solve {}", program, cells);
  FILE* pipe = popen(command.c_str(), "r");
  if (!pipe) throw std::runtime_error("cannot start the benchmark anew");
  std::string text(1000, '\0');
  text.resize(std::fread(text.data(), 1, text.size(), pipe));
  const int status = pclose(pipe);
  ChildSolve s;
  std::istringstream stream(text);
  stream >> s.cells >> s.mesh_seconds >> s.solve_seconds >> s.residual_seconds >> s.steps >>
      s.krylov_iterations >> s.peak_kb >> s.steady;
  if (status != 0 || !stream)
    throw std::runtime_error(fmt::format("the solve on {} cells failed: {}", cells, text));
  return s;
}

}  // namespace falcate::benchmarks
