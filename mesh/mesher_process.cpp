#include "mesh/mesher_process.h"

#include <fcntl.h>
#include <fmt/format.h>
#include <signal.h>
#include <sys/mman.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <cerrno>
#include <chrono>
#include <cmath>
#include <cstddef>
#include <cstring>
#include <filesystem>
#include <thread>

#include "mesh/passage_mesh.h"

namespace falcate::mesh {
namespace {

constexpr rlim_t kMemoryLimit = rlim_t{4} << 30;  // bytes of address space

/// Everything travels as doubles: counts are exact in them up to 2^53.
void write_all(int descriptor, const std::vector<double>& data) {
  const char* from = reinterpret_cast<const char*>(data.data());
  for (std::size_t left = data.size() * sizeof(double); left > 0;) {
    const ssize_t written = write(descriptor, from, left);
    if (written < 0 && errno == EINTR) continue;
    if (written <= 0)
      throw MeshError(fmt::format("mesh data cannot be passed on: {}", std::strerror(errno)));
    from += written;
    left -= static_cast<std::size_t>(written);
  }
}

std::vector<double> read_all(int descriptor) {
  const off_t size = lseek(descriptor, 0, SEEK_END);
  if (size < 0 || lseek(descriptor, 0, SEEK_SET) < 0)
    throw MeshError("mesh data cannot be read back");
  std::vector<double> data(static_cast<std::size_t>(size) / sizeof(double));
  char* to = reinterpret_cast<char*>(data.data());
  for (std::size_t left = data.size() * sizeof(double); left > 0;) {
    const ssize_t got = read(descriptor, to, left);
    if (got < 0 && errno == EINTR) continue;
    if (got <= 0) throw MeshError("mesh data cannot be read back");
    to += got;
    left -= static_cast<std::size_t>(got);
  }
  return data;
}

/// Takes values off a message from front to back.
class Unpacker {
 public:
  explicit Unpacker(std::vector<double> data) : data_(std::move(data)) {}
  double number() {
    if (next_ >= data_.size()) throw MeshError("the mesher's message is cut short");
    return data_[next_++];
  }
  int count() { return static_cast<int>(number()); }
  Point point() {
    const double x = number();
    return {x, number()};
  }

 private:
  std::vector<double> data_;
  std::size_t next_ = 0;
};

std::vector<double> pack(const MesherRequest& request) {
  std::vector<double> data{double(request.algorithm), double(request.recombination),
                           double(request.curves.size())};
  for (const auto& curve : request.curves) {
    data.push_back(double(curve.size()));
    for (const auto& p : curve) data.insert(data.end(), {p.x(), p.y()});
  }
  const auto& s = request.size;
  data.insert(data.end(), {s.x0, s.dx, s.dy, s.pitch, double(s.nx), double(s.ny)});
  data.insert(data.end(), s.values.begin(), s.values.end());
  return data;
}

/// A file in memory that closes itself.
class MemoryFile {
 public:
  explicit MemoryFile(const char* name) : descriptor_(memfd_create(name, MFD_CLOEXEC)) {
    if (descriptor_ < 0) {
      throw MeshError(fmt::format("no memory file for the mesher: {}", std::strerror(errno)));
    }
  }
  ~MemoryFile() { close(descriptor_); }
  MemoryFile(const MemoryFile&) = delete;
  MemoryFile& operator=(const MemoryFile&) = delete;
  int descriptor() const { return descriptor_; }

