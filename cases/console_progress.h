/// Progress of a run for the person at the command line: on a terminal a live line a point with
/// bar, residual and time left; plain lines elsewhere; nothing when quiet.
#pragma once
#include <chrono>
#include <iosfwd>
#include <map>
#include <mutex>
#include <string>

#include "cases/run_observer.h"

namespace falcate::cases {

enum class ProgressStyle { quiet, plain, live };

class ConsoleProgress : public RunObserver {
 public:
  ConsoleProgress(std::ostream& stream, ProgressStyle style);
  void meshed(int points, int kept, int cells) override;
  void progress(const PointProgress& progress) override;
  void finished(const post::PointResult& point, bool kept) override;

  /// Share of the work on a point that is done: levels cost 1, 4, 16, ... and the residual falls
  /// evenly on a logarithmic scale.
  static double share_done(const PointProgress& progress);
  static std::string bar(double share, int width);

 private:
  using Clock = std::chrono::steady_clock;
  void erase();
  void draw();
  std::string time_left() const;

  std::ostream& stream_;
  ProgressStyle style_;
  std::mutex mutex_;
  std::map<std::string, PointProgress> active_;
  int points_ = 0, to_do_ = 0, done_ = 0, drawn_lines_ = 0;
  Clock::time_point began_, drawn_;
};

}  // namespace falcate::cases
