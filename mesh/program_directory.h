/// The directory in which the running program lies, where its helper programs lie too.
/// Errors: `MeshError` where no way leads there.
#pragma once
#include <string>

namespace falcate::mesh {

/// What may tell where the program lies, the surest first.
struct ProgramTraces {
  std::string self_link;    ///< link of the system to the running program
  std::string started_as;   ///< name by which it was started: a path, or a bare name
  std::string search_path;  ///< directories for bare names, a colon between them
};
ProgramTraces traces_of_this_program();

std::string program_directory(const ProgramTraces& traces);

/// The mesher that belongs to the running program: in the same directory.
std::string mesher_beside_this_program();

}  // namespace falcate::mesh
