/// Runs the program as a user does and gathers what it says.
#pragma once
#include <sys/wait.h>

#include <cstdlib>
#include <fstream>
#include <sstream>
#include <string>

#include "tests/unit/cases/case_text.h"

namespace falcate::command_line {

struct Outcome {
  int status = -1;
  std::string out, err;
};

inline std::string content(const std::string& path) {
  std::ostringstream text;
  text << std::ifstream(path, std::ios::binary).rdbuf();
  return text.str();
}

/// `arguments` as in a shell, run in the scratch folder.
inline Outcome falcate(const cases::ScratchFolder& folder, const std::string& arguments) {
  const std::string command = "cd '" + folder.path() + "' && '" FALCATE_BINARY_DIR "/falcate' " +
                              arguments + " >said.out 2>said.err";
  const int raw = std::system(command.c_str());
  Outcome outcome;
  outcome.status = WIFEXITED(raw) ? WEXITSTATUS(raw) : 128;
  outcome.out = content(folder.path("said.out"));
  outcome.err = content(folder.path("said.err"));
  return outcome;
}

/// A low-speed wheel that solves in a second or two; invented.
inline std::string quick_case() {
  return "[supply]\npressure = \"0.2 bar(g)\"\n[nozzle]\nthroat_diameter = \"1.6 mm\"\n"
         "[wheel]\nmean_diameter = \"46 mm\"\nblade_count = 34\nblade_height = \"3 mm\"\n"
         "blade_width = \"6 mm\"\nspeed_ratios = [0.35, 0.4, 0.45, 0.5]\n"
         "[blade]\nshape = \"channel\"\n[flow]\ncells = 1000\npassages = 1\n";
}

}  // namespace falcate::command_line
