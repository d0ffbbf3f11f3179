#include "solver/jacobian.h"

namespace falcate::solver {
namespace {

using Eigen::Array4d;

Eigen::Map<const Array4d> array(const State<double>& s) {
  return Eigen::Map<const Array4d>(s.data());
}
Eigen::Map<Array4d> array(State<double>& s) { return Eigen::Map<Array4d>(s.data()); }

/// A vector of 4 values a cell, seen as states.
CellStates states(const Vector& x) {
  return {reinterpret_cast<const State<double>*>(x.data()), static_cast<std::size_t>(x.size()) / 4};
}

}  // namespace

Jacobian::Jacobian(const Residual& residual)
    : residual_(residual),
      faces_(static_cast<std::size_t>(residual.mesh().interior_face_count())),
      boundary_(static_cast<std::size_t>(residual.mesh().face_count()) - faces_.size()),
      fluxes_(static_cast<std::size_t>(residual.mesh().face_count())) {}

void Jacobian::linearise(CellStates cells) {
  cells_.assign(cells.begin(), cells.end());
  CellGradients gradients;
  residual_.gradients(cells, gradients);
#pragma omp parallel for schedule(static)
  for (std::size_t f = 0; f < faces_.size(); ++f)
    faces_[f] = interior_derivative(residual_, cells, gradients, f);
  for_each_closed_face(residual_.mesh(), [&](std::size_t f, mesh::PatchKind kind) {
    boundary_[f - faces_.size()] = boundary_derivative(residual_, cells, gradients, f, kind);
  });
}

void Jacobian::interior_products(CellStates x, std::span<State<double>> fluxes) const {
  const auto& faces = residual_.mesh().faces();
#pragma omp parallel for schedule(static)
  for (int i = 0; i < residual_.mesh().interior_face_count(); ++i) {
    const auto f = static_cast<std::size_t>(i);
    const auto& g = residual_.geometry(f);
    const auto change = [&](const SideDerivative& side, std::size_t own, std::size_t other) {
      const auto gx = array(slopes_[own].x), gy = array(slopes_[own].y);
      const Array4d along_difference = gx * g.difference.x() + gy * g.difference.y();
      const Array4d along_offset = gx * g.offset.x() + gy * g.offset.y();
      const Array4d value = side.own * array(x[own]) + side.other * array(x[other]) +
                            side.along_difference * along_difference +
                            side.along_offset * along_offset;
      return Eigen::Vector4d(side.flux * value.matrix());
    };
    const auto l = static_cast<std::size_t>(faces[f].left);
    const auto r = static_cast<std::size_t>(faces[f].right);
    array(fluxes[f]) = change(faces_[f].left, l, r) + change(faces_[f].right, r, l);
  }
}

void Jacobian::boundary_products(CellStates x, std::span<State<double>> fluxes) const {
  const auto product = [&](std::size_t f, mesh::PatchKind) {
    const auto cell = static_cast<std::size_t>(residual_.mesh().faces()[f].left);
    const SideDerivative& side = boundary_[f - faces_.size()];
    const auto& offset = residual_.geometry(f).offset;
    const Array4d along = array(slopes_[cell].x) * offset.x() + array(slopes_[cell].y) * offset.y();
    const Array4d value = side.own * array(x[cell]) + side.along_offset * along;
    array(fluxes[f]) = side.flux * value.matrix();
  };
  for_each_closed_face(residual_.mesh(), product);
}

void Jacobian::multiply(const Vector& x, Vector& y) const {
  const auto in = states(x);
  residual_.gradients(in, slopes_);
  interior_products(in, fluxes_);
  boundary_products(in, fluxes_);
  plane_products(
      residual_, cells_, [&](std::size_t cell) { return in[cell]; },
      [&](std::size_t f, const State<double>& flux) { fluxes_[f] = flux; });
  y.resize(x.size());
#pragma omp parallel for schedule(static)
  for (int i = 0; i < residual_.mesh().cell_count(); ++i) {
    Array4d sum = Array4d::Zero();
    for (const auto& cf : residual_.faces_of(static_cast<std::size_t>(i)))
      sum += cf.sign * array(fluxes_[static_cast<std::size_t>(cf.face)]);
    y.segment<4>(4 * i) = sum;
  }
}

void Jacobian::planes_transposed(const Vector& x, Vector& y) const {
  residual_.for_each_plane([&](const Plane& plane, bool inflow) {
    std::vector<State<Dual<4>>> beside;
    for (std::size_t i = 0; i < plane.waves.size(); ++i)
      beside.push_back(constant<4>(cells_[residual_.cell_at(plane, i)]));
    for (std::size_t j = 0; j < beside.size(); ++j) {
      const std::size_t cell = residual_.cell_at(plane, j);
      beside[j] = seeded<4>(cells_[cell]);
      const auto through = residual_.through_plane<Dual<4>>(plane, inflow, beside);
      beside[j] = constant<4>(cells_[cell]);
      for (std::size_t i = 0; i < through.size(); ++i)
        y.segment<4>(4 * static_cast<Eigen::Index>(cell)) +=
            block_of(through[i]).transpose() *
            x.segment<4>(4 * static_cast<Eigen::Index>(residual_.cell_at(plane, i)));
    }
  });
}

void Jacobian::multiply_transposed(const Vector& x, Vector& y) const {
  const auto& mesh = residual_.mesh();
  const std::size_t n = cells_.size();
  std::vector<Gradient<double>> slopes(n, Gradient<double>{});
  std::vector<State<double>> sums(n, State<double>{});
  const auto in = states(x);
  // Face by face, from the flux back to the two cells and to the gradients.
  const auto spread = [&](const SideDerivative& side, const Array4d& flux, std::size_t f,
                          std::size_t own, std::size_t other) {
    const auto& g = residual_.geometry(f);
    const Array4d value = side.flux.transpose() * flux.matrix();
    array(sums[own]) += side.own * value;
    array(sums[other]) += side.other * value;
    array(slopes[own].x) +=
        (side.along_difference * g.difference.x() + side.along_offset * g.offset.x()) * value;
    array(slopes[own].y) +=
        (side.along_difference * g.difference.y() + side.along_offset * g.offset.y()) * value;
  };
  for (std::size_t f = 0; f < faces_.size(); ++f) {
    const auto l = static_cast<std::size_t>(mesh.faces()[f].left);
    const auto r = static_cast<std::size_t>(mesh.faces()[f].right);
    const Array4d flux = array(in[l]) - array(in[r]);
    spread(faces_[f].left, flux, f, l, r);
    spread(faces_[f].right, flux, f, r, l);
  }
  const auto spread_boundary = [&](std::size_t f, mesh::PatchKind) {
    const auto cell = static_cast<std::size_t>(mesh.faces()[f].left);
    spread(boundary_[f - faces_.size()], array(in[cell]), f, cell, cell);
  };
  for_each_closed_face(mesh, spread_boundary);
  // From the gradients back to the cells of their stencils.
  for (std::size_t i = 0; i < n; ++i)
    for (const auto& neighbour : residual_.stencil().of(static_cast<int>(i))) {
      const Array4d part =
          array(slopes[i].x) * neighbour.weight.x() + array(slopes[i].y) * neighbour.weight.y();
      array(sums[static_cast<std::size_t>(neighbour.cell)]) += part;
      array(sums[i]) -= part;
    }
  y.resize(x.size());
  for (std::size_t i = 0; i < n; ++i)
    y.segment<4>(4 * static_cast<Eigen::Index>(i)) = array(sums[i]);
  planes_transposed(x, y);
}

}  // namespace falcate::solver
