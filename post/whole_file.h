/// A file that appears whole or not at all: written to a temporary name in the same folder, flushed
/// to the disk, then renamed over the old one. Errors: `OutputError` naming the file and the cause
/// (disk full, no such folder, not allowed); nothing is left behind.
#pragma once
#include <string>
#include <string_view>

#include "post/output_error.h"

namespace falcate::post {

void write_whole_file(const std::string& path, std::string_view content);
std::string read_whole_file(const std::string& path);

/// For writers that want a file name of their own: write to temporary(), then keep().
/// The temporary name ends in the same suffix as the final one.
class WholeFile {
 public:
  explicit WholeFile(std::string path);
  ~WholeFile();  ///< removes the temporary file where keep() was not reached
  WholeFile(const WholeFile&) = delete;
  WholeFile& operator=(const WholeFile&) = delete;

  const std::string& temporary() const { return temporary_; }
  void keep();

 private:
  std::string path_, temporary_;
  bool kept_ = false;
};

}  // namespace falcate::post
