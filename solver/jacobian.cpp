#include "solver/jacobian.h"

#include <algorithm>
#include <cmath>

namespace falcate::solver {
namespace {

using Eigen::Array4d;
using Eigen::Matrix4d;

template <class Visit>
void for_each_face(const mesh::PassageMesh& mesh, bool (*wanted)(mesh::PatchKind),
                   const Visit& visit) {
  for (const auto& patch : mesh.patches()) {
    if (!wanted(patch.kind)) continue;
    for (int i = patch.first_face; i < patch.first_face + patch.face_count; ++i)
      visit(static_cast<std::size_t>(i));
  }
}

bool is_prescribed(mesh::PatchKind kind) { return kind == mesh::PatchKind::prescribed; }

Matrix4d block_of(const State<Dual<4>>& f) {
  Matrix4d block;
  for (int row = 0; row < 4; ++row)
    for (int col = 0; col < 4; ++col)
      block(row, col) = f[static_cast<std::size_t>(row)].derivative[static_cast<std::size_t>(col)];
  return block;
}

State<Dual<4>> seeded(const State<double>& q) {
  return {Dual<4>::seeded(q[0], 0), Dual<4>::seeded(q[1], 1), Dual<4>::seeded(q[2], 2),
          Dual<4>::seeded(q[3], 3)};
}

State<Dual<4>> constant(const State<double>& q) {
  return {Dual<4>(q[0]), Dual<4>(q[1]), Dual<4>(q[2]), Dual<4>(q[3])};
}

/// Derivative of positive_step(q, step) with respect to q and step.
std::array<double, 2> positive_step_slopes(double q, double step) {
  const auto out = positive_step(Dual<2>::seeded(q, 0), Dual<2>::seeded(step, 1));
  return out.derivative;
}

Eigen::Map<const Array4d> array(const State<double>& s) {
  return Eigen::Map<const Array4d>(s.data());
}
Eigen::Map<Array4d> array(State<double>& s) { return Eigen::Map<Array4d>(s.data()); }

/// Second-order schemes damp smooth waves less than a compact upwind matrix does. In supersonic
/// flow, where errors run far along the characteristics, half of the upwind part comes nearest;
/// slow flow needs all of it, or the factors of the matrix become unstable.
float upwind_share(double mach) {
  return static_cast<float>(1.0 - 0.5 * std::clamp(2.0 * mach - 1.0, 0.0, 1.0));
}

/// A vector of 4 values a cell, seen as states.
std::span<const State<double>> states(const Vector& x) {
  return {reinterpret_cast<const State<double>*>(x.data()), static_cast<std::size_t>(x.size()) / 4};
}

}  // namespace

Jacobian::Jacobian(const Residual& residual)
    : residual_(residual),
      faces_(static_cast<std::size_t>(residual.mesh().interior_face_count())),
      boundary_(static_cast<std::size_t>(residual.mesh().face_count()) - faces_.size()),
      fluxes_(static_cast<std::size_t>(residual.mesh().face_count())) {}

void Jacobian::linearise(std::span<const State<double>> cells) {
  cells_.assign(cells.begin(), cells.end());
  residual_.gradients(cells, gradients_);
  linearise_interior(cells);
  linearise_boundary(cells);
  linearise_planes();
}

void Jacobian::linearise_interior(std::span<const State<double>> cells) {
  const auto& mesh = residual_.mesh();
#pragma omp parallel for schedule(static)
  for (int i = 0; i < mesh.interior_face_count(); ++i) {
    const auto f = static_cast<std::size_t>(i);
    const auto l = static_cast<std::size_t>(mesh.faces()[f].left);
    const auto r = static_cast<std::size_t>(mesh.faces()[f].right);
    const auto& g = residual_.geometry(f);
    const auto differentiate = [&](std::size_t own, std::size_t other, double sign,
                                   SideDerivative& side) {
      State<double> value;
      for (std::size_t k = 0; k < 4; ++k) {
        using D = Dual<4>;
        const auto row = static_cast<Eigen::Index>(k);
        const D out = Residual::face_value<D>(
            k, D::seeded(cells[own][k], 0), D::seeded(cells[other][k], 1),
            D::seeded(sign * gradients_[own].along(k, g.difference), 2),
            D::seeded(gradients_[own].along(k, g.offset), 3), g.threshold[k]);
        value[k] = out.value;
        side.own(row) = out.derivative[0];
        side.other(row) = out.derivative[1];
        side.along_difference(row) = sign * out.derivative[2];
        side.along_offset(row) = out.derivative[3];
      }
      return value;
    };
    const auto left = differentiate(l, r, 1.0, faces_[f].left);
    const auto right = differentiate(r, l, -1.0, faces_[f].right);
    const auto& n = mesh.faces()[f].normal;
    const auto kind = residual_.options().flux;
    const double gamma = residual_.problem().gamma;
    faces_[f].left.flux = block_of(numerical_flux(kind, seeded(left), constant(right), n, gamma));
    faces_[f].right.flux = block_of(numerical_flux(kind, constant(left), seeded(right), n, gamma));
  }
}

void Jacobian::linearise_boundary(std::span<const State<double>> cells) {
  const auto& mesh = residual_.mesh();
  const auto differentiate = [&](std::size_t f) -> SideDerivative& {
    const auto cell = static_cast<std::size_t>(mesh.faces()[f].left);
    SideDerivative& side = boundary_[f - faces_.size()];
    side = {Matrix4d::Zero(), Array4d::Zero(), Array4d::Zero(), Array4d::Zero(), Array4d::Zero()};
    for (std::size_t k = 0; k < 4; ++k) {
      const bool positive = k == density || k == pressure;
      const double step = gradients_[cell].along(k, residual_.geometry(f).offset);
      const auto slopes =
          positive ? positive_step_slopes(cells[cell][k], step) : std::array<double, 2>{1.0, 1.0};
      side.own(static_cast<Eigen::Index>(k)) = slopes[0];
      side.along_offset(static_cast<Eigen::Index>(k)) = slopes[1];
    }
    return side;
  };
  for_each_face(mesh, mesh::is_wall, [&](std::size_t f) {
    SideDerivative& side = differentiate(f);
    side.flux(1, pressure) = mesh.faces()[f].normal.x();
    side.flux(2, pressure) = mesh.faces()[f].normal.y();
  });
  for_each_face(mesh, is_prescribed, [&](std::size_t f) {
    const auto inside = residual_.boundary_state<double>(f, cells, gradients_);
    differentiate(f).flux =
        block_of(numerical_flux(residual_.options().flux, seeded(inside),
                                constant(residual_.problem().prescribed[f - faces_.size()]),
                                mesh.faces()[f].normal, residual_.problem().gamma));
  });
}

void Jacobian::linearise_planes() {
  planes_.clear();
  residual_.for_each_plane([&](const Plane& plane, bool inflow) {
    std::vector<State<Dual<4>>> beside;
    for (std::size_t i = 0; i < plane.waves.size(); ++i)
      beside.push_back(seeded(cells_[residual_.cell_at(plane, i)]));
    const auto through = residual_.through_plane<Dual<4>>(plane, inflow, beside);
    for (std::size_t i = 0; i < through.size(); ++i)
      planes_.push_back({static_cast<std::size_t>(plane.first_face) + i, block_of(through[i])});
  });
}

void Jacobian::interior_products(std::span<const State<double>> x,
                                 std::span<State<double>> fluxes) const {
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

void Jacobian::boundary_products(std::span<const State<double>> x,
                                 std::span<State<double>> fluxes) const {
  const auto product = [&](std::size_t f) {
    const auto cell = static_cast<std::size_t>(residual_.mesh().faces()[f].left);
    const SideDerivative& side = boundary_[f - faces_.size()];
    const auto& offset = residual_.geometry(f).offset;
    const Array4d along = array(slopes_[cell].x) * offset.x() + array(slopes_[cell].y) * offset.y();
    const Array4d value = side.own * array(x[cell]) + side.along_offset * along;
    array(fluxes[f]) = side.flux * value.matrix();
  };
  for_each_face(residual_.mesh(), mesh::is_wall, product);
  for_each_face(residual_.mesh(), is_prescribed, product);
}

void Jacobian::plane_products(std::span<const State<double>> x,
                              std::span<State<double>> fluxes) const {
  residual_.for_each_plane([&](const Plane& plane, bool inflow) {
    std::vector<State<Dual<1>>> beside(plane.waves.size());
    for (std::size_t i = 0; i < beside.size(); ++i) {
      const std::size_t cell = residual_.cell_at(plane, i);
      for (std::size_t k = 0; k < 4; ++k) {
        beside[i][k] = Dual<1>(cells_[cell][k]);
        beside[i][k].derivative[0] = x[cell][k];
      }
    }
    const auto through = residual_.through_plane<Dual<1>>(plane, inflow, beside);
    for (std::size_t i = 0; i < through.size(); ++i)
      for (std::size_t k = 0; k < 4; ++k)
        fluxes[static_cast<std::size_t>(plane.first_face) + i][k] = through[i][k].derivative[0];
  });
}

void Jacobian::multiply(const Vector& x, Vector& y) const {
  const auto in = states(x);
  residual_.gradients(in, slopes_);
  interior_products(in, fluxes_);
  boundary_products(in, fluxes_);
  plane_products(in, fluxes_);
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
      beside.push_back(constant(cells_[residual_.cell_at(plane, i)]));
    for (std::size_t j = 0; j < beside.size(); ++j) {
      const std::size_t cell = residual_.cell_at(plane, j);
      beside[j] = seeded(cells_[cell]);
      const auto through = residual_.through_plane<Dual<4>>(plane, inflow, beside);
      beside[j] = constant(cells_[cell]);
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
  const auto spread_boundary = [&](std::size_t f) {
    const auto cell = static_cast<std::size_t>(mesh.faces()[f].left);
    spread(boundary_[f - faces_.size()], array(in[cell]), f, cell, cell);
  };
  for_each_face(mesh, mesh::is_wall, spread_boundary);
  for_each_face(mesh, is_prescribed, spread_boundary);
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

BlockMatrix Jacobian::compact_pattern() const {
  const auto& mesh = residual_.mesh();
  std::vector<std::vector<int>> columns(static_cast<std::size_t>(mesh.cell_count()));
  for (int i = 0; i < mesh.cell_count(); ++i) columns[static_cast<std::size_t>(i)].push_back(i);
  for (const auto& face : mesh.faces()) {
    if (face.right < 0) continue;
    columns[static_cast<std::size_t>(face.left)].push_back(face.right);
    columns[static_cast<std::size_t>(face.right)].push_back(face.left);
  }
  for (auto& list : columns) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
  }
  return BlockMatrix(columns);
}

double Jacobian::mach_of(int cell) const {
  const State<double>& q = cells_[static_cast<std::size_t>(cell)];
  return std::hypot(q[velocity_x], q[velocity_y]) / speed_of_sound(q, residual_.problem().gamma);
}

void Jacobian::assemble_compact(BlockMatrix& out) const {
  const auto& mesh = residual_.mesh();
  out.set_zero();
#pragma omp parallel for schedule(static)
  for (int row = 0; row < mesh.cell_count(); ++row)
    for (const auto& cf : residual_.faces_of(static_cast<std::size_t>(row))) {
      const auto f = static_cast<std::size_t>(cf.face);
      if (cf.face >= mesh.interior_face_count()) continue;
      const auto& face = mesh.faces()[f];
      const float upwind = upwind_share(std::min(mach_of(face.left), mach_of(face.right)));
      const Block left = static_cast<float>(cf.sign) * faces_[f].left.flux.cast<float>();
      const Block right = static_cast<float>(cf.sign) * faces_[f].right.flux.cast<float>();
      const Block exchange = 0.5f * (1.0f - upwind) * (right - left);
      out.block(out.place(row, face.left)) += left + exchange;
      out.block(out.place(row, face.right)) += right - exchange;
    }
  const auto on_diagonal = [&](std::size_t f, const Matrix4d& block) {
    out.block(out.diagonal(mesh.faces()[f].left)) += block.cast<float>();
  };
  const auto add_boundary = [&](std::size_t f) {
    on_diagonal(f, boundary_[f - faces_.size()].flux);
  };
  for_each_face(mesh, mesh::is_wall, add_boundary);
  for_each_face(mesh, is_prescribed, add_boundary);
  for (const PlaneCell& cell : planes_) on_diagonal(cell.face, cell.block);
}

}  // namespace falcate::solver
