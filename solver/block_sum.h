/// Sum of products of 4x4 blocks with vectors of 4, a part for each column: the additions of a row
/// then wait for each other once a block instead of four times. The order of the sum is fixed.
#pragma once
#include <Eigen/Core>

namespace falcate::solver {

class BlockSum {
 public:
  /// + block x
  void add(const Eigen::Matrix4f& block, const float* x) {
    a_ += block.col(0) * x[0];
    b_ += block.col(1) * x[1];
    c_ += block.col(2) * x[2];
    d_ += block.col(3) * x[3];
  }
  Eigen::Vector4f total() const { return (a_ + b_) + (c_ + d_); }

 private:
  Eigen::Vector4f a_ = Eigen::Vector4f::Zero(), b_ = a_, c_ = a_, d_ = a_;
};

}  // namespace falcate::solver
