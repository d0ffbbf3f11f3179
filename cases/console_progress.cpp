#include "cases/console_progress.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <ostream>

#include "cases/run_outputs.h"

namespace falcate::cases {

ConsoleProgress::ConsoleProgress(std::ostream& stream, ProgressStyle style)
    : stream_(stream), style_(style), began_(Clock::now()) {}

double ConsoleProgress::share_done(const PointProgress& progress) {
  double total = 0.0, before = 0.0, own = 1.0;
  for (int level = 0; level < progress.levels; ++level) {
    const double cost = std::pow(4.0, level);
    total += cost;
    if (level < progress.level) before += cost;
    if (level == progress.level) own = cost;
  }
  const double target = std::log(std::clamp(progress.residual_target, 1e-300, 0.1));
  const double fallen = std::log(std::clamp(progress.step.residual, 1e-300, 1.0));
  return (before + own * std::clamp(fallen / target, 0.0, 1.0)) / std::max(total, 1.0);
}

std::string ConsoleProgress::bar(double share, int width) {
  const int full = static_cast<int>(std::lround(std::clamp(share, 0.0, 1.0) * width));
  return fmt::format("[{:#<{}}{:.<{}}]", "", full, "", width - full);
}

void ConsoleProgress::meshed(int points, int kept, int cells) {
  const std::lock_guard<std::mutex> lock(mutex_);
  points_ = points;
  to_do_ = points - kept;
  began_ = Clock::now();
  if (style_ == ProgressStyle::quiet) return;
  stream_ << fmt::format("{} point{}, finest mesh {} cells", points, points == 1 ? "" : "s", cells);
  if (kept > 0) stream_ << fmt::format(", {} finished before", kept);
  stream_ << std::endl;
}

void ConsoleProgress::progress(const PointProgress& progress) {
  if (style_ != ProgressStyle::live) return;
  const std::lock_guard<std::mutex> lock(mutex_);
  active_[progress.id] = progress;
  if (Clock::now() - drawn_ < std::chrono::milliseconds(100)) return;
  erase();
  draw();
}

void ConsoleProgress::finished(const post::PointResult& point, bool kept) {
  const std::lock_guard<std::mutex> lock(mutex_);
  active_.erase(point.id);
  if (!kept) ++done_;
  if (style_ == ProgressStyle::quiet) return;
  erase();
  stream_ << point_line(point)
          << (kept ? "  (finished before)" : fmt::format("  {:.1f} s", point.seconds)) << std::endl;
  if (style_ == ProgressStyle::live && done_ < to_do_) draw();
}

/// Takes the live lines off the screen.
void ConsoleProgress::erase() {
  for (; drawn_lines_ > 0; --drawn_lines_) stream_ << "\x1b[1A\x1b[2K";
}

void ConsoleProgress::draw() {
  for (const auto& [id, point] : active_) {
    stream_ << fmt::format("{}  {}  mesh {} of {}  step {:>3}  residual {:.1e}\n", id,
                           bar(share_done(point), 20), point.level + 1, point.levels,
                           point.step.step, point.step.residual);
    ++drawn_lines_;
  }
  stream_ << fmt::format("{} of {} points done, {}\n", points_ - to_do_ + done_, points_,
                         time_left());
  ++drawn_lines_;
  stream_.flush();
  drawn_ = Clock::now();
}

std::string ConsoleProgress::time_left() const {
  double share = done_;
  for (const auto& [id, point] : active_) share += share_done(point);
  if (share < 0.02) return "time left not known yet";
  const double spent = std::chrono::duration<double>(Clock::now() - began_).count();
  const double left = spent / share * (to_do_ - share);
  return left < 90.0 ? fmt::format("about {:.0f} s left", left)
                     : fmt::format("about {:.0f} min left", left / 60.0);
}

}  // namespace falcate::cases
