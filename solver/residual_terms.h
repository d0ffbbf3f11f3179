/// The terms of the residual (bodies of the templates in residual.h).
#pragma once
#include "solver/residual.h"

namespace falcate::solver {

template <class T>
std::vector<Gradient<T>> Residual::gradients(std::span<const State<T>> cells) const {
  std::vector<Gradient<T>> out(cells.size());
#pragma omp parallel for schedule(static)
  for (int i = 0; i < mesh().cell_count(); ++i) {
    const auto ui = static_cast<std::size_t>(i);
    Gradient<T> g{};
    for (const auto& neighbour : stencil_.of(i)) {
      const State<T>& q = cells[static_cast<std::size_t>(neighbour.cell)];
      for (std::size_t k = 0; k < 4; ++k) {
        const T d = q[k] - cells[ui][k];
        g.x[k] += d * neighbour.weight.x();
        g.y[k] += d * neighbour.weight.y();
      }
    }
    out[ui] = g;
  }
  return out;
}

template <class T>
void Residual::interior_fluxes(std::span<const State<T>> cells,
                               const std::vector<Gradient<T>>& gradients,
                               std::span<State<T>> fluxes) const {
  const auto& faces = mesh().faces();
#pragma omp parallel for schedule(static)
  for (int i = 0; i < mesh().interior_face_count(); ++i) {
    const auto f = static_cast<std::size_t>(i);
    const auto l = static_cast<std::size_t>(faces[f].left);
    const auto r = static_cast<std::size_t>(faces[f].right);
    const FaceGeometry& g = geometry_[f];
    State<T> left, right;
    for (std::size_t k = 0; k < 4; ++k) {
      left[k] = face_value<T>(k, cells[l][k], cells[r][k], gradients[l].along(k, g.difference),
                              gradients[l].along(k, g.offset), g.threshold[k]);
      right[k] = face_value<T>(k, cells[r][k], cells[l][k], -gradients[r].along(k, g.difference),
                               gradients[r].along(k, g.offset), g.threshold[k]);
    }
    fluxes[f] = numerical_flux(options_.flux, left, right, faces[f].normal, problem_->gamma);
  }
}

template <class T>
State<T> Residual::boundary_state(std::size_t face, std::span<const State<T>> cells,
                                  const std::vector<Gradient<T>>& gradients) const {
  const auto cell = static_cast<std::size_t>(mesh().faces()[face].left);
  State<T> q = cells[cell];
  for (std::size_t k = 0; k < 4; ++k) {
    const T step = gradients[cell].along(k, geometry_[face].offset);
    q[k] = k == density || k == pressure ? positive_step(q[k], step) : q[k] + step;
  }
  return q;
}

/// Slip wall: only pressure acts, taken at the face's point on the true curve.
template <class T>
void Residual::wall_fluxes(std::span<const State<T>> cells,
                           const std::vector<Gradient<T>>& gradients,
                           std::span<State<T>> fluxes) const {
  for (const auto& patch : mesh().patches()) {
    if (!mesh::is_wall(patch.kind)) continue;
    for (int i = patch.first_face; i < patch.first_face + patch.face_count; ++i) {
      const auto f = static_cast<std::size_t>(i);
      const auto cell = static_cast<std::size_t>(mesh().faces()[f].left);
      const T p = positive_step(cells[cell][pressure],
                                gradients[cell].along(pressure, geometry_[f].offset));
      const mesh::Point& n = mesh().faces()[f].normal;
      fluxes[f] = {T(0.0), p * n.x(), p * n.y(), T(0.0)};
    }
  }
}

template <class T>
void Residual::prescribed_fluxes(std::span<const State<T>> cells,
                                 const std::vector<Gradient<T>>& gradients,
                                 std::span<State<T>> fluxes) const {
  for (const auto& patch : mesh().patches()) {
    if (patch.kind != mesh::PatchKind::prescribed) continue;
    for (int i = patch.first_face; i < patch.first_face + patch.face_count; ++i) {
      const auto f = static_cast<std::size_t>(i);
      const auto& given =
          problem_->prescribed[f - static_cast<std::size_t>(mesh().interior_face_count())];
      const State<T> outside = {T(given[0]), T(given[1]), T(given[2]), T(given[3])};
      fluxes[f] = numerical_flux(options_.flux, boundary_state(f, cells, gradients), outside,
                                 mesh().faces()[f].normal, problem_->gamma);
    }
  }
}

/// States of the cells along a plane, in the order of its faces.
template <class T>
std::vector<State<T>> adjoining(const mesh::PassageMesh& mesh, const Plane& plane,
                                std::span<const State<T>> cells) {
  std::vector<State<T>> out;
  for (std::size_t i = 0; i < plane.waves.size(); ++i) {
    const auto f = static_cast<std::size_t>(plane.first_face) + i;
    out.push_back(cells[static_cast<std::size_t>(mesh.faces()[f].left)]);
  }
  return out;
}

template <class T>
void Residual::plane_fluxes(std::span<const State<T>> cells, std::span<State<T>> fluxes) const {
  const auto through = [&](const Plane& plane, const auto& states_of) {
    const auto inside = adjoining(mesh(), plane, cells);
    std::vector<State<T>> states(inside.size());
    states_of(std::span<const State<T>>(inside), plane.waves, std::span<State<T>>(states));
    for (std::size_t i = 0; i < states.size(); ++i) {
      const auto f = static_cast<std::size_t>(plane.first_face) + i;
      fluxes[f] = physical_flux(states[i], mesh().faces()[f].normal, problem_->gamma);
    }
  };
  for (const Plane& plane : problem_->inlet_planes)
    through(plane, [&](auto in, const auto& waves, auto out) {
      inlet_states<T>(in, problem_->inlet, waves, out);
    });
  for (const Plane& plane : problem_->outlet_planes)
    through(plane, [&](auto in, const auto& waves, auto out) {
      outlet_states<T>(in, problem_->outlet, waves, out);
    });
}

template <class T>
void Residual::evaluate(std::span<const State<T>> cells, std::vector<State<T>>& fluxes,
                        std::span<State<T>> residual) const {
  fluxes.resize(static_cast<std::size_t>(mesh().face_count()));
  const auto slopes = gradients(cells);
  interior_fluxes<T>(cells, slopes, fluxes);
  wall_fluxes<T>(cells, slopes, fluxes);
  prescribed_fluxes<T>(cells, slopes, fluxes);
  plane_fluxes<T>(cells, fluxes);
#pragma omp parallel for schedule(static)
  for (int i = 0; i < mesh().cell_count(); ++i) {
    const auto ui = static_cast<std::size_t>(i);
    State<T> sum{};
    for (const CellFace& cf : faces_of(ui))
      for (std::size_t k = 0; k < 4; ++k)
        sum[k] += cf.sign * fluxes[static_cast<std::size_t>(cf.face)][k];
    residual[ui] = sum;
  }
}

}  // namespace falcate::solver
