#include "solver/jacobian.h"

#include <algorithm>
#include <set>

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

void couple_planes(const Residual& residual, std::vector<std::set<int>>& columns) {
  const auto couple = [&](const std::vector<Plane>& planes) {
    for (const Plane& plane : planes)
      for (std::size_t i = 0; i < plane.waves.size(); ++i)
        for (std::size_t j = 0; j < plane.waves.size(); ++j) {
          const auto& faces = residual.mesh().faces();
          const auto first = static_cast<std::size_t>(plane.first_face);
          columns[static_cast<std::size_t>(faces[first + i].left)].insert(faces[first + j].left);
        }
  };
  couple(residual.problem().inlet_planes);
  couple(residual.problem().outlet_planes);
}

/// Cells whose states each cell's residual depends on.
std::vector<std::vector<int>> pattern_of(const Residual& residual) {
  std::vector<std::set<int>> columns(static_cast<std::size_t>(residual.mesh().cell_count()));
  const auto add_side = [&](int row, int side) {
    auto& set = columns[static_cast<std::size_t>(row)];
    set.insert(side);
    for (const auto& neighbour : residual.stencil().of(side)) set.insert(neighbour.cell);
  };
  for (const auto& face : residual.mesh().faces()) {
    add_side(face.left, face.left);
    if (face.right < 0) continue;
    add_side(face.left, face.right);
    add_side(face.right, face.left);
    add_side(face.right, face.right);
  }
  couple_planes(residual, columns);
  std::vector<std::vector<int>> pattern;
  for (const auto& set : columns) pattern.emplace_back(set.begin(), set.end());
  return pattern;
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
      faces_(static_cast<std::size_t>(residual.mesh().interior_face_count())) {}

void Jacobian::assemble(std::span<const State<double>> cells, double second_order_part) {
  matrix_.set_zero();
  part_ = second_order_part;
  gradients_ = residual_.gradients(cells);
  interior(cells);
  gather_interior();
  walls(cells, gradients_);
  prescribed(cells, gradients_);
  planes(cells);
}

void Jacobian::interior(std::span<const State<double>> cells) {
  const auto& mesh = residual_.mesh();
#pragma omp parallel for schedule(static)
  for (int i = 0; i < mesh.interior_face_count(); ++i) {
    const auto f = static_cast<std::size_t>(i);
    const auto l = static_cast<std::size_t>(mesh.faces()[f].left);
    const auto r = static_cast<std::size_t>(mesh.faces()[f].right);
    const auto& g = residual_.geometry(f);
    State<double> value[2];
    SideDerivative* side[2] = {&faces_[f].left, &faces_[f].right};
    for (std::size_t s = 0; s < 2; ++s) {
      const std::size_t own = s == 0 ? l : r, other = s == 0 ? r : l;
      const double sign = s == 0 ? 1.0 : -1.0;
      for (std::size_t k = 0; k < 4; ++k) {
        using D = Dual<4>;
        const D out = Residual::face_value<D>(
            k, D::seeded(cells[own][k], 0), D::seeded(cells[other][k], 1),
            D::seeded(sign * gradients_[own].along(k, g.difference), 2),
            D::seeded(gradients_[own].along(k, g.offset), 3), g.threshold[k]);
        value[s][k] = out.value;
        side[s]->own[k] = part_ * out.derivative[0] + 1.0 - part_;
        side[s]->other[k] = part_ * out.derivative[1];
        side[s]->along_difference[k] = part_ * sign * out.derivative[2];
        side[s]->along_offset[k] = part_ * out.derivative[3];
      }
    }
    const auto& n = mesh.faces()[f].normal;
    const auto kind = residual_.options().flux;
    const double gamma = residual_.problem().gamma;
    side[0]->flux = block_of(numerical_flux(kind, seeded(value[0]), constant(value[1]), n, gamma));
    side[1]->flux = block_of(numerical_flux(kind, constant(value[0]), seeded(value[1]), n, gamma));
  }
}

void Jacobian::gather_interior() {
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
        Block& diagonal = matrix_.block(matrix_.place(row, own));
        diagonal += scaled_columns(flux, side.own);
        matrix_.block(matrix_.place(row, other)) += scaled_columns(flux, side.other);
        for (const auto& neighbour : residual_.stencil().of(own)) {
          const double wd = neighbour.weight.dot(g.difference), we = neighbour.weight.dot(g.offset);
          State<double> factor;
          for (std::size_t k = 0; k < 4; ++k)
            factor[k] = side.along_difference[k] * wd + side.along_offset[k] * we;
          const Block part = scaled_columns(flux, factor);
          matrix_.block(matrix_.place(row, neighbour.cell)) += part;
          diagonal -= part;
        }
      };
      spread(faces_[f].left, face.left, face.right);
      spread(faces_[f].right, face.right, face.left);
    }
  }
}

