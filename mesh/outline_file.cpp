#include "mesh/outline_file.h"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <cmath>
#include <cstddef>
#include <fstream>
#include <optional>

namespace falcate::mesh {
namespace {

std::string trimmed(const std::string& text) {
  const auto first = text.find_first_not_of(" \t\r\"");
  if (first == std::string::npos) return "";
  return text.substr(first, text.find_last_not_of(" \t\r\"") - first + 1);
}

std::vector<std::string> split(const std::string& line) {
  std::vector<std::string> cells;
  for (std::size_t from = 0; from <= line.size();) {
    const auto comma = std::min(line.find(',', from), line.size());
    cells.push_back(trimmed(line.substr(from, comma - from)));
    from = comma + 1;
  }
  return cells;
}

std::optional<double> number(const std::string& text) {
  double value = 0.0;
  const char* end = text.data() + text.size();
  const auto [stop, error] = std::from_chars(text.data(), end, value);
  if (error != std::errc{} || stop != end || !std::isfinite(value)) return std::nullopt;
  return value;
}

struct Columns {
  int x = 0, y = 1, side = -1;
};

bool names(const std::string& cell, const std::string& name) {
  return cell == name || cell.starts_with(name + "_") || cell.starts_with(name + " ");
}

class Reader {
 public:
  explicit Reader(const std::string& file) : file_(file) {}

  std::vector<OutlinePoint> read() {
    std::ifstream in(file_);
    if (!in) throw ShapeError(fmt::format("{}: the file cannot be opened", file_));
    std::string text;
    bool first = true;
    for (line_ = 1; std::getline(in, text); ++line_) {
      if (trimmed(text).empty() || trimmed(text).front() == '#') continue;
      const auto cells = split(text);
      if (!first || !take_names(cells)) take_point(cells);
      first = false;
    }
    return columns_.side < 0 ? std::move(suction_) : joined_sides();
  }

  [[noreturn]] void fail(int line, const std::string& what) const {
    throw ShapeError(fmt::format("{}:{}: {}", file_, line, what));
  }

 private:
  /// True if the line names columns.
  bool take_names(const std::vector<std::string>& cells) {
    if (std::any_of(cells.begin(), cells.end(),
                    [](const auto& c) { return number(c).has_value(); })) {
      return false;
    }
    columns_ = {-1, -1, -1};
    for (int c = 0; c < static_cast<int>(cells.size()); ++c) {
      const auto& cell = cells[static_cast<std::size_t>(c)];
      if (names(cell, "x") && columns_.x < 0) columns_.x = c;
      if (names(cell, "y") && columns_.y < 0) columns_.y = c;
      if (cell == "side") columns_.side = c;
    }
    if (columns_.x < 0 || columns_.y < 0) {
      fail(line_, "the column names must include x and y (and side, if the sides are apart)");
    }
    return true;
  }

  double coordinate(const std::vector<std::string>& cells, int column, const char* name) const {
    const auto c = static_cast<std::size_t>(column);
    if (c >= cells.size()) fail(line_, fmt::format("the line has no {} value", name));
    const auto value = number(cells[c]);
    if (!value) fail(line_, fmt::format("{} is \"{}\", which is not a number", name, cells[c]));
    return *value;
  }

  void take_point(const std::vector<std::string>& cells) {
    const OutlinePoint point{
        {coordinate(cells, columns_.x, "x"), coordinate(cells, columns_.y, "y")}, line_};
    if (columns_.side < 0) {
      suction_.push_back(point);
      return;
    }
    const auto c = static_cast<std::size_t>(columns_.side);
    const std::string side = c < cells.size() ? cells[c] : "";
    if (side != "suction" && side != "pressure") {
      fail(line_, fmt::format("side is \"{}\", it must be suction or pressure", side));
    }
    (side == "suction" ? suction_ : pressure_).push_back(point);
  }

  std::vector<OutlinePoint> joined_sides() {
    for (auto* side : {&suction_, &pressure_}) {
      if (side->size() < 2) {
        throw ShapeError(fmt::format("{}: the {} side has fewer than 2 points", file_,
                                     side == &suction_ ? "suction" : "pressure"));
      }
      if (side->front().point.x() > side->back().point.x())
        std::reverse(side->begin(), side->end());
    }
    std::vector<OutlinePoint> loop = pressure_;
    loop.insert(loop.end(), suction_.rbegin(), suction_.rend());
    return loop;
  }

  const std::string& file_;
  int line_ = 0;
  Columns columns_;
  std::vector<OutlinePoint> suction_, pressure_;  // without sides all points are in the first
};

double cross(const Point& a, const Point& b) { return a.x() * b.y() - a.y() * b.x(); }

double enclosed_area(const std::vector<OutlinePoint>& loop) {
  double area = 0.0;
  for (std::size_t i = 1; i + 1 < loop.size(); ++i) {
    area += 0.5 * cross(loop[i].point - loop[0].point, loop[i + 1].point - loop[0].point);
  }
  return area;
}

bool between(const Point& a, const Point& b, const Point& c, const Point& d) {
  return (cross(b - a, c - a) > 0.0) != (cross(b - a, d - a) > 0.0);
}

void check_crossing(const Reader& reader, const std::vector<OutlinePoint>& loop) {
  const std::size_t n = loop.size();
  for (std::size_t i = 0; i < n; ++i) {
    const Point &a = loop[i].point, &b = loop[(i + 1) % n].point;
    const double left = std::min(a.x(), b.x()), right = std::max(a.x(), b.x());
    for (std::size_t k = i + 2; k < n; ++k) {
      if (i == 0 && k + 1 == n) continue;
      const Point &c = loop[k].point, &d = loop[(k + 1) % n].point;
      if (std::max(c.x(), d.x()) < left || std::min(c.x(), d.x()) > right) continue;
      if (between(a, b, c, d) && between(c, d, a, b)) {
        reader.fail(std::max(loop[i].line, loop[k].line),
                    fmt::format("the outline crosses itself here and at line {}",
                                std::min(loop[i].line, loop[k].line)));
      }
    }
  }
}

}  // namespace

std::vector<OutlinePoint> read_outline(const std::string& csv_file) {
  Reader reader(csv_file);
  auto loop = reader.read();
  Point low(0.0, 0.0), high(0.0, 0.0);
  if (!loop.empty()) low = high = loop.front().point;
  for (const auto& p : loop) low = low.cwiseMin(p.point), high = high.cwiseMax(p.point);
  const double close = 1e-9 * (high - low).norm();
  const auto same = [&](const OutlinePoint& a, const OutlinePoint& b) {
    return (a.point - b.point).norm() <= close;
  };
  loop.erase(std::unique(loop.begin(), loop.end(), same), loop.end());
  while (loop.size() > 1 && same(loop.front(), loop.back())) loop.pop_back();
  if (loop.size() < 4) {
    throw ShapeError(fmt::format("{}: the outline has {} different points, it needs 4 or more",
                                 csv_file, loop.size()));
  }
  check_crossing(reader, loop);
  const double area = enclosed_area(loop);
  if (!(std::abs(area) > 1e-6 * (high - low).squaredNorm())) {
    throw ShapeError(fmt::format("{}: the outline encloses no area", csv_file));
  }
  if (area < 0.0) std::reverse(loop.begin(), loop.end());
  return loop;
}

}  // namespace falcate::mesh
