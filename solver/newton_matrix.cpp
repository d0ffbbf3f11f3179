#include "solver/newton_matrix.h"

#include <algorithm>
#include <cmath>

namespace falcate::solver {
namespace {

using RowMajor = Eigen::Matrix<double, 4, 4, Eigen::RowMajor>;

/// Second-order schemes damp smooth waves less than a compact upwind matrix does. In supersonic
/// flow, where errors run far along the characteristics, half of the upwind part comes nearest;
/// slow flow needs all of it, or the factors of the matrix become unstable.
float upwind_share(const State<double>& q, double gamma) {
  const double mach = std::hypot(q[velocity_x], q[velocity_y]) / speed_of_sound(q, gamma);
  return static_cast<float>(1.0 - 0.5 * std::clamp(2.0 * mach - 1.0, 0.0, 1.0));
}

BlockMatrix pattern(std::vector<std::vector<int>>& columns) {
  for (auto& list : columns) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
  }
  return BlockMatrix(columns);
}

}  // namespace

NewtonMatrix::NewtonMatrix(const Residual& residual)
    : residual_(residual),
      faces_(static_cast<std::size_t>(residual.mesh().interior_face_count())),
      boundary_(static_cast<std::size_t>(residual.mesh().face_count()) - faces_.size()) {
  lay_out();
}

/// The cells a row's fluxes hang on, face after face: of each side the own cell, the other one and
/// those of the gradient.
template <class Visit>
void NewtonMatrix::for_each_coupling(int row, const Visit& visit) const {
  const auto& mesh = residual_.mesh();
  const auto side = [&](int own, int other) {
    visit(own);
    if (other >= 0) visit(other);
    for (const auto& neighbour : residual_.stencil().of(own)) visit(neighbour.cell);
  };
  for (const auto& cf : residual_.faces_of(static_cast<std::size_t>(row))) {
    const auto& face = mesh.faces()[static_cast<std::size_t>(cf.face)];
    side(face.left, face.right);
    if (face.right >= 0) side(face.right, face.left);
  }
}

void NewtonMatrix::lay_out() {
  const int n = residual_.mesh().cell_count();
  std::vector<std::vector<int>> far(static_cast<std::size_t>(n)), near(static_cast<std::size_t>(n));
  for (int row = 0; row < n; ++row) {
    const auto at = static_cast<std::size_t>(row);
    for_each_coupling(row, [&](int cell) { far[at].push_back(cell); });
    near[at].push_back(row);
    for (const auto& cf : residual_.faces_of(at)) {
      const auto& face = residual_.mesh().faces()[static_cast<std::size_t>(cf.face)];
      if (face.right >= 0) near[at].push_back(face.left == row ? face.right : face.left);
    }
  }
  wide_ = pattern(far);
  compact_ = pattern(near);
  for (int row = 0; row < n; ++row) {
    first_slot_.push_back(slots_.size());
    for_each_coupling(row, [&](int cell) {
      slots_.push_back(static_cast<std::uint16_t>(wide_.place(row, cell) - wide_.begin(row)));
    });
  }
}

NewtonMatrix::Side NewtonMatrix::single(const SideDerivative& side,
                                        const Residual::FaceGeometry& g) {
  const auto along = [&](double difference, double offset) -> Eigen::Array4f {
    return (side.along_difference * difference + side.along_offset * offset).cast<float>();
  };
  return {side.flux.cast<float>(), side.own.cast<float>(), side.other.cast<float>(),
          along(g.difference.x(), g.offset.x()), along(g.difference.y(), g.offset.y())};
}

void NewtonMatrix::differentiate() {
  residual_.gradients(CellStates(cells_), gradients_);
#pragma omp parallel for schedule(static)
  for (std::size_t f = 0; f < faces_.size(); ++f) {
    const FaceDerivative d = interior_derivative(residual_, cells_, gradients_, f);
    const auto& g = residual_.geometry(f);
    faces_[f] = {single(d.left, g), single(d.right, g)};
  }
  for_each_closed_face(residual_.mesh(), [&](std::size_t f, mesh::PatchKind kind) {
    boundary_[f - faces_.size()] =
        single(boundary_derivative(residual_, cells_, gradients_, f, kind), residual_.geometry(f));
  });
  planes_ = plane_responses(residual_, cells_);
  for (const PlaneResponse& plane : planes_)
    boundary_[plane.face - faces_.size()] = {plane.block.cast<float>(), Eigen::Array4f::Ones(),
                                             Eigen::Array4f::Zero(), Eigen::Array4f::Zero(),
                                             Eigen::Array4f::Zero()};
}

