/// The matrix of a Newton step, rates M + dR/dq with M = dU/dq, assembled in single precision.
///
/// Two matrices are laid out. `wide` is the exact derivative: a row couples to the neighbours of
/// its neighbours, through their gradients. `compact` couples face neighbours only: flux
/// derivatives as they are, face values between that of the own cell (upwind, as in the first-order
/// scheme) and the mean of both; preconditioners are made of it. In both a plane answers as to a
/// change of all its cells alike; products put the exact, non-local answer in its place. Limits:
/// single precision, relative error about 1e-6; jacobian.h has the double one.
#pragma once
#include <cstdint>

#include "solver/block_matrix.h"
#include "solver/flux_derivative.h"

namespace falcate::solver {

class NewtonMatrix {
 public:
  explicit NewtonMatrix(const Residual& residual);
  /// dR/dq at these cells; the same bits for every number of threads.
  void assemble(CellStates cells);
  /// + rate M, a rate for each cell.
  void add_rates(std::span<const double> rates);
  /// y = A x
  void multiply(const SingleVector& x, SingleVector& y) const;

  const BlockMatrix& wide() const { return wide_; }
  const BlockMatrix& compact() const { return compact_; }

 private:
  /// A side's derivatives with those along difference and offset turned into x and y.
  struct Side {
    Block flux;
    Eigen::Array4f own, other, along_x, along_y;
  };
  struct Face {
    Side left, right;
  };
  static Side single(const SideDerivative& side, const Residual::FaceGeometry& g);
  template <class Visit>
  void for_each_coupling(int row, const Visit& visit) const;
  void lay_out();
  void differentiate();
  void fill_row(int row);
  void fill_compact_row(int row);
  const std::uint16_t* add_side(const Side& side, float sign, int own, bool interior,
                                std::size_t first, const std::uint16_t* slot);

  const Residual& residual_;
  BlockMatrix wide_, compact_;
  std::vector<std::uint16_t> slots_;  ///< place within its row of each coupling, as visited
  std::vector<std::size_t> first_slot_;
  std::vector<State<double>> cells_;
  CellGradients gradients_;
  std::vector<Face> faces_;
  std::vector<Side> boundary_;
  std::vector<PlaneResponse> planes_;
  std::vector<float> upwind_;  ///< share of each cell in the compact matrix
};

}  // namespace falcate::solver
