#include "solver/flux_derivative.h"

namespace falcate::solver {
namespace {

bool is_positive(std::size_t variable) { return variable == density || variable == pressure; }

/// Derivatives of positive_step(q, step) with respect to q and step.
std::array<double, 2> positive_step_slopes(double q, double step) {
  return positive_step(Dual<2>::seeded(q, 0), Dual<2>::seeded(step, 1)).derivative;
}

/// Chain rule through Residual::face_value of variable k; returns the value.
double differentiate(std::size_t k, double own, double other, double along_difference,
                     double along_offset, double threshold, SideDerivative& side) {
  const double d1 = other - own, d2 = 2.0 * along_difference - d1;
  const Dual<2> f = limited_difference(Dual<2>::seeded(d1, 0), Dual<2>::seeded(d2, 1), threshold);
  const double step = 0.5 * f.value + along_offset;
  const auto [by_own, by_step] =
      is_positive(k) ? positive_step_slopes(own, step) : std::array<double, 2>{1.0, 1.0};
  const double towards = 0.5 * by_step * (f.derivative[0] - f.derivative[1]);
  const auto row = static_cast<Eigen::Index>(k);
  side.own(row) = by_own - towards;
  side.other(row) = towards;
  side.along_difference(row) = by_step * f.derivative[1];
  side.along_offset(row) = by_step;
  return is_positive(k) ? positive_step(own, step) : own + step;
}

}  // namespace

FaceDerivative interior_derivative(const Residual& residual, CellStates cells,
                                   const CellGradients& gradients, std::size_t f) {
  const auto& face = residual.mesh().faces()[f];
  const auto l = static_cast<std::size_t>(face.left), r = static_cast<std::size_t>(face.right);
  const auto& g = residual.geometry(f);
  FaceDerivative out;
  State<double> left, right;
  for (std::size_t k = 0; k < 4; ++k) {
    left[k] = differentiate(k, cells[l][k], cells[r][k], gradients[l].along(k, g.difference),
                            gradients[l].along(k, g.offset), g.threshold[k], out.left);
    right[k] = differentiate(k, cells[r][k], cells[l][k], -gradients[r].along(k, g.difference),
                             gradients[r].along(k, g.offset), g.threshold[k], out.right);
  }
  out.right.along_difference *= -1.0;
  const auto flux = numerical_flux(residual.options().flux, seeded<8>(left, 0), seeded<8>(right, 4),
                                   face.normal, residual.problem().gamma);
  out.left.flux = block_of(flux, 0);
  out.right.flux = block_of(flux, 4);
  return out;
}

SideDerivative boundary_derivative(const Residual& residual, CellStates cells,
                                   const CellGradients& gradients, std::size_t f,
                                   mesh::PatchKind kind) {
  const auto& face = residual.mesh().faces()[f];
  const auto cell = static_cast<std::size_t>(face.left);
  SideDerivative side{Eigen::Matrix4d::Zero(), Eigen::Array4d::Ones(), Eigen::Array4d::Zero(),
                      Eigen::Array4d::Zero(), Eigen::Array4d::Ones()};
  for (const std::size_t k : {std::size_t{density}, std::size_t{pressure}}) {
    const auto slopes =
        positive_step_slopes(cells[cell][k], gradients[cell].along(k, residual.geometry(f).offset));
    side.own(static_cast<Eigen::Index>(k)) = slopes[0];
    side.along_offset(static_cast<Eigen::Index>(k)) = slopes[1];
  }
  if (mesh::is_wall(kind)) {
    side.flux(1, pressure) = face.normal.x();
    side.flux(2, pressure) = face.normal.y();
    return side;
  }
  const auto first = static_cast<std::size_t>(residual.mesh().interior_face_count());
  const auto inside = residual.boundary_state<double>(f, cells, gradients);
  side.flux = block_of(numerical_flux(residual.options().flux, seeded<4>(inside),
                                      constant<4>(residual.problem().prescribed[f - first]),
                                      face.normal, residual.problem().gamma));
  return side;
}

std::vector<PlaneResponse> plane_responses(const Residual& residual, CellStates cells) {
  std::vector<PlaneResponse> out;
  residual.for_each_plane([&](const Plane& plane, bool inflow) {
    std::vector<State<Dual<4>>> beside;
    for (std::size_t i = 0; i < plane.waves.size(); ++i)
      beside.push_back(seeded<4>(cells[residual.cell_at(plane, i)]));
    const auto through = residual.through_plane<Dual<4>>(plane, inflow, beside);
    for (std::size_t i = 0; i < through.size(); ++i)
      out.push_back({static_cast<std::size_t>(plane.first_face) + i, block_of(through[i])});
  });
  return out;
}

}  // namespace falcate::solver
