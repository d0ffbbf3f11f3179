/// The parts of the benchmarks as a table; each makes one section of the page.
/// Errors: what meshing, reading and solving throw; a flow that does not settle is told in its row.
#pragma once
#include <string>
#include <vector>

#include "tests/benchmarks/scale.h"

namespace falcate::benchmarks {

std::string cold_start(const Scale& scale);
std::string speed_line(const Scale& scale);
std::string streaming(const Scale& scale);
std::string threads(const Scale& scale);
std::string size(const Scale& scale);
std::string night(const Scale& scale);

struct Part {
  const char* name;
  const char* title;
  std::string (*section)(const Scale&);
};

const std::vector<Part>& parts();

}  // namespace falcate::benchmarks
