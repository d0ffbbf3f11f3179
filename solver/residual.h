/// Second-order finite-volume residual of the steady Euler equations on one passage:
///   R_i = sum over the faces of cell i of F.n, out of the cell positive.
/// Written once on the number type T: with double it gives values, with dual numbers derivatives.
/// Solver units (see scaled_problem.h).
#pragma once
#include <span>
#include <vector>

#include "solver/flux.h"
#include "solver/gradient.h"
#include "solver/reconstruction.h"
#include "solver/scaled_problem.h"

namespace falcate::solver {

struct SchemeOptions {
  FluxKind flux = FluxKind::slau2;
  double limiter_constant = 5.0;  ///< K of the limiter's threshold; larger: less limiting
};

/// d/dx and d/dy of the primitive variables.
template <class T>
struct Gradient {
  State<T> x, y;
  T along(std::size_t k, const mesh::Point& d) const { return x[k] * d.x() + y[k] * d.y(); }
};

class Residual {
 public:
  Residual(const ScaledProblem& problem, const SchemeOptions& options);

  /// Fluxes through all faces (out of the left cell), then R; sizes: cells, faces, cells.
  template <class T>
  void evaluate(std::span<const State<T>> cells, std::vector<State<T>>& fluxes,
                std::span<State<T>> residual) const;

  /// One named term each.
  template <class T>
  void gradients(std::span<const State<T>> cells, std::vector<Gradient<T>>& out) const;
  template <class T>
  void interior_fluxes(std::span<const State<T>> cells, const std::vector<Gradient<T>>& gradients,
                       std::span<State<T>> fluxes) const;
  template <class T>
  void wall_fluxes(std::span<const State<T>> cells, const std::vector<Gradient<T>>& gradients,
                   std::span<State<T>> fluxes) const;
  template <class T>
  void prescribed_fluxes(std::span<const State<T>> cells, const std::vector<Gradient<T>>& gradients,
                         std::span<State<T>> fluxes) const;
  template <class T>
  void plane_fluxes(std::span<const State<T>> cells, std::span<State<T>> fluxes) const;

  /// Calls visit(plane, inflow) for each in- and outflow plane.
  template <class Visit>
  void for_each_plane(const Visit& visit) const {
    for (const Plane& plane : problem_->inlet_planes) visit(plane, true);
    for (const Plane& plane : problem_->outlet_planes) visit(plane, false);
  }
  /// Cell beside face i of a plane.
  std::size_t cell_at(const Plane& plane, std::size_t i) const {
    const auto face = static_cast<std::size_t>(plane.first_face) + i;
    return static_cast<std::size_t>(mesh().faces()[face].left);
  }
  /// Fluxes through the faces of a plane, from the states of the cells beside them.
  template <class T>
  std::vector<State<T>> through_plane(const Plane& plane, bool inflow,
                                      std::span<const State<T>> beside) const;

  /// State just inside a boundary face.
  template <class T>
  State<T> boundary_state(std::size_t face, std::span<const State<T>> cells,
                          const std::vector<Gradient<T>>& gradients) const;

  /// How one side of an interior face sees it: difference to the other cell, and from the middle of
  /// the two centroids to the face. The right side has -difference.
  struct FaceGeometry {
    mesh::Point difference, offset;
    State<double> threshold;  ///< e of the limiter, one a variable
  };
  /// Face value of variable k from a side: own and other cell value, gradient along the difference
  /// (towards the other cell) and along the offset.
  template <class T>
  static T face_value(std::size_t k, const T& own, const T& other, const T& along_difference,
                      const T& along_offset, double threshold) {
    const T d1 = other - own, d2 = 2.0 * along_difference - d1;
    const T step = 0.5 * limited_difference(d1, d2, threshold) + along_offset;
    return k == density || k == pressure ? positive_step(own, step) : own + step;
  }

  const ScaledProblem& problem() const { return *problem_; }
  const mesh::PassageMesh& mesh() const { return *problem_->mesh; }
  const SchemeOptions& options() const { return options_; }
  const GradientStencil& stencil() const { return stencil_; }
  const FaceGeometry& geometry(std::size_t face) const { return geometry_[face]; }

  /// Faces of a cell; sign +1 where the cell is the left one.
  struct CellFace {
    int face;
    double sign;
  };
  std::span<const CellFace> faces_of(std::size_t cell) const {
    return {cell_faces_.data() + start_[cell], start_[cell + 1] - start_[cell]};
  }

  /// Sum over the faces of (|w.n| + a |n|)/2: the cell's wave speed times length, for local time
  /// steps.
  std::vector<double> spectral_sums(std::span<const State<double>> cells) const;

 private:
  const ScaledProblem* problem_;
  SchemeOptions options_;
  GradientStencil stencil_;
  std::vector<FaceGeometry> geometry_;
  std::vector<std::size_t> start_;
  std::vector<CellFace> cell_faces_;
};

}  // namespace falcate::solver

#include "solver/residual_terms.h"
