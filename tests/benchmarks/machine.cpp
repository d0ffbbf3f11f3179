#include "tests/benchmarks/machine.h"

#include <fmt/format.h>
#include <omp.h>

#include <cstdlib>
#include <fstream>

namespace falcate::benchmarks {
namespace {

/// "model name : X" of the first processor; empty where the system does not tell.
std::string processor() {
  std::ifstream file("/proc/cpuinfo");
  for (std::string line; std::getline(file, line);)
    if (line.rfind("model name", 0) == 0) return line.substr(line.find(':') + 2);
  return "unknown processor";
}

std::string load() {
  double one_minute = 0.0;
  if (getloadavg(&one_minute, 1) != 1) return "unknown";
  return fmt::format("{:.1f}", one_minute);
}

}  // namespace

std::string machine_words() {
  return fmt::format(
      "Machine: {}, {} cores; compiler {} {}, flags `{}`.\n"
      "Load when the run began: {} programs that wanted a core (mean of a minute); a quiet "
      "machine\n"
      "has less than 0.5.\n",
      processor(), omp_get_num_procs(), FALCATE_COMPILER, __VERSION__, FALCATE_FLAGS, load());
}

}  // namespace falcate::benchmarks
