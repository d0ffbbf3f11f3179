/// Exponent n of the law y = c x^n that fits points best: the least-squares slope of log y over
/// log x. At least two different x; all positive.
#pragma once
#include <cassert>
#include <cmath>
#include <vector>

namespace falcate::benchmarks {

inline double power_of(const std::vector<double>& x, const std::vector<double>& y) {
  assert(x.size() == y.size() && x.size() > 1);
  const auto count = static_cast<double>(x.size());
  double mean_x = 0.0, mean_y = 0.0, sxx = 0.0, sxy = 0.0;
  for (std::size_t i = 0; i < x.size(); ++i) {
    mean_x += std::log(x[i]) / count;
    mean_y += std::log(y[i]) / count;
  }
  for (std::size_t i = 0; i < x.size(); ++i) {
    const double dx = std::log(x[i]) - mean_x;
    sxx += dx * dx;
    sxy += dx * (std::log(y[i]) - mean_y);
  }
  return sxy / sxx;
}

}  // namespace falcate::benchmarks
