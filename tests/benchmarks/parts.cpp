#include "tests/benchmarks/parts.h"

namespace falcate::benchmarks {

const std::vector<Part>& parts() {
  static const std::vector<Part> rows{
      {"cold-start", "Cold start", cold_start},
      {"speed-line", "Next point of a speed line", speed_line},
      {"streaming", "Residual evaluation against memory", streaming},
      {"threads", "Threads", threads},
      {"size", "Cost against size", size},
      {"night", "A night's work", night},
  };
  return rows;
}

}  // namespace falcate::benchmarks
