/// The terms of the residual (bodies of the templates in residual.h).
#pragma once
#include <algorithm>

#include "solver/residual.h"

namespace falcate::solver {

template <class T>
void Residual::gradients(std::span<const State<T>> cells, std::vector<Gradient<T>>& out) const {
  out.resize(cells.size());
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

template <class T>
std::vector<State<T>> Residual::through_plane(const Plane& plane, bool inflow,
                                              std::span<const State<T>> beside) const {
  std::vector<State<T>> states(beside.size());
  if (inflow)
    inlet_states<T>(beside, problem_->inlet, plane.waves, states);
  else
    outlet_states<T>(beside, problem_->outlet, plane.waves, states);
  for (std::size_t i = 0; i < states.size(); ++i) {
    const auto& face = mesh().faces()[static_cast<std::size_t>(plane.first_face) + i];
    states[i] = physical_flux(states[i], face.normal, problem_->gamma);
  }
  return states;
}

template <class T>
void Residual::plane_fluxes(std::span<const State<T>> cells, std::span<State<T>> fluxes) const {
  for_each_plane([&](const Plane& plane, bool inflow) {
    std::vector<State<T>> beside;
    for (std::size_t i = 0; i < plane.waves.size(); ++i) beside.push_back(cells[cell_at(plane, i)]);
    const auto through = through_plane<T>(plane, inflow, beside);
    std::copy(through.begin(), through.end(), fluxes.begin() + plane.first_face);
  });
}

template <class T>
void Residual::evaluate(std::span<const State<T>> cells, std::vector<State<T>>& fluxes,
                        std::span<State<T>> residual) const {
  fluxes.resize(static_cast<std::size_t>(mesh().face_count()));
  std::vector<Gradient<T>> slopes;
  gradients(cells, slopes);
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
