// Every part of the benchmarks runs at the smallest extent and fills its tables; no time is judged.
// The tools that make figures are held to cases worked by hand.
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <filesystem>
#include <regex>
#include <sstream>
#include <string>

#include "mesh/structured.h"
#include "post/whole_file.h"
#include "tests/benchmarks/parts.h"
#include "tests/benchmarks/power_law.h"
#include "tests/benchmarks/residual_bytes.h"
#include "tests/benchmarks/table.h"

namespace falcate::benchmarks {
namespace {

/// What stands between the marks of a part.
std::string section_of(const std::string& page, const std::string& part) {
  const std::string begin = "<!-- begin " + part + " -->", end = "<!-- end " + part + " -->";
  const std::size_t from = page.find(begin), to = page.find(end);
  return from == std::string::npos || to == std::string::npos ? "" : page.substr(from, to - from);
}

/// Every row of a table has as many upright strokes as the row above it.
bool tables_are_whole(const std::string& section) {
  std::istringstream lines(section);
  std::string above;
  for (std::string line; std::getline(lines, line); above = line) {
    if (line.empty() || line[0] != '|' || above.empty() || above[0] != '|') continue;
    if (std::count(line.begin(), line.end(), '|') != std::count(above.begin(), above.end(), '|'))
      return false;
  }
  return true;
}

TEST(Benchmarks, EveryPartFillsItsTables) {
  const std::string file = testing::TempDir() + "benchmarks_page.md";
  std::filesystem::remove(file);
  const std::string command =
      "'" FALCATE_BINARY_DIR "/benchmarks' --smallest --out '" + file + "' >/dev/null";
  ASSERT_EQ(std::system(command.c_str()), 0);
  const std::string page = post::read_whole_file(file);
  for (const Part& part : parts()) {
    const std::string section = section_of(page, part.name);
    EXPECT_NE(section.find(std::string("## ") + part.title), std::string::npos) << part.name;
    EXPECT_TRUE(std::regex_search(section, std::regex(R"(\|---[-:|]*\|\n\|[^\n]*\d[^\n]*\|\n)")))
        << section;
    EXPECT_FALSE(std::regex_search(section, std::regex(R"(\b(nan|inf)\b)"))) << section;
    EXPECT_TRUE(tables_are_whole(section)) << section;
  }
  EXPECT_NE(page.find("Machine: "), std::string::npos);
}

TEST(Benchmarks, TablesHaveWholeRows) {
  Table table({"row", "a", "b"});
  table.add({"x", "1", "2"});
  EXPECT_EQ(table.text(), "| row | a | b |\n|---|---:|---:|\n| x | 1 | 2 |\n");
}

TEST(PowerLaw, FindsTheExponent) {
  EXPECT_NEAR(power_of({1e3, 4e3, 9e3, 5e4}, {3.0, 3.0 * std::pow(4.0, 1.2), 3.0 * std::pow(9, 1.2),
                                              3.0 * std::pow(50.0, 1.2)}),
              1.2, 1e-12);
}

// Of a mesh of 4 x 2 squares, periodic from south to north: 8 cells, 14 inner faces (6 upright, 4
// within, 4 periodic) and 4 on the planes; states and residual of 32 bytes a cell.
TEST(ResidualBytes, CountsByHand) {
  const auto map = [](double xi, double eta) { return mesh::Point(4.0 * xi, 2.0 * eta); };
  using mesh::PatchKind;
  const auto mesh = mesh::PassageMesh::build(mesh::structured(
      4, 2, mesh::CellKind::quads, map,
      {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, 2.0));
  solver::FlowProblem problem;
  problem.mesh = &mesh;
  problem.inlet.total_pressure = 1e5;
  problem.inlet.total_temperature = 300.0;
  problem.inlet.angle = 1.0;
  problem.exit_pressure = 0.9e5;
  const solver::ScaledProblem scaled = solver::scale(problem);
  const solver::Residual residual(scaled, {});
  const auto bytes = residual_bytes(residual);
  const auto of = [&](const std::string& words) {
    for (const ArrayBytes& array : bytes)
      if (array.words == words) return array.bytes;
    return -1.0;
  };
  EXPECT_EQ(of("states, read"), 8 * 32.0);
  EXPECT_EQ(of("gradients, written and read"), 8 * 2 * 64.0);
  EXPECT_EQ(of("fluxes, written and read"), 18 * 2 * 32.0);
  EXPECT_EQ(of("faces: difference of centroids, read"), 14 * 16.0);
  EXPECT_EQ(of("faces of each cell with their sign, read"), 8 * 4 * 4.0);
  EXPECT_EQ(of("residual, written"), 8 * 32.0);
  EXPECT_EQ(total(bytes, true) - total(bytes, false), 8 * 128.0 + 18 * 64.0);
}

}  // namespace
}  // namespace falcate::benchmarks
