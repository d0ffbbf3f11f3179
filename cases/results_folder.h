/// The folder of one run: results for people at its top, and in `points/` one record and the cell
/// states of each finished point, so that a run that was stopped goes on where it was and a report
/// can be written anew. It belongs to one case: the digest of the case file is kept in it.
/// Errors: `FolderError` where it holds something else, post::OutputError where it cannot be used.
#pragma once
#include <optional>
#include <stdexcept>
#include <string>

#include "cases/case.h"
#include "cases/point_solver.h"

namespace falcate::cases {

class FolderError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

class ResultsFolder {
 public:
  /// Opens or makes the folder for a case and keeps a copy of the case in it.
  static ResultsFolder open(const std::string& path, const Case& input);
  /// The case that an existing folder belongs to.
  static Case kept_case(const std::string& path);

  std::string file(const std::string& name) const;
  /// A finished point; nullopt where there is none, or the record is damaged.
  std::optional<SolvedPoint> point(const std::string& id) const;
  void keep(const SolvedPoint& point) const;

 private:
  explicit ResultsFolder(std::string path) : path_(std::move(path)) {}
  std::string path_;
};

/// Cell states of all levels, every bit kept. For this machine only, not a format to share.
void write_states(const LevelStates& states, const std::string& path);
LevelStates read_states(const std::string& path);

}  // namespace falcate::cases
