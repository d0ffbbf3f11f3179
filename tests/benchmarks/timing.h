/// Wall time of work, once or repeated after a warm-up. Seconds.
#pragma once
#include <algorithm>
#include <chrono>
#include <cstddef>
#include <ctime>
#include <vector>

namespace falcate::benchmarks {

template <class Work>
double seconds_of(const Work& work) {
  const auto began = std::chrono::steady_clock::now();
  work();
  return std::chrono::duration<double>(std::chrono::steady_clock::now() - began).count();
}

struct Elapsed {
  double wall = 0.0;
  double processor = 0.0;  ///< of all threads of this process
  /// 1 where one thread had a core to itself.
  double core_share() const { return processor / wall; }
};

template <class Work>
Elapsed elapsed(const Work& work) {
  const auto processor_time = [] {
    timespec t{};
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
    return static_cast<double>(t.tv_sec) + 1e-9 * static_cast<double>(t.tv_nsec);
  };
  const double began = processor_time();
  const double wall = seconds_of(work);
  return {wall, processor_time() - began};
}

/// How many times work of `first` seconds is to be done to fill `span` seconds.
inline int repeats_for(double first, double span, int least, int most) {
  return static_cast<int>(std::clamp(span / std::max(first, 1e-9), 1.0 * least, 1.0 * most));
}

/// The best single time, of a third of a second's repeats.
template <class Work>
double best_seconds(const Work& work) {
  const int repeats = repeats_for(seconds_of(work), 0.33, 5, 300);
  double best = seconds_of(work);
  for (int i = 0; i < repeats; ++i) best = std::min(best, seconds_of(work));
  return best;
}

/// The median of five batches, each long enough that other programs of a busy machine slow it as
/// they slow a whole solve.
template <class Work>
double median_seconds(const Work& work) {
  constexpr std::size_t batches = 5;
  const int repeats = repeats_for(seconds_of(work), 0.06, 3, 10000);
  std::vector<double> seconds;
  for (std::size_t k = 0; k < batches; ++k)
    seconds.push_back(seconds_of([&] {
                        for (int i = 0; i < repeats; ++i) work();
                      }) /
                      repeats);
  std::nth_element(seconds.begin(), seconds.begin() + batches / 2, seconds.end());
  return seconds[batches / 2];
}

}  // namespace falcate::benchmarks
