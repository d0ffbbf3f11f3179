#include "solver/plane_waves.h"

#include <cmath>
#include <numbers>
#include <numeric>

namespace falcate::solver {

PlaneWaves::PlaneWaves(const std::vector<double>& lengths, const std::vector<double>& centres,
                       double pitch)
    : weight_(lengths) {
  const double total = std::accumulate(lengths.begin(), lengths.end(), 0.0);
  for (double& w : weight_) w /= total;
  if (pitch <= 0.0) return;
  const std::size_t n = size();
  const auto harmonics = static_cast<int>(n / 2);
  kernel_.assign(n * n, 0.0);
  for (std::size_t i = 0; i < n; ++i)
    for (std::size_t j = 0; j < n; ++j) {
      const double phase = 2.0 * std::numbers::pi * (centres[i] - centres[j]) / pitch;
      double sum = 0.0;
      for (int l = 1; l <= harmonics; ++l) sum += 2.0 * std::sin(l * phase);
      kernel_[i * n + j] = weight_[j] * sum;
    }
}

}  // namespace falcate::solver
