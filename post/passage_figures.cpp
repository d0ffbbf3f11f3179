#include "post/passage_figures.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <limits>
#include <numbers>

#include "post/mixed_out.h"
#include "post/power_balance.h"

namespace falcate::post {
namespace {

using mesh::PatchKind;
using solver::BoundaryFlux;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

/// Calls visit(face, flux) for every boundary face of a kind.
template <class Visit>
void for_each_face(const solver::FlowProblem& problem, const solver::FlowSolution& solution,
                   PatchKind kind, const Visit& visit) {
  const mesh::PassageMesh& passage = *problem.mesh;
  for (const auto& patch : passage.patches()) {
    if (patch.kind != kind) continue;
    for (int i = patch.first_face; i < patch.first_face + patch.face_count; ++i)
      visit(passage.faces()[at(i)], solution.boundary[at(i - passage.interior_face_count())]);
  }
}

/// Sum over all faces of a kind, positive out of the domain.
BoundaryFlux sum(const solver::FlowProblem& problem, const solver::FlowSolution& solution,
                 PatchKind kind) {
  BoundaryFlux total;
  for_each_face(problem, solution, kind, [&](const auto&, const BoundaryFlux& flux) {
    total.mass += flux.mass;
    total.momentum_x += flux.momentum_x;
    total.momentum_y += flux.momentum_y;
    total.energy += flux.energy;
  });
  return total;
}

BoundaryFlux reversed(const BoundaryFlux& flux) {
  return {-flux.mass, -flux.momentum_x, -flux.momentum_y, -flux.energy};
}

/// Whether the flow passes a plane faster than sound in the axial direction, by its cells.
solver::Branch axial_branch(const solver::FlowProblem& problem,
                            const solver::FlowSolution& solution, PatchKind kind) {
  double excess = 0.0;
  for_each_face(problem, solution, kind, [&](const auto& face, const BoundaryFlux&) {
    const solver::Primitive& cell = solution.cells[at(face.left)];
    const double sound = std::sqrt(problem.gas.heat_capacity_ratio * cell.pressure / cell.density);
    excess += (cell.u - sound) * face.normal.norm();
  });
  return excess > 0.0 ? solver::Branch::supersonic : solver::Branch::subsonic;
}

void set_forces(PassageFigures& figures, const solver::FlowProblem& problem,
                const solver::FlowSolution& solution) {
  const BoundaryFlux suction = sum(problem, solution, PatchKind::suction_wall);
  const BoundaryFlux pressure = sum(problem, solution, PatchKind::pressure_wall);
  figures.axial_force_n_m = suction.momentum_x + pressure.momentum_x;
  figures.tangential_force_n_m = suction.momentum_y + pressure.momentum_y;
  const BoundaryFlux in = sum(problem, solution, PatchKind::inlet);
  const BoundaryFlux out = sum(problem, solution, PatchKind::outlet);
  figures.momentum_axial_n_m = -(in.momentum_x + out.momentum_x);
  figures.momentum_tangential_n_m = -(in.momentum_y + out.momentum_y);
}

void set_wheel(PassageFigures& figures, double pitch, const WheelDuty& duty) {
  const NozzleFlow& jet = duty.jet;
  const double u = duty.blade_speed, c1 = jet.jet_velocity;
  const double axial = c1 * std::sin(duty.jet_angle_deg * std::numbers::pi / 180.0);
  const double offered = jet.jet_density * axial * pitch;
  assert(offered > 0.0 && jet.mass_flow > 0.0);
  figures.capacity_ratio = figures.mass_flow_kg_s_m / offered;
  const double loaded = jet.mass_flow * std::min(figures.capacity_ratio, 1.0);
  const double height = loaded / figures.mass_flow_kg_s_m;  // of one passage with the same flow
  const double force = figures.tangential_force_n_m -
                       figures.mass_flow_kg_s_m * surplus_tangential_velocity(figures, duty);
  figures.tangential_force_n = force * height;
  figures.axial_force_n = figures.axial_force_n_m * height;
  figures.torque_n_m = figures.tangential_force_n * duty.mean_radius;
  figures.power_w = figures.tangential_force_n * u;
  figures.blade_efficiency = force * u / (0.5 * figures.mass_flow_kg_s_m * c1 * c1);
  figures.wheel_efficiency =
      figures.power_w / (0.5 * jet.mass_flow * jet.spouting_velocity * jet.spouting_velocity);
}

/// One wall face on its way into the distribution.
struct WallPiece {
  mesh::Point ends[2], middle;
  double pressure = 0.0;
};

std::vector<WallPiece> wall_pieces(const solver::FlowProblem& problem,
                                   const solver::FlowSolution& solution, PatchKind kind) {
  std::vector<WallPiece> pieces;
  for_each_face(problem, solution, kind, [&](const auto& face, const BoundaryFlux& flux) {
    const auto& nodes = problem.mesh->nodes();
    const mesh::Point force(flux.momentum_x, flux.momentum_y);
    pieces.push_back({{nodes[at(face.nodes[0])], nodes[at(face.nodes[1])]},
                      face.midpoint,
                      force.dot(face.normal) / face.normal.squaredNorm()});
  });
  return pieces;
}

/// From one place to another, whole pitches taken off: the sides of neighbouring blades are one.
mesh::Point step(const mesh::Point& from, const mesh::Point& to, double pitch) {
  mesh::Point d = to - from;
  if (pitch > 0.0) d.y() -= pitch * std::round(d.y() / pitch);
  return d;
}

/// The end of the side that no other piece touches and that lies furthest upstream.
mesh::Point leading_end(const std::vector<WallPiece>& pieces, double pitch) {
  mesh::Point best(std::numeric_limits<double>::infinity(), 0.0), any = best;
  for (const WallPiece& piece : pieces) {
    for (const mesh::Point& end : piece.ends) {
      if (end.x() < any.x()) any = end;
      if (end.x() >= best.x()) continue;
      const double touching = 1e-6 * (piece.ends[1] - piece.ends[0]).norm();
      const auto touches = [&](const WallPiece& other) {
        return step(end, other.ends[0], pitch).norm() < touching ||
               step(end, other.ends[1], pitch).norm() < touching;
      };
      if (std::count_if(pieces.begin(), pieces.end(), touches) == 1) best = end;
    }
  }
  return std::isfinite(best.x()) ? best : any;  // a closed outline has no end
}

/// Follows the wall from piece to nearest piece.
std::vector<SurfacePoint> follow(std::vector<WallPiece> pieces, double pitch, double gamma,
                                 double total_pressure) {
  std::vector<SurfacePoint> points;
  if (pieces.empty()) return points;
  mesh::Point here = leading_end(pieces, pitch);
  double arc = 0.0;
  while (!pieces.empty()) {
    std::size_t next = 0;
    int first = 0;
    double nearest = std::numeric_limits<double>::infinity();
    for (std::size_t i = 0; i < pieces.size(); ++i) {
      for (int end : {0, 1}) {
        const double distance = step(here, pieces[i].ends[end], pitch).norm();
        if (distance >= nearest) continue;
        nearest = distance;
        next = i;
        first = end;
      }
    }
    const WallPiece piece = pieces[next];
    pieces.erase(pieces.begin() + static_cast<std::ptrdiff_t>(next));
    const mesh::Point start = here + step(here, piece.ends[first], pitch);
    const mesh::Point shift = start - piece.ends[first];
    const mesh::Point middle = piece.middle + shift, end = piece.ends[1 - first] + shift;
    arc += nearest + (middle - start).norm();
    const double ratio = std::clamp(piece.pressure / total_pressure, 1e-12, 1.0);
    points.push_back({middle.x(), middle.y(), arc, piece.pressure,
                      solver::mach_from_pressure_ratio(ratio, gamma)});
    arc += (end - middle).norm();
    here = end;
  }
  return points;
}

}  // namespace

PassageFigures passage_figures(const solver::FlowProblem& problem,
                               const solver::FlowSolution& solution,
                               const std::optional<WheelDuty>& duty) {
  assert(problem.mesh != nullptr);
  const double pitch = problem.mesh->pitch();
  const BoundaryFlux in = reversed(sum(problem, solution, PatchKind::inlet));
  const BoundaryFlux out = sum(problem, solution, PatchKind::outlet);
  const solver::Primitive inlet =
      mixed_out(problem.gas, in, pitch, axial_branch(problem, solution, PatchKind::inlet));
  const solver::Primitive exit =
      mixed_out(problem.gas, out, pitch, axial_branch(problem, solution, PatchKind::outlet));
  PassageFigures figures;
  figures.inlet = stream_state(problem.gas, inlet);
  figures.exit = stream_state(problem.gas, exit);
  figures.turning_deg = figures.exit.angle_deg - figures.inlet.angle_deg;
  figures.mass_flow_kg_s_m = in.mass;
  figures.mass_imbalance = (in.mass - out.mass) / in.mass;
  figures.total_pressure_loss = (figures.inlet.total_pressure_pa - figures.exit.total_pressure_pa) /
                                (figures.inlet.total_pressure_pa - figures.exit.pressure_pa);
  figures.absolute_exit_velocity_m_s =
      std::hypot(exit.u, exit.v + (duty ? duty->blade_speed : 0.0));
  set_forces(figures, problem, solution);
  if (duty) {
    set_wheel(figures, pitch, *duty);
    set_power_balance(figures, problem.gas, *duty);
  }
  return figures;
}

SurfaceDistribution surface_distribution(const solver::FlowProblem& problem,
                                         const solver::FlowSolution& solution,
                                         double inlet_total_pressure) {
  assert(problem.mesh != nullptr && inlet_total_pressure > 0.0);
  const auto side = [&](PatchKind kind) {
    return follow(wall_pieces(problem, solution, kind), problem.mesh->pitch(),
                  problem.gas.heat_capacity_ratio, inlet_total_pressure);
  };
  return {side(PatchKind::suction_wall), side(PatchKind::pressure_wall)};
}

}  // namespace falcate::post
