// One residual evaluation against the time the machine needs to stream the bytes it must move.
#include <fmt/format.h>
#include <omp.h>

#include <cmath>
#include <string>

#include "mesh/structured.h"
#include "solver/residual.h"
#include "tests/benchmarks/arithmetic.h"
#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/passages.h"
#include "tests/benchmarks/residual_bytes.h"
#include "tests/benchmarks/table.h"
#include "tests/benchmarks/timing.h"

namespace falcate::benchmarks {
namespace {

struct Trial {
  std::string name;
  mesh::PassageMesh mesh;
  solver::FlowProblem problem;
};

struct Measured {
  std::string name;
  double cells = 0.0, seconds = 0.0;
  std::vector<ArrayBytes> arrays;
};

/// Periodic in y, inlet on the left, outlet on the right, its lines bent like those of a passage.
mesh::PassageMesh bent_rectangle(int cells) {
  const int n = static_cast<int>(std::sqrt(cells / 3.0));
  constexpr double width = 0.01, pitch = 0.01;
  const auto map = [&](double xi, double eta) {
    return mesh::Point(3.0 * width * xi,
                       pitch * (eta + 0.3 * std::sin(3.0 * xi) + 0.02 * std::sin(6.28 * xi)));
  };
  using mesh::PatchKind;
  return mesh::PassageMesh::build(mesh::structured(
      3 * n, n, mesh::CellKind::quads, map,
      {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, pitch));
}

/// A smooth flow that is the same nowhere, so that no branch can be foreseen everywhere.
std::vector<solver::State<double>> wavy_flow(const solver::FlowProblem& problem,
                                             const solver::ScaledProblem& scaled) {
  auto states = solver::cold_start(problem, scaled);
  for (std::size_t i = 0; i < states.size(); ++i) {
    const mesh::Point& x = problem.mesh->centroids()[i];
    const double wave = 0.05 * std::sin(700.0 * x.x()) * std::cos(900.0 * x.y());
    for (double& value : states[i]) value *= 1.0 + wave;
  }
  return states;
}

Measured measure(const Trial& trial) {
  solver::FlowProblem problem = trial.problem;
  problem.mesh = &trial.mesh;
  solver::ScaledProblem scaled = solver::scale(problem);
  const auto states = wavy_flow(problem, scaled);
  solver::refresh_planes(scaled, states);
  const solver::Residual evaluation(scaled, {});
  std::vector<solver::State<double>> fluxes, residual(states.size());
  Measured m;
  m.name = trial.name;
  m.cells = static_cast<double>(states.size());
  m.seconds = best_seconds([&] { evaluation.evaluate<double>(states, fluxes, residual); });
  m.arrays = residual_bytes(evaluation);
  return m;
}

std::vector<Measured> measure_all(const Scale& scale) {
  std::vector<Measured> all;
  for (const int cells : scale.rectangle_cells)
    all.push_back(measure({"bent rectangle", bent_rectangle(cells),
                           passage_problem(passage_row("channel, exit Mach 0.8"))}));
  const PassageRow& s1 = passage_row("S1, Mach 2.0");
  all.push_back(measure(
      {"passage of S1", passage_meshes(s1, scale.row_cells).levels.back(), passage_problem(s1)}));
  return all;
}

std::string byte_table(const std::vector<Measured>& all) {
  std::vector<std::string> head{"bytes a cell"};
  for (const Measured& m : all) head.push_back(fmt::format("{}, {:.0f} cells", m.name, m.cells));
  Table table(head);
  for (std::size_t k = 0; k < all.front().arrays.size(); ++k) {
    const ArrayBytes& array = all.front().arrays[k];
    std::vector<std::string> cells{array.words};
    for (const Measured& m : all)
      cells.push_back(fmt::format("{:.1f}", m.arrays[k].bytes / m.cells));
    table.add(cells);
  }
  return table.text();
}

std::string ratio_table(const std::vector<Measured>& all, double bandwidth) {
  Table table({"mesh", "cells", "bytes a cell", "streamed, ns a cell", "evaluated, ns a cell",
               "ratio", "aim", "ratio without intermediates"});
  for (const Measured& m : all) {
    const double bytes = total(m.arrays, true), least = total(m.arrays, false);
    table.add({m.name, fmt::format("{:.0f}", m.cells), fmt::format("{:.0f}", bytes / m.cells),
               fmt::format("{:.1f}", 1e9 * bytes / bandwidth / m.cells),
               fmt::format("{:.1f}", 1e9 * m.seconds / m.cells),
               fmt::format("{:.1f}", m.seconds * bandwidth / bytes), "3",
               fmt::format("{:.1f}", m.seconds * bandwidth / least)});
  }
  return table.text();
}

}  // namespace

std::string streaming(const Scale& scale) {
  omp_set_num_threads(1);
  const double before = triad_bandwidth(scale.triad_length);
  const auto all = measure_all(scale);
  const double bandwidth = std::max(before, triad_bandwidth(scale.triad_length));
  return fmt::format(
      "One thread. Streaming is the triad a = b + s c over arrays of {:.0f} MB each (McCalpin,\n"
      "IEEE TCCA Newsletter (1995) 19-25): {:.1f} GB/s, 24 bytes counted a number. Of the bytes "
      "of\n"
      "an evaluation each array counts once for reading and once for writing, and only what the\n"
      "sum needs of it, not what lies between. Gradients and fluxes are intermediate: written and\n"
      "read again; the last column leaves them out, as if they stayed in the cache. Times are the\n"
      "best of repeats on both sides.\n\n{}\nThe arrays:\n\n{}",
      8e-6 * static_cast<double>(scale.triad_length), 1e-9 * bandwidth, ratio_table(all, bandwidth),
      byte_table(all));
}

}  // namespace falcate::benchmarks