/// Adds one side's part of a face's flux to the row that begins at `first`; returns the slot after
/// those it used.
const std::uint16_t* NewtonMatrix::add_side(const Side& side, float sign, int own, bool interior,
                                            std::size_t first, const std::uint16_t* slot) {
  const Block flux = sign * side.flux;
  Eigen::Array4f on_own = side.own;
  const std::size_t own_place = first + *slot++;
  if (interior) wide_.block(first + *slot++) += flux * side.other.matrix().asDiagonal();
  for (const auto& neighbour : residual_.stencil().of(own)) {
    const Eigen::Array4f share = side.along_x * static_cast<float>(neighbour.weight.x()) +
                                 side.along_y * static_cast<float>(neighbour.weight.y());
    on_own -= share;
    wide_.block(first + *slot++) += flux * share.matrix().asDiagonal();
  }
  wide_.block(own_place) += flux * on_own.matrix().asDiagonal();
  return slot;
}

void NewtonMatrix::fill_row(int row) {
  const std::uint16_t* slot = slots_.data() + first_slot_[static_cast<std::size_t>(row)];
  const std::size_t first = wide_.begin(row);
  for (const auto& cf : residual_.faces_of(static_cast<std::size_t>(row))) {
    const auto f = static_cast<std::size_t>(cf.face);
    const auto& face = residual_.mesh().faces()[f];
    const auto sign = static_cast<float>(cf.sign);
    if (face.right < 0) {
      slot = add_side(boundary_[f - faces_.size()], sign, face.left, false, first, slot);
      continue;
    }
    slot = add_side(faces_[f].left, sign, face.left, true, first, slot);
    slot = add_side(faces_[f].right, sign, face.right, true, first, slot);
  }
}

void NewtonMatrix::fill_compact_row(int row) {
  Block& diagonal = compact_.block(compact_.diagonal(row));
  for (const auto& cf : residual_.faces_of(static_cast<std::size_t>(row))) {
    const auto f = static_cast<std::size_t>(cf.face);
    const auto& face = residual_.mesh().faces()[f];
    if (face.right < 0) {
      diagonal += boundary_[f - faces_.size()].flux;
      continue;
    }
    const auto sign = static_cast<float>(cf.sign);
    const float upwind = std::max(upwind_[static_cast<std::size_t>(face.left)],
                                  upwind_[static_cast<std::size_t>(face.right)]);
    const Block left = sign * faces_[f].left.flux, right = sign * faces_[f].right.flux;
    const Block exchange = 0.5f * (1.0f - upwind) * (right - left);
    compact_.block(compact_.place(row, face.left)) += left + exchange;
    compact_.block(compact_.place(row, face.right)) += right - exchange;
  }
}

void NewtonMatrix::assemble(CellStates cells) {
  cells_.assign(cells.begin(), cells.end());
  upwind_.resize(cells_.size());
  std::transform(cells_.begin(), cells_.end(), upwind_.begin(), [&](const State<double>& q) {
    return upwind_share(q, residual_.problem().gamma);
  });
  differentiate();
  wide_.set_zero();
  compact_.set_zero();
#pragma omp parallel for schedule(static)
  for (int row = 0; row < wide_.rows(); ++row) {
    fill_row(row);
    fill_compact_row(row);
  }
}

void NewtonMatrix::add_rates(std::span<const double> rates) {
  for (int row = 0; row < wide_.rows(); ++row) {
    const auto at = static_cast<std::size_t>(row);
    const auto m = conserved_by_primitive(cells_[at], residual_.problem().gamma);
    const Block term = (rates[at] * Eigen::Map<const RowMajor>(m.data())).cast<float>();
    wide_.block(wide_.diagonal(row)) += term;
    compact_.block(compact_.diagonal(row)) += term;
  }
}

void NewtonMatrix::multiply(const SingleVector& x, SingleVector& y) const {
  wide_.multiply(x, y);
  const auto change = [&](std::size_t cell) -> State<double> {
    const auto* q = x.data() + 4 * cell;
    return {q[0], q[1], q[2], q[3]};
  };
  for (const PlaneResponse& plane : planes_) {
    const auto cell = 4 * static_cast<Eigen::Index>(residual_.mesh().faces()[plane.face].left);
    y.segment<4>(cell) -= plane.block.cast<float>() * x.segment<4>(cell);
  }
  plane_products(
      residual_, CellStates(cells_), change, [&](std::size_t f, const State<double>& flux) {
        const auto cell = 4 * static_cast<Eigen::Index>(residual_.mesh().faces()[f].left);
        for (std::size_t k = 0; k < 4; ++k)
          y(cell + static_cast<Eigen::Index>(k)) += static_cast<float>(flux[k]);
      });
}

}  // namespace falcate::solver
