// Measures how fast the solver is and writes docs/benchmarks.md:
//   benchmarks [--quick] [--million] [--part NAME]... [--out FILE]
// Each part has a section of its own in the page; those not asked for stay as they are. Parts and
// their names: parts.cpp. Further options, for this program's own use: --smallest (shows that every
// part works), --solve CELLS (one solve in a process of its own).
#include <fmt/format.h>

#include <algorithm>
#include <cstdio>
#include <cstdlib>
#include <exception>
#include <filesystem>
#include <string>
#include <vector>

#include "post/whole_file.h"
#include "tests/benchmarks/child_solve.h"
#include "tests/benchmarks/machine.h"
#include "tests/benchmarks/parts.h"
#include "tests/validation/page_section.h"

namespace falcate::benchmarks {
namespace {

struct Arguments {
  Scale scale = scales().front();
  std::vector<std::string> wanted;
  std::string out = "docs/benchmarks.md";
  int solve_cells = -1;
};

bool is_scale(const std::string& key, Arguments& to) {
  for (const Scale& scale : scales()) {
    if (key != std::string("--") + scale.name) continue;
    to.scale = scale;
    return true;
  }
  return false;
}

bool is_part(const std::string& name) {
  return std::any_of(parts().begin(), parts().end(),
                     [&](const Part& part) { return name == part.name; });
}

bool read(const std::vector<std::string>& words, Arguments& to) {
  bool million = false;
  for (std::size_t i = 0; i < words.size(); ++i) {
    const bool last = i + 1 == words.size();
    if (is_scale(words[i], to)) continue;
    if (words[i] == "--million")
      million = true;
    else if (words[i] == "--part" && !last && is_part(words[i + 1]))
      to.wanted.push_back(words[++i]);
    else if (words[i] == "--out" && !last)
      to.out = words[++i];
    else if (words[i] == "--solve" && !last)
      to.solve_cells = std::atoi(words[++i].c_str());
    else
      return false;
  }
  if (million) to.scale.sizes.push_back(large_size);
  return true;
}

std::string usage() {
  std::string text = "benchmarks [--quick] [--million] [--part NAME]... [--out FILE]\nparts:";
  for (const Part& part : parts()) text += std::string(" ") + part.name;
  return text + "\n";
}

std::string head(const Scale& scale) {
  return fmt::format(
      "# Benchmarks\n\n"
      "Written by `build/benchmarks`, extent of this run: {}. All figures are from one machine, "
      "and\n"
      "those that count are ratios taken in one run. REE is the unit: the wall time of one\n"
      "second-order residual evaluation on the same mesh with the same threads, the median of\n"
      "five batches.\n\n{}",
      scale.name, machine_words());
}

void put_section(const std::string& file, const std::string& name, const std::string& body) {
  const std::string page = std::filesystem::exists(file) ? post::read_whole_file(file) : "";
  post::write_whole_file(file, validation::with_section(page, name, body));
}

void run(const Arguments& arguments) {
  put_section(arguments.out, "machine", head(arguments.scale));
  for (const Part& part : parts()) {
    const auto& wanted = arguments.wanted;
    if (!wanted.empty() && std::find(wanted.begin(), wanted.end(), part.name) == wanted.end())
      continue;
    fmt::print("{}\n", part.title);
    std::fflush(stdout);
    const std::string section = part.section(arguments.scale);
    put_section(arguments.out, part.name, fmt::format("## {}\n\n{}", part.title, section));
  }
}

}  // namespace
}  // namespace falcate::benchmarks

int main(int argc, char** argv) {
  namespace benchmarks = falcate::benchmarks;
  benchmarks::Arguments arguments;
  if (!benchmarks::read({argv + 1, argv + argc}, arguments)) {
    fmt::print(stderr, "{}", benchmarks::usage());
    return 2;
  }
  try {
    if (arguments.solve_cells >= 0)
      fmt::print("{}", benchmarks::child_report(arguments.solve_cells));
    else
      benchmarks::run(arguments);
  } catch (const std::exception& error) {
    fmt::print(stderr, "{}\n", error.what());
    return 4;
  }
  return 0;
}
