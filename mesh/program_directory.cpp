#include "mesh/program_directory.h"

#include <sys/auxv.h>

#include <cstdlib>
#include <filesystem>
#include <sstream>

#include "mesh/passage_mesh.h"

namespace falcate::mesh {
namespace {

namespace fs = std::filesystem;

/// Directory of the program that a path leads to, links followed; empty where there is none.
std::string directory_of(const fs::path& path) {
  std::error_code error;
  const fs::path program = fs::canonical(path, error);
  if (error || !fs::is_regular_file(program, error)) return "";
  return program.parent_path().string();
}

std::string searched(const std::string& name, const std::string& search_path) {
  std::istringstream directories(search_path);
  for (std::string directory; std::getline(directories, directory, ':');) {
    std::string found = directory_of(fs::path(directory) / name);
    if (!found.empty()) return found;
  }
  return "";
}

}  // namespace

ProgramTraces traces_of_this_program() {
  // The kernel hands each program the path by which it was started, /proc or not.
  const auto* started_as = reinterpret_cast<const char*>(getauxval(AT_EXECFN));
  const char* search_path = std::getenv("PATH");
  return {"/proc/self/exe", started_as != nullptr ? started_as : "",
          search_path != nullptr ? search_path : ""};
}

std::string program_directory(const ProgramTraces& traces) {
  std::string found = directory_of(traces.self_link);
  if (found.empty() && !traces.started_as.empty())
    found = traces.started_as.find('/') == std::string::npos
                ? searched(traces.started_as, traces.search_path)
                : directory_of(traces.started_as);
  if (found.empty())
    throw MeshError(
        "the directory of this program cannot be found, and the mesher lies there; start the "
        "program by its full path");
  return found;
}

std::string mesher_beside_this_program() {
  return program_directory(traces_of_this_program()) + "/falcate-mesher";
}

}  // namespace falcate::mesh
