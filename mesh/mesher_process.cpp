#include "mesh/mesher_process.h"

#include <fcntl.h>
#include <fmt/format.h>
#include <poll.h>
#include <signal.h>
#include <sys/mman.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/socket.h>
#include <sys/wait.h>
#include <unistd.h>

#include <cerrno>
#include <chrono>
#include <cmath>
#include <cstddef>
#include <cstring>

#include "mesh/passage_mesh.h"

namespace falcate::mesh {
namespace {

constexpr rlim_t kMemoryLimit = rlim_t{4} << 30;  // bytes of address space

/// Replaces what is in the file. Everything travels as doubles: counts are exact in them up to
/// 2^53.
void rewrite_file(int descriptor, const std::vector<double>& data) {
  if (ftruncate(descriptor, 0) != 0 || lseek(descriptor, 0, SEEK_SET) != 0) {
    throw MeshError("mesh data cannot be passed on");
  }
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
  void rewrite(const std::vector<double>& data) const { rewrite_file(descriptor_, data); }

 private:
  int descriptor_;
};

/// In the child, between fork and exec: only calls that are safe there.
[[noreturn]] void become_mesher(const char* program, const std::array<int, 3>& inherited,
                                double time_limit_s) {
  prctl(PR_SET_PDEATHSIG, SIGKILL);
  const rlimit memory{kMemoryLimit, kMemoryLimit};
  const auto seconds = static_cast<rlim_t>(std::ceil(time_limit_s)) + 1;
  const rlimit processor{seconds, seconds}, core{0, 0};
  setrlimit(RLIMIT_AS, &memory);
  setrlimit(RLIMIT_CPU, &processor);
  setrlimit(RLIMIT_CORE, &core);
  // Out of the way first, since any may sit on another's number.
  std::array<int, 3> high{};
  for (std::size_t i = 0; i < 3; ++i) high[i] = fcntl(inherited[i], F_DUPFD_CLOEXEC, 10);
  const int nothing = open("/dev/null", O_RDWR);
  for (int stream : {0, 1, 2}) dup2(nothing, stream);
  for (std::size_t i = 0; i < 3; ++i) dup2(high[i], kRequestDescriptor + static_cast<int>(i));
  char* const arguments[] = {const_cast<char*>(program), nullptr};
  execv(program, arguments);
  _exit(127);
}

std::string reason(const std::string& program, int status) {
  if (WIFEXITED(status) && WEXITSTATUS(status) == 127) {
    return fmt::format("the mesher {} cannot be started; reinstall the program", program);
  }
  if (WIFSIGNALED(status) && WTERMSIG(status) == SIGXCPU) {
    return "the mesher used up its processor time and was stopped";
  }
  return "the mesher broke down on this passage";
}

}  // namespace

struct MesherProcess::State {
  std::string program;
  double limit;
  std::chrono::steady_clock::time_point end;
  MemoryFile request{"falcate-request"}, answer{"falcate-answer"};
  int signal = -1;
  pid_t child = -1;
  std::string failure;

  void start() {
    int pair[2];
    if (socketpair(AF_UNIX, SOCK_STREAM | SOCK_CLOEXEC, 0, pair) != 0) {
      throw MeshError(fmt::format("the mesher cannot be started: {}", std::strerror(errno)));
    }
    signal = pair[0];
    child = fork();
    if (child == 0) {
      become_mesher(program.c_str(), {request.descriptor(), answer.descriptor(), pair[1]}, limit);
    }
    close(pair[1]);
    if (child < 0)
      throw MeshError(fmt::format("the mesher cannot be started: {}", std::strerror(errno)));
  }

  int stop() {
    int status = 0;
    if (child <= 0) return status;
    kill(child, SIGKILL);
    while (waitpid(child, &status, 0) < 0 && errno == EINTR) {
    }
    child = -1;
    return status;
  }

  [[noreturn]] void fail(const std::string& what) {
    failure = what;
    throw MeshError(failure);
  }

  /// Waits for the byte that says that the answer is there.
  void await_answer() {
    for (;;) {
      const auto left =
          std::chrono::duration<double, std::milli>(end - std::chrono::steady_clock::now());
      pollfd watched{signal, POLLIN, 0};
      const int ready =
          left.count() <= 0.0 ? 0 : poll(&watched, 1, static_cast<int>(std::ceil(left.count())));
      if (ready < 0 && errno == EINTR) continue;
      if (ready <= 0) {
        stop();
        fail(fmt::format("the mesher did not finish within {:.4g} s and was stopped", limit));
      }
      char byte = 0;
      if (recv(signal, &byte, 1, 0) == 1) return;
      int status = 0;  // it has ended by itself: ask how before making sure that it is gone
      if (waitpid(child, &status, 0) == child) child = -1;
      stop();
      fail(reason(program, status));
    }
  }
};

MesherProcess::MesherProcess(const std::string& program, double time_limit_s)
    : state_(std::make_unique<State>()) {
  if (access(program.c_str(), X_OK) != 0) {
    throw MeshError(fmt::format("the mesher {} is missing; reinstall the program", program));
  }
  state_->program = program;
  state_->limit = time_limit_s;
  state_->end = std::chrono::steady_clock::now() +
                std::chrono::duration_cast<std::chrono::steady_clock::duration>(
                    std::chrono::duration<double>(time_limit_s));
  state_->start();
}

MesherProcess::~MesherProcess() {
  state_->stop();
  if (state_->signal >= 0) close(state_->signal);
}

MesherAnswer MesherProcess::fill(const MesherRequest& request) {
  if (!state_->failure.empty()) throw MeshError(state_->failure);
  state_->request.rewrite(pack(request));
  const char byte = 1;
  send(state_->signal, &byte, 1, MSG_NOSIGNAL);  // if it is gone, the wait below notices
  state_->await_answer();
  Unpacker data(read_all(state_->answer.descriptor()));
  MesherAnswer result;
  result.nodes.resize(static_cast<std::size_t>(data.count()));
  result.cells.resize(static_cast<std::size_t>(data.count()));
  for (auto& node : result.nodes) node = data.point();
  for (auto& cell : result.cells) {
    for (int& node : cell) node = data.count();
  }
  return result;
}

bool await_request() {
  char byte = 0;
  return recv(kSignalDescriptor, &byte, 1, 0) == 1;
}

MesherRequest read_request() {
  Unpacker data(read_all(kRequestDescriptor));
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

void write_answer(const MesherAnswer& answer) {
  std::vector<double> data{double(answer.nodes.size()), double(answer.cells.size())};
  for (const auto& p : answer.nodes) data.insert(data.end(), {p.x(), p.y()});
  for (const auto& cell : answer.cells) {
    for (int node : cell) data.push_back(node);
  }
  rewrite_file(kAnswerDescriptor, data);
  const char byte = 1;
  send(kSignalDescriptor, &byte, 1, MSG_NOSIGNAL);
}

}  // namespace falcate::mesh
