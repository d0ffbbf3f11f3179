/// What a run tells whoever watches it. Called from several threads at once.
#pragma once
#include <string>

#include "post/point_result.h"
#include "solver/flow_solution.h"

namespace falcate::cases {

struct PointProgress {
  std::string id;
  int level = 0, levels = 0;  ///< coarse first, from 0
  solver::ConvergencePoint step;
  double residual_target = 0.0;
};

class RunObserver {
 public:
  virtual ~RunObserver() = default;
  virtual void meshed(int /*points*/, int /*kept*/, int /*cells*/) {}
  virtual void progress(const PointProgress&) {}
  /// `kept`: finished in an earlier run.
  virtual void finished(const post::PointResult&, bool /*kept*/) {}
};

}  // namespace falcate::cases
