#include "tests/benchmarks/arithmetic.h"

#include <array>
#include <cmath>
#include <thread>
#include <vector>

#include "tests/benchmarks/timing.h"

namespace falcate::benchmarks {
namespace {

/// Kept from the compiler, which otherwise leaves out work whose result nobody reads.
volatile double sink = 0.0;

void multiply_add(long rounds) {
  std::array<double, 64> a{};
  const double factor = 0.999, term = 1e-3;
  for (long i = 0; i < rounds; ++i)
    for (double& x : a) x = std::fma(x, factor, term);
  double sum = 0.0;
  for (const double x : a) sum += x;
  sink = sum;
}

}  // namespace

double arithmetic_seconds(int threads, long rounds) {
  return seconds_of([&] {
    std::vector<std::jthread> crew;
    for (int i = 0; i < threads; ++i) crew.emplace_back([&] { multiply_add(rounds); });
  });
}

double triad_bandwidth(std::size_t length) {
  std::vector<double> a(length, 0.0), b(length, 1.0), c(length, 2.0);
  double scalar = 3.0;
  const double best = best_seconds([&] {
    for (std::size_t i = 0; i < length; ++i) a[i] = b[i] + scalar * c[i];
    scalar += 1e-3 * a[length / 2];
  });
  sink = a[length / 3];
  return 3.0 * sizeof(double) * static_cast<double>(length) / best;
}

}  // namespace falcate::benchmarks
