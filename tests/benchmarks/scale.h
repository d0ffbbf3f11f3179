/// How large a run of the benchmarks is, as a table: the whole one, a quick one, and the smallest,
/// which only shows that every part works.
#pragma once
#include <array>
#include <cstddef>
#include <vector>

namespace falcate::benchmarks {

struct Scale {
  const char* name;
  int row_cells;                     ///< cold starts and threads, finest mesh
  std::size_t row_count;             ///< rows of a table solved, from its first
  int line_cells;                    ///< neighbours on a speed line, finest mesh
  std::size_t triad_length;          ///< numbers in each array of the triad
  std::vector<int> rectangle_cells;  ///< residual against streaming
  std::vector<int> sizes;            ///< cost against size
  int night_points, night_cells;     ///< a night's work
};

inline constexpr int large_size = 1000000;  ///< cells, on request only

inline const std::array<Scale, 3>& scales() {
  static const std::array<Scale, 3> rows{{
      {"whole",
       20000,
       100,
       8000,
       std::size_t{1} << 25,
       {300000, 20000},
       {5000, 20000, 80000, 300000},
       500,
       8000},
      {"quick",
       20000,
       100,
       8000,
       std::size_t{1} << 25,
       {300000, 20000},
       {5000, 20000, 80000},
       40,
       8000},
      {"smallest", 1000, 2, 1000, 1 << 16, {1000}, {1000, 2000}, 9, 1000},
  }};
  return rows;
}

}  // namespace falcate::benchmarks