 private:
  int descriptor_;
};

/// In the child, between fork and exec: only calls that are safe there.
[[noreturn]] void become_mesher(const char* program, int request, int answer, double time_limit_s) {
  prctl(PR_SET_PDEATHSIG, SIGKILL);
  const rlimit memory{kMemoryLimit, kMemoryLimit};
  const auto seconds = static_cast<rlim_t>(std::ceil(time_limit_s)) + 1;
  const rlimit processor{seconds, seconds}, core{0, 0};
  setrlimit(RLIMIT_AS, &memory);
  setrlimit(RLIMIT_CPU, &processor);
  setrlimit(RLIMIT_CORE, &core);
  // Out of the way first, since either may sit on the other's number.
  const int high_request = fcntl(request, F_DUPFD, 10), high_answer = fcntl(answer, F_DUPFD, 10);
  const int nothing = open("/dev/null", O_RDWR);
  for (int stream : {0, 1, 2}) dup2(nothing, stream);
  dup2(high_request, kRequestDescriptor);
  dup2(high_answer, kAnswerDescriptor);
  for (int other : {high_request, high_answer}) close(other);
  char* const arguments[] = {const_cast<char*>(program), nullptr};
  execv(program, arguments);
  _exit(127);
}

/// Status of the child as wait() gives it; kills it when its time is up.
int wait_for(pid_t child, double time_limit_s) {
  const auto end = std::chrono::steady_clock::now() + std::chrono::duration<double>(time_limit_s);
  int status = 0;
  for (;;) {
    const pid_t done = waitpid(child, &status, WNOHANG);
    if (done == child) return status;
    if (done < 0 && errno != EINTR) throw MeshError("the mesher got lost");
    if (std::chrono::steady_clock::now() > end) break;
    std::this_thread::sleep_for(std::chrono::milliseconds(1));
  }
  kill(child, SIGKILL);
  while (waitpid(child, &status, 0) < 0 && errno == EINTR) {
  }
  throw MeshError(
      fmt::format("the mesher did not finish within {:.4g} s and was stopped", time_limit_s));
}

void check_status(const std::string& program, int status) {
  if (WIFEXITED(status) && WEXITSTATUS(status) == 0) return;
  if (WIFEXITED(status) && WEXITSTATUS(status) == 127) {
    throw MeshError(fmt::format("the mesher {} cannot be started; reinstall the program", program));
  }
  if (WIFSIGNALED(status) && WTERMSIG(status) == SIGXCPU) {
    throw MeshError("the mesher used up its processor time and was stopped");
  }
  throw MeshError("the mesher broke down on this passage");
}

}  // namespace

std::string mesher_beside_this_program() {
  std::error_code error;
  const auto self = std::filesystem::read_symlink("/proc/self/exe", error);
  if (error)
    throw MeshError("the directory of this program cannot be found, and the mesher lies there");
  return (self.parent_path() / "falcate-mesher").string();
}

MesherAnswer run_mesher(const std::string& program, const MesherRequest& request,
                        double time_limit_s) {
  if (access(program.c_str(), X_OK) != 0) {
    throw MeshError(fmt::format("the mesher {} is missing; reinstall the program", program));
  }
  const MemoryFile question("falcate-request"), answer("falcate-answer");
  write_all(question.descriptor(), pack(request));
  const pid_t child = fork();
  if (child < 0)
    throw MeshError(fmt::format("the mesher cannot be started: {}", std::strerror(errno)));
  if (child == 0) {
    become_mesher(program.c_str(), question.descriptor(), answer.descriptor(), time_limit_s);
  }
  check_status(program, wait_for(child, time_limit_s));
  Unpacker data(read_all(answer.descriptor()));
  MesherAnswer result;
  result.nodes.resize(static_cast<std::size_t>(data.count()));
  result.cells.resize(static_cast<std::size_t>(data.count()));
  for (auto& node : result.nodes) node = data.point();
  for (auto& cell : result.cells) {
    for (int& node : cell) node = data.count();
  }
  return result;
}

MesherRequest read_request(int descriptor) {
  Unpacker data(read_all(descriptor));
  MesherRequest request;
  request.algorithm = data.count();
  request.recombination = data.count();
  request.curves.resize(static_cast<std::size_t>(data.count()));
  for (auto& curve : request.curves) {
    curve.resize(static_cast<std::size_t>(data.count()));
    for (auto& p : curve) p = data.point();
  }
  auto& s = request.size;
  for (double* value : {&s.x0, &s.dx, &s.dy, &s.pitch}) *value = data.number();
  s.nx = data.count();
  s.ny = data.count();
  s.values.resize(static_cast<std::size_t>(s.nx) * static_cast<std::size_t>(s.ny));
  for (double& value : s.values) value = data.number();
  return request;
}

void write_answer(int descriptor, const MesherAnswer& answer) {
  std::vector<double> data{double(answer.nodes.size()), double(answer.cells.size())};
  for (const auto& p : answer.nodes) data.insert(data.end(), {p.x(), p.y()});
  for (const auto& cell : answer.cells) {
    for (int node : cell) data.push_back(node);
  }
  write_all(descriptor, data);
}

}  // namespace falcate::mesh
