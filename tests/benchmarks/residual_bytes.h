/// The bytes one residual evaluation must move, array by array: what is read once and written once
/// by any program for this scheme, numbers of 8 bytes and indices of 4; padding and values that can
/// be computed from others in registers do not count.
#pragma once
#include <string>
#include <vector>

#include "solver/residual.h"

namespace falcate::benchmarks {

struct ArrayBytes {
  std::string words;
  double bytes = 0.0;
  bool intermediate = false;  ///< made and used up within the evaluation
};

std::vector<ArrayBytes> residual_bytes(const solver::Residual& residual);

double total(const std::vector<ArrayBytes>& arrays, bool with_intermediates);

}  // namespace falcate::benchmarks
