#include "post/whole_file.h"

#include <fcntl.h>
#include <fmt/format.h>
#include <unistd.h>

#include <cerrno>
#include <cstdio>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <utility>

namespace falcate::post {
namespace {

[[noreturn]] void fail(const std::string& path, const char* what, int cause) {
  throw OutputError(fmt::format("{}: cannot {}: {}", path, what, std::strerror(cause)));
}

/// Writes and flushes to the disk; 0 or the errno of the first failure.
int write_all(int file, std::string_view content) {
  while (!content.empty()) {
    const ssize_t written = ::write(file, content.data(), content.size());
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) return errno;
    content.remove_prefix(static_cast<std::size_t>(written));
  }
  return 0;
}

/// Devices and pipes cannot be flushed and need not be.
int flush(int file) { return ::fsync(file) != 0 && errno != EINVAL && errno != EROFS ? errno : 0; }

/// Hidden, beside the final file, one a process, same suffix.
std::string temporary_name(const std::string& path) {
  const std::filesystem::path target(path);
  const std::string name =
      fmt::format(".{}.{}{}", target.stem().string(), ::getpid(), target.extension().string());
  return (target.parent_path() / name).string();
}

}  // namespace

WholeFile::WholeFile(std::string path)
    : path_(std::move(path)), temporary_(temporary_name(path_)) {}

WholeFile::~WholeFile() {
  if (!kept_) ::unlink(temporary_.c_str());
}

void WholeFile::keep() {
  const int file = ::open(temporary_.c_str(), O_RDONLY | O_CLOEXEC);
  if (file < 0) fail(path_, "write", errno);
  const int cause = flush(file);
  ::close(file);
  if (cause != 0) fail(path_, "write", cause);
  if (std::rename(temporary_.c_str(), path_.c_str()) != 0) fail(path_, "write", errno);
  kept_ = true;
}

void write_whole_file(const std::string& path, std::string_view content) {
  WholeFile whole(path);
  const int file =
      ::open(whole.temporary().c_str(), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC, 0666);
  if (file < 0) fail(path, "write", errno);
  int cause = write_all(file, content);
  if (::close(file) != 0 && cause == 0) cause = errno;
  if (cause != 0) fail(path, "write", cause);
  whole.keep();
}

std::string read_whole_file(const std::string& path) {
  errno = 0;
  std::ifstream file(path, std::ios::binary);
  if (!file) fail(path, "read", errno != 0 ? errno : EIO);
  std::ostringstream content;
  content << file.rdbuf();
  // An empty file leaves the stream failed; a folder leaves it bad.
  if (file.bad() || std::filesystem::is_directory(path)) fail(path, "read", EISDIR);
  return content.str();
}

}  // namespace falcate::post
