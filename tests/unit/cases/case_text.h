/// Case files for tests: a sound wheel case and a sound rig case, line by line, to be spoilt.
#pragma once
#include <unistd.h>

#include <atomic>
#include <filesystem>
#include <fstream>
#include <string>
#include <vector>

namespace falcate::cases {

inline std::vector<std::string> wheel_lines() {
  return {/* 1*/ "title = \"Test wheel\"",
          /* 2*/ "[gas]",
          /* 3*/ "name = \"air\"",
          /* 4*/ "[supply]",
          /* 5*/ "pressure = \"6 bar(g)\"",
          /* 6*/ "temperature = \"20 degC\"",
          /* 7*/ "[exhaust]",
          /* 8*/ "pressure = \"1.013 bar(a)\"",
          /* 9*/ "[nozzle]",
          /*10*/ "throat_diameter = \"1.6 mm\"",
          /*11*/ "exit_diameter = \"1.6 mm\"",
          /*12*/ "count = 2",
          /*13*/ "angle = \"20 deg\"",
          /*14*/ "[wheel]",
          /*15*/ "mean_diameter = \"46 mm\"",
          /*16*/ "blade_count = 34",
          /*17*/ "blade_height = \"3 mm\"",
          /*18*/ "blade_width = \"6 mm\"",
          /*19*/ "rim = \"ringed\"",
          /*20*/ "speed = \"45000 rpm\"",
          /*21*/ "[blade]",
          /*22*/ "shape = \"channel\"",
          /*23*/ "[flow]",
          /*24*/ "cells = 8000"};
}

inline std::vector<std::string> rig_lines() {
  return {/* 1*/ "[stream]",
          /* 2*/ "total_pressure = \"1.5 bar(a)\"",
          /* 3*/ "total_temperature = \"300 K\"",
          /* 4*/ "angle = \"25 deg\"",
          /* 5*/ "exit_pressure = \"1.0 bar(a)\"",
          /* 6*/ "[row]",
          /* 7*/ "pitch = \"6 mm\"",
          /* 8*/ "width = \"10 mm\"",
          /* 9*/ "[blade]",
          /*10*/ "shape = \"channel\""};
}

inline std::string joined(const std::vector<std::string>& lines) {
  std::string text;
  for (const std::string& line : lines) text += line + "\n";
  return text;
}

/// A folder of its own, gone when the test ends.
class ScratchFolder {
 public:
  ScratchFolder() {
    static std::atomic<int> count{0};
    path_ = std::filesystem::temp_directory_path() /
            ("falcate-test-" + std::to_string(::getpid()) + "-" + std::to_string(count++));
    std::filesystem::create_directories(path_);
  }
  ~ScratchFolder() {
    std::error_code ignored;
    std::filesystem::remove_all(path_, ignored);
  }
  ScratchFolder(const ScratchFolder&) = delete;
  ScratchFolder& operator=(const ScratchFolder&) = delete;

  std::string path(const std::string& name = {}) const { return (path_ / name).string(); }
  std::string write(const std::string& name, const std::string& text) const {
    std::ofstream(path(name), std::ios::binary) << text;
    return path(name);
  }

 private:
  std::filesystem::path path_;
};

}  // namespace falcate::cases
