/// Everything wrong with one case file, gathered before anything is said.
/// Each problem reads "file:line: [table] key = value: what is wrong; remedy".
#pragma once
#include <stdexcept>
#include <string>
#include <vector>

namespace falcate::cases {

/// A case file that cannot be used: what() holds one problem a line, in the order of the file.
class CaseError : public std::runtime_error {
 public:
  explicit CaseError(std::vector<std::string> problems);
  const std::vector<std::string>& problems() const { return problems_; }

 private:
  std::vector<std::string> problems_;
};

class CaseProblems {
 public:
  explicit CaseProblems(std::string file) : file_(std::move(file)) {}

  /// `line` 0 where the problem is something that is not in the file.
  void add(int line, const std::string& what);
  bool empty() const { return problems_.empty(); }
  /// Throws CaseError if there is any problem.
  void raise() const;

 private:
  struct Problem {
    int line;
    std::string text;
  };
  std::string file_;
  std::vector<Problem> problems_;
};

}  // namespace falcate::cases
