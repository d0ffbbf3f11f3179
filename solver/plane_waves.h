/// Pitchwise harmonics on an in- or outflow plane: the circle Hilbert transform between cells.
///
/// With face lengths w_j, face centres y_j and pitch t,
///   deviation_i = f_i - sum_j (w_j/t) f_j,    hilbert_i = sum_j S_ij f_j,
///   S_ij = (w_j/t) sum_{l=1..n/2} 2 sin(2 pi l (y_i - y_j)/t),
/// so that exp(i l k y) becomes -i sgn(l) exp(i l k y): the operator behind the non-reflecting
/// conditions, whose coefficients differ between harmonics only by sgn(l).
/// Source: Giles, AIAA J. 28(12) (1990) 2050-2058.
#pragma once
#include <span>
#include <vector>

#include "solver/dual.h"

namespace falcate::solver {

class PlaneWaves {
 public:
  PlaneWaves() = default;
  /// Not periodic (pitch 0): the Hilbert transform is left out, deviations vanish.
  PlaneWaves(const std::vector<double>& lengths, const std::vector<double>& centres, double pitch);

  std::size_t size() const { return weight_.size(); }
  double weight(std::size_t i) const { return weight_[i]; }
  bool periodic() const { return !kernel_.empty(); }

  template <class T>
  T mean(std::span<const T> f) const {
    T sum(0.0);
    for (std::size_t j = 0; j < size(); ++j) sum += weight_[j] * f[j];
    return sum;
  }
  template <class T>
  T hilbert(std::span<const T> f, std::size_t i) const {
    T sum(0.0);
    if (periodic())
      for (std::size_t j = 0; j < size(); ++j) sum += kernel_[i * size() + j] * f[j];
    return sum;
  }

 private:
  std::vector<double> weight_;  ///< sums to 1
  std::vector<double> kernel_;  ///< row-major S
};

}  // namespace falcate::solver