void Jacobian::walls(std::span<const State<double>> cells,
                     const std::vector<Gradient<double>>& gradients) {
  for_each_face(residual_.mesh(), mesh::is_wall, [&](std::size_t f) {
    const auto& face = residual_.mesh().faces()[f];
    const auto cell = static_cast<std::size_t>(face.left);
    const Point& offset = residual_.geometry(f).offset;
    const auto slopes =
        positive_step_slopes(cells[cell][pressure], gradients[cell].along(pressure, offset));
    const auto add = [&](int column, double slope) {
      Block& block = matrix_.block(matrix_.place(face.left, column));
      block(1, pressure) += slope * face.normal.x();
      block(2, pressure) += slope * face.normal.y();
    };
    add(face.left, slopes[0]);
    for (const auto& neighbour : residual_.stencil().of(face.left)) {
      const double slope = part_ * slopes[1] * neighbour.weight.dot(offset);
      add(neighbour.cell, slope);
      add(face.left, -slope);
    }
  });
}

void Jacobian::prescribed(std::span<const State<double>> cells,
                          const std::vector<Gradient<double>>& gradients) {
  for_each_face(residual_.mesh(), is_prescribed, [&](std::size_t f) {
    const auto& face = residual_.mesh().faces()[f];
    const auto cell = static_cast<std::size_t>(face.left);
    const Point& offset = residual_.geometry(f).offset;
    const auto inside = residual_.boundary_state<double>(f, cells, gradients);
    const auto boundary = f - static_cast<std::size_t>(residual_.mesh().interior_face_count());
    const Block flux = block_of(numerical_flux(residual_.options().flux, seeded(inside),
                                               constant(residual_.problem().prescribed[boundary]),
                                               face.normal, residual_.problem().gamma));
    State<double> own, step;
    for (std::size_t k = 0; k < 4; ++k) {
      const bool positive = k == density || k == pressure;
      const auto slopes =
          positive ? positive_step_slopes(cells[cell][k], gradients[cell].along(k, offset))
                   : std::array<double, 2>{1.0, 1.0};
      own[k] = slopes[0];
      step[k] = slopes[1];
    }
    Block& diagonal = matrix_.block(matrix_.place(face.left, face.left));
    diagonal += scaled_columns(flux, own);
    for (const auto& neighbour : residual_.stencil().of(face.left)) {
      const Block part = scaled_columns(flux, step) * neighbour.weight.dot(offset);
      matrix_.block(matrix_.place(face.left, neighbour.cell)) += part;
      diagonal -= part;
    }
  });
}

void Jacobian::planes(std::span<const State<double>> cells) {
  const auto& mesh = residual_.mesh();
  const auto& problem = residual_.problem();
  const auto differentiate = [&](const Plane& plane, const auto& states_of) {
    const auto inside = adjoining(mesh, plane, cells);
    std::vector<State<Dual<4>>> in, out(inside.size());
    for (const auto& q : inside) in.push_back(constant(q));
    for (std::size_t j = 0; j < inside.size(); ++j) {
      in[j] = seeded(inside[j]);
      states_of(std::span<const State<Dual<4>>>(in), plane.waves, std::span<State<Dual<4>>>(out));
      in[j] = constant(inside[j]);
      const auto first = static_cast<std::size_t>(plane.first_face);
      for (std::size_t i = 0; i < inside.size(); ++i) {
        const auto& face = mesh.faces()[first + i];
        matrix_.block(matrix_.place(face.left, mesh.faces()[first + j].left)) +=
            block_of(physical_flux(out[i], face.normal, problem.gamma));
      }
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
