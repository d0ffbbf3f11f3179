/// Flows with exact answers, each under several conditions and solved on three nested meshes: what
/// error bars are judged by.
///
/// Blade rows (shock-free supersonic impulse rows, incompressible cascades from a conformal map)
/// are meshed and solved as any row of a case file; flows between walls on mapped meshes. The exact
/// incompressible cascades are solved at a low Mach number M: the exit angle is then
/// beta(M) = beta(0) + a M^2, with a the solver's own change between two Mach numbers on one mesh,
/// whose error is that of the mesh times M^2; every other figure follows from beta(M) by the
/// balances of mass and momentum and from the lossless flow.
/// Errors: std::runtime_error where a flow was not solved.
#pragma once
#include <functional>
#include <string>
#include <vector>

namespace falcate::validation {

/// A figure with its exact value and what was found on the meshes, coarse first.
struct Finding {
  std::string figure, unit;
  double exact = 0.0;
  std::vector<double> found;
  double spread = 0.0;  ///< of a flow averaged over time: its halves differ by so much
};

struct Condition {
  std::string words;
  std::vector<Finding> findings;
  bool steady = true;
};

struct ExactCase {
  std::string name, words, source;
  int conditions = 10;
  std::function<Condition(int)> solve;  ///< of the condition of that number, from 0
};
const std::vector<ExactCase>& exact_cases();

}  // namespace falcate::validation
