#include "solver/jacobian.h"

#include <algorithm>

namespace falcate::solver {
namespace {

using mesh::Point;

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

void couple_planes(const Residual& residual, std::vector<std::vector<int>>& columns) {
  const auto couple = [&](const std::vector<Plane>& planes) {
    for (const Plane& plane : planes)
      for (std::size_t i = 0; i < plane.waves.size(); ++i)
        for (std::size_t j = 0; j < plane.waves.size(); ++j) {
          const auto& faces = residual.mesh().faces();
          const auto first = static_cast<std::size_t>(plane.first_face);
          columns[static_cast<std::size_t>(faces[first + i].left)].push_back(faces[first + j].left);
        }
  };
  couple(residual.problem().inlet_planes);
  couple(residual.problem().outlet_planes);
}

/// Cells whose states each cell's residual depends on.
std::vector<std::vector<int>> pattern_of(const Residual& residual) {
  const auto& mesh = residual.mesh();
  std::vector<std::vector<int>> columns(static_cast<std::size_t>(mesh.cell_count()));
  const auto add_side = [&](int row, int side) {
    auto& list = columns[static_cast<std::size_t>(row)];
    list.push_back(side);
    for (const auto& neighbour : residual.stencil().of(side)) list.push_back(neighbour.cell);
  };
  for (const auto& face : mesh.faces()) {
    add_side(face.left, face.left);
    if (face.right < 0) continue;
    add_side(face.left, face.right);
    add_side(face.right, face.left);
    add_side(face.right, face.right);
  }
  couple_planes(residual, columns);
  for (auto& list : columns) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
  }
  return columns;
}

Block block_of(const State<Dual<4>>& f) {
  Block block;
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

Block scaled_columns(const Block& block, const State<double>& factor) {
  Block out;
  for (int col = 0; col < 4; ++col)
    out.col(col) = block.col(col) * factor[static_cast<std::size_t>(col)];
  return out;
}

/// Derivative of positive_step(q, step) with respect to q and step.
std::array<double, 2> positive_step_slopes(double q, double step) {
  const auto out = positive_step(Dual<2>::seeded(q, 0), Dual<2>::seeded(step, 1));
  return out.derivative;
}

}  // namespace

Jacobian::Jacobian(const Residual& residual)
    : residual_(residual),
      matrix_(pattern_of(residual)),
      faces_(static_cast<std::size_t>(residual.mesh().interior_face_count())),
      boundary_(static_cast<std::size_t>(residual.mesh().face_count()) - faces_.size()) {}

void Jacobian::assemble(std::span<const State<double>> cells) {
  gradients_ = residual_.gradients(cells);
  linearise_interior(cells);
  linearise_boundary(cells);
  linearise_planes(cells);
  assemble_blend(1.0, matrix_);
}

void Jacobian::assemble_blend(double second_order_part, BlockMatrix& out) const {
  out.set_zero();
  gather_interior(second_order_part, out);
  gather_boundary(second_order_part, out);
  for (const PlaneBlock& p : planes_) out.block(out.place(p.row, p.column)) += p.block;
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
        const D out = Residual::face_value<D>(
            k, D::seeded(cells[own][k], 0), D::seeded(cells[other][k], 1),
            D::seeded(sign * gradients_[own].along(k, g.difference), 2),
            D::seeded(gradients_[own].along(k, g.offset), 3), g.threshold[k]);
        value[k] = out.value;
        side.own[k] = out.derivative[0];
        side.other[k] = out.derivative[1];
        side.along_difference[k] = sign * out.derivative[2];
        side.along_offset[k] = out.derivative[3];
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
    side.flux.setZero();
    for (std::size_t k = 0; k < 4; ++k) {
      const bool positive = k == density || k == pressure;
      const double step = gradients_[cell].along(k, residual_.geometry(f).offset);
      const auto slopes =
          positive ? positive_step_slopes(cells[cell][k], step) : std::array<double, 2>{1.0, 1.0};
      side.own[k] = slopes[0];
      side.along_offset[k] = slopes[1];
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

void Jacobian::gather_interior(double part, BlockMatrix& out) const {
  const auto& mesh = residual_.mesh();
#pragma omp parallel for schedule(static)
  for (int row = 0; row < mesh.cell_count(); ++row) {
    for (const auto& cf : residual_.faces_of(static_cast<std::size_t>(row))) {
      if (cf.face >= mesh.interior_face_count()) continue;
      const auto f = static_cast<std::size_t>(cf.face);
      const auto& face = mesh.faces()[f];
      const auto& g = residual_.geometry(f);
      const auto spread = [&](const SideDerivative& side, int own, int other) {
        const Block flux = cf.sign * side.flux;
        State<double> direct, across;
        for (std::size_t k = 0; k < 4; ++k) {
          direct[k] = part * side.own[k] + 1.0 - part;
          across[k] = part * side.other[k];
        }
        Block own_block = scaled_columns(flux, direct);
        out.block(out.place(row, other)) += scaled_columns(flux, across);
        for (const auto& neighbour : residual_.stencil().of(own)) {
          const double wd = part * neighbour.weight.dot(g.difference);
          const double we = part * neighbour.weight.dot(g.offset);
          State<double> factor;
          for (std::size_t k = 0; k < 4; ++k)
            factor[k] = side.along_difference[k] * wd + side.along_offset[k] * we;
          const Block block = scaled_columns(flux, factor);
          out.block(out.place(row, neighbour.cell)) += block;
          own_block -= block;
        }
        out.block(out.place(row, own)) += own_block;
      };
      spread(faces_[f].left, face.left, face.right);
      spread(faces_[f].right, face.right, face.left);
    }
  }
}

void Jacobian::gather_boundary(double part, BlockMatrix& out) const {
  const auto gather = [&](std::size_t f) {
    const int row = residual_.mesh().faces()[f].left;
    const SideDerivative& side = boundary_[f - faces_.size()];
    Block diagonal = scaled_columns(side.flux, side.own);
    for (const auto& neighbour : residual_.stencil().of(row)) {
      const Block block = scaled_columns(side.flux, side.along_offset) *
                          (part * neighbour.weight.dot(residual_.geometry(f).offset));
      out.block(out.place(row, neighbour.cell)) += block;
      diagonal -= block;
    }
    out.block(out.diagonal(row)) += diagonal;
  };
  for_each_face(residual_.mesh(), mesh::is_wall, gather);
  for_each_face(residual_.mesh(), is_prescribed, gather);
}

void Jacobian::linearise_planes(std::span<const State<double>> cells) {
  const auto& mesh = residual_.mesh();
  const auto& problem = residual_.problem();
  planes_.clear();
  const auto differentiate = [&](const Plane& plane, const auto& states_of) {
    const auto inside = adjoining(mesh, plane, cells);
    std::vector<State<Dual<4>>> in, out(inside.size());
    for (const auto& q : inside) in.push_back(constant(q));
    const auto first = static_cast<std::size_t>(plane.first_face);
    for (std::size_t j = 0; j < inside.size(); ++j) {
      in[j] = seeded(inside[j]);
      states_of(std::span<const State<Dual<4>>>(in), plane.waves, std::span<State<Dual<4>>>(out));
      in[j] = constant(inside[j]);
      for (std::size_t i = 0; i < inside.size(); ++i)
        planes_.push_back(
            {mesh.faces()[first + i].left, mesh.faces()[first + j].left,
             block_of(physical_flux(out[i], mesh.faces()[first + i].normal, problem.gamma))});
    }
  };
  for (const Plane& plane : problem.inlet_planes)
    differentiate(plane, [&](auto in, const auto& waves, auto out) {
      inlet_states<Dual<4>>(in, problem.inlet, waves, out);
    });
  for (const Plane& plane : problem.outlet_planes)
    differentiate(plane, [&](auto in, const auto& waves, auto out) {
      outlet_states<Dual<4>>(in, problem.outlet, waves, out);
    });
}

}  // namespace falcate::solver
