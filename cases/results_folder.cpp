#include "cases/results_folder.h"

#include <fmt/format.h>

#include <cstring>
#include <filesystem>

#include "cases/case_file.h"
#include "post/output_error.h"
#include "post/results_file.h"
#include "post/whole_file.h"

namespace falcate::cases {
namespace fs = std::filesystem;
namespace {

/// A run of another version of the program is another run.
std::string identity(const Case& input) {
  return fmt::format("falcate {}\ncase_sha256 {}\n", FALCATE_VERSION, input.sha256);
}

/// Name of the case file, which is also the title of a case without one.
std::string kept_name(const std::string& mark) {
  const std::string text = post::read_whole_file(mark), key = "case_file ";
  const auto place = text.find(key);
  if (place == std::string::npos)
    throw FolderError(fmt::format("{}: does not name a case file", mark));
  const auto begin = place + key.size();
  return fs::path(text.substr(begin, text.find('\n', begin) - begin)).filename().string();
}

void make_folder(const fs::path& path) {
  std::error_code error;
  fs::create_directories(path, error);
  if (error)
    throw post::OutputError(
        fmt::format("{}: cannot make the folder: {}", path.string(), error.message()));
}

void check_owner(const fs::path& path, const Case& input) {
  const fs::path mark = path / "points" / "run.txt";
  if (fs::exists(mark)) {
    if (post::read_whole_file(mark.string()).starts_with(identity(input))) return;
    throw FolderError(fmt::format(
        "{}: holds the results of another case, an older state of this one or another version of "
        "the program; choose another folder with --out, or remove it",
        path.string()));
  }
  std::error_code error;
  if (fs::exists(path) && !fs::is_directory(path))
    throw FolderError(fmt::format("{}: is a file; choose a folder with --out", path.string()));
  if (fs::exists(path) && !fs::is_empty(path, error))
    throw FolderError(fmt::format(
        "{}: is in use for something else; choose another folder with --out", path.string()));
}

constexpr char states_mark[9] = "falcate1";

template <class T>
void put(std::string& bytes, const T& value) {
  bytes.append(reinterpret_cast<const char*>(&value), sizeof value);
}

class ByteReader {
 public:
  ByteReader(std::string bytes, std::string path)
      : bytes_(std::move(bytes)), path_(std::move(path)) {}
  void take(void* target, std::size_t size) {
    if (size > bytes_.size() - place_)
      throw post::OutputError(fmt::format("{}: ends too early", path_));
    if (size > 0) std::memcpy(target, bytes_.data() + place_, size);
    place_ += size;
  }
  std::uint64_t count(std::uint64_t item_size) {
    std::uint64_t value = 0;
    take(&value, sizeof value);
    if (value > (bytes_.size() - place_) / item_size)
      throw post::OutputError(fmt::format("{}: is damaged", path_));
    return value;
  }

 private:
  std::string bytes_, path_;
  std::size_t place_ = 0;
};

}  // namespace

ResultsFolder ResultsFolder::open(const std::string& path, const Case& input) {
  check_owner(path, input);
  for (const char* name : {"points", "flow", "shapes"}) make_folder(fs::path(path) / name);
  ResultsFolder folder(path);
  if (fs::exists(folder.file("points/run.txt"))) return folder;
  const std::string name = fs::path(input.file).filename().string();
  make_folder(folder.file("points/case"));
  post::write_whole_file(folder.file("points/case/" + name), input.text);
  if (!input.outline_path.empty())
    post::write_whole_file(folder.file("points/outline.csv"),
                           post::read_whole_file(input.outline_path));
  post::write_whole_file(folder.file("points/run.txt"),
                         identity(input) + "case_file " + name + "\n");
  return folder;
}

Case ResultsFolder::kept_case(const std::string& path) {
  ResultsFolder folder(path);
  if (!fs::exists(folder.file("points/run.txt")))
    throw FolderError(fmt::format("{}: holds no results", path));
  const std::string outline = folder.file("points/outline.csv");
  return read_case(folder.file("points/case/" + kept_name(folder.file("points/run.txt"))),
                   fs::exists(outline) ? outline : "");
}

std::string ResultsFolder::file(const std::string& name) const {
  return (fs::path(path_) / name).string();
}

std::optional<SolvedPoint> ResultsFolder::point(const std::string& id) const {
  const std::string record = file("points/" + id + ".json"),
                    states = file("points/" + id + ".state");
  if (!fs::exists(record) || !fs::exists(states)) return std::nullopt;
  try {
    return SolvedPoint{post::read_point_record(record), read_states(states)};
  } catch (const post::OutputError&) {
    return std::nullopt;  // solved again, which costs time and nothing else
  }
}

void ResultsFolder::keep(const SolvedPoint& point) const {
  write_states(point.states, file("points/" + point.result.id + ".state"));
  post::write_point_record(point.result, file("points/" + point.result.id + ".json"));
}

void write_states(const LevelStates& states, const std::string& path) {
  std::string bytes(states_mark, 8);
  put(bytes, static_cast<std::uint64_t>(states.size()));
  for (const auto& level : states) {
    put(bytes, static_cast<std::uint64_t>(level.size()));
    for (const solver::Primitive& cell : level) put(bytes, cell);
  }
  post::write_whole_file(path, bytes);
}

LevelStates read_states(const std::string& path) {
  ByteReader reader(post::read_whole_file(path), path);
  char mark[8];
  reader.take(mark, sizeof mark);
  if (std::memcmp(mark, states_mark, sizeof mark) != 0)
    throw post::OutputError(fmt::format("{}: holds no cell states", path));
  LevelStates states(reader.count(sizeof(std::uint64_t)));
  for (auto& level : states) {
    level.resize(reader.count(sizeof(solver::Primitive)));
    reader.take(level.data(), level.size() * sizeof(solver::Primitive));
  }
  return states;
}

}  // namespace falcate::cases
