/// A table of a page: its head once, then a row at a time; all but the first column to the right.
#pragma once
#include <cassert>
#include <cstddef>
#include <string>
#include <vector>

namespace falcate::benchmarks {

class Table {
 public:
  explicit Table(const std::vector<std::string>& head) : width_(head.size()) {
    add(head);
    text_ += "|---|";
    for (std::size_t i = 1; i < head.size(); ++i) text_ += "---:|";
    text_ += "\n";
  }
  void add(const std::vector<std::string>& cells) {
    assert(cells.size() == width_);
    text_ += "|";
    for (const std::string& cell : cells) text_ += " " + cell + " |";
    text_ += "\n";
  }
  const std::string& text() const { return text_; }

 private:
  std::size_t width_;
  std::string text_;
};

}  // namespace falcate::benchmarks
