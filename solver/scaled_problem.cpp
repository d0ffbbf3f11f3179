#include "solver/scaled_problem.h"

#include <algorithm>
#include <numeric>
#include <stdexcept>

#include "solver/gas_dynamics.h"

namespace falcate::solver {
namespace {

using mesh::PatchKind;

Units units_of(const FlowProblem& problem) {
  const double p0 = entering_total_pressure(problem.inlet, problem.gas);
  const double rt = problem.gas.gas_constant * problem.inlet.total_temperature;
  return {p0 / rt, std::sqrt(rt), p0};
}

double isentropic_mach(double pressure_ratio, double gamma) {
  return mach_from_pressure_ratio(std::min(pressure_ratio, 1.0 - 1e-8), gamma);
}

/// State of Mach number and direction with total density and pressure 1.
State<double> isentropic_state(double mach, double angle, double gamma) {
  const auto stream = unit_stream(mach * mach, gamma);
  return {stream.density, stream.speed * std::sin(angle), stream.speed * std::cos(angle),
          stream.pressure};
}

std::vector<Plane> planes_of(const mesh::PassageMesh& mesh, PatchKind kind) {
  std::vector<Plane> planes;
  for (const auto& patch : mesh.patches()) {
    if (patch.kind != kind) continue;
    std::vector<double> lengths, centres;
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f) {
      const auto& face = mesh.faces()[static_cast<std::size_t>(f)];
      lengths.push_back(face.normal.norm());
      centres.push_back(face.midpoint.y());
    }
    planes.push_back({patch.first_face, PlaneWaves(lengths, centres, mesh.pitch())});
  }
  return planes;
}

/// |theta| - nu where the axial part of a simple wave is just sonic: M cos(theta) = 1.
double sonic_outgoing(double incoming, double gamma) {
  double low = std::max(0.0, incoming - std::acos(0.0)), high = incoming;
  for (int i = 0; i < 60; ++i) {
    const double nu = 0.5 * (low + high);
    const double mach = std::sqrt(mach_squared_from_prandtl_meyer(std::max(nu, 1e-9), gamma));
    (mach * std::cos(incoming - nu) < 1.0 ? low : high) = nu;
  }
  return incoming - low - high;
}

InletStream inlet_stream(const FlowProblem& problem) {
  const double gamma = problem.gas.heat_capacity_ratio;
  const auto& in = problem.inlet;
  InletStream s;
  s.gamma = gamma;
  s.cotangent = std::cos(in.angle) / std::sin(in.angle);
  const double mach = in.mach.value_or(0.0);
  s.given = isentropic_state(mach, in.angle, gamma);
  if (in.behind_shock) {
    s.regime = InletRegime::subsonic;
  } else if (mach * std::sin(in.angle) >= 1.0) {
    s.regime = InletRegime::axially_supersonic;
  } else if (mach > 1.0) {
    s.regime = InletRegime::simple_wave;
    s.simple_wave = std::abs(std::acos(0.0) - in.angle) + prandtl_meyer(mach * mach, gamma);
    s.least_outgoing = sonic_outgoing(s.simple_wave, gamma);
  }
  return s;
}

/// Mean over a plane of a quantity of the adjoining cells, four values each.
template <class Quantity>
State<double> plane_mean(const mesh::PassageMesh& mesh, const Plane& plane,
                         std::span<const State<double>> cells, const Quantity& quantity) {
  State<double> mean{};
  for (std::size_t i = 0; i < plane.waves.size(); ++i) {
    const auto f = static_cast<std::size_t>(plane.first_face) + i;
    const State<double> value = quantity(cells[static_cast<std::size_t>(mesh.faces()[f].left)]);
    for (std::size_t k = 0; k < 4; ++k) mean[k] += plane.waves.weight(i) * value[k];
  }
  return mean;
}

/// Pressure of the uniform stream with these fluxes behind a shock along the plane; nought where
/// no stream carries them. The two streams that carry the same fluxes, on either side of sonic, are
/// the two sides of such a shock.
double pressure_behind_shock(const State<double>& fluxes, double gamma) {
  if (!(fluxes[density] > 0.0) || mixed_out_equation(fluxes, gamma).discriminant() <= 0.0)
    return 0.0;
  return mixed_out_state(fluxes, gamma, Branch::subsonic)[pressure];
}

/// Direction of the blades at axial stations between the edges, from the walls' tangents.
class MeanDirection {
 public:
  explicit MeanDirection(const mesh::PassageMesh& mesh) {
    for_each_wall(mesh, [&](const mesh::PassageMesh::Face& face) {
      first_ = std::min(first_, face.midpoint.x());
      last_ = std::max(last_, face.midpoint.x());
    });
    for_each_wall(mesh, [&](const mesh::PassageMesh::Face& face) {
      mesh::Point tangent(-face.normal.y(), face.normal.x());
      if (tangent.x() < 0.0) tangent = -tangent;
      sum_[station(face.midpoint.x())] += tangent;
    });
  }
  bool empty() const { return last_ < first_; }
  /// 0 upstream of the blades, 1 downstream, linear between.
  double way(double x) const {
    return empty() ? 0.0 : std::clamp((x - first_) / (last_ - first_), 0.0, 1.0);
  }
  /// rad from the plane of rotation; the inlet angle upstream, the last blade direction downstream.
  double angle(double x, double inlet_angle) const {
    if (empty() || x < first_) return inlet_angle;
    const mesh::Point& t = sum_[std::clamp<std::size_t>(station(x), 1, stations - 2)];
    return t.norm() > 0.0 ? std::atan2(t.x(), t.y()) : inlet_angle;
  }

 private:
  static constexpr std::size_t stations = 20;
  std::size_t station(double x) const {
    const double s = (x - first_) / (last_ - first_) * static_cast<double>(stations);
    return static_cast<std::size_t>(std::clamp(s, 0.0, static_cast<double>(stations) - 1.0));
  }
  template <class Visit>
  static void for_each_wall(const mesh::PassageMesh& mesh, const Visit& visit) {
    for (const auto& patch : mesh.patches()) {
      if (!mesh::is_wall(patch.kind)) continue;
      for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f)
        visit(mesh.faces()[static_cast<std::size_t>(f)]);
    }
  }
  double first_ = 1e300, last_ = -1e300;
  std::array<mesh::Point, stations> sum_{[] {
    std::array<mesh::Point, stations> zero;
    zero.fill(mesh::Point::Zero());
    return zero;
  }()};
};

std::vector<State<double>> prescribed_states(const FlowProblem& problem, const Units& units) {
  const auto& mesh = *problem.mesh;
  std::vector<State<double>> states(
      static_cast<std::size_t>(mesh.face_count() - mesh.interior_face_count()));
  for (const auto& patch : mesh.patches()) {
    if (patch.kind != PatchKind::prescribed) continue;
    if (!problem.prescribed) throw std::invalid_argument("a prescribed patch needs its state");
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f)
      states[static_cast<std::size_t>(f - mesh.interior_face_count())] =
          units.scaled(problem.prescribed(mesh.faces()[static_cast<std::size_t>(f)].midpoint));
  }
  return states;
}

double exit_mach(const FlowProblem& problem) {
  return isentropic_mach(
      problem.exit_pressure / entering_total_pressure(problem.inlet, problem.gas),
      problem.gas.heat_capacity_ratio);
}

/// Mach number of the first guess at the inlet.
double starting_mach(const FlowProblem& problem) {
  if (problem.inlet.behind_shock) return std::min(exit_mach(problem), 0.7);
  return problem.inlet.mach.value_or(exit_mach(problem));
}

}  // namespace

double entering_total_pressure(const InletCondition& inlet, const Gas& gas) {
  const double mach = inlet.mach.value_or(0.0);
  if (!inlet.behind_shock || mach <= 1.0) return inlet.total_pressure;
  return inlet.total_pressure * normal_shock(mach, gas.heat_capacity_ratio).total_pressure_ratio;
}

ScaledProblem scale(const FlowProblem& problem) {
  if (!problem.mesh || problem.inlet.total_pressure <= 0.0 ||
      problem.inlet.total_temperature <= 0.0 || problem.exit_pressure <= 0.0)
    throw std::invalid_argument("a flow problem needs a mesh and positive pressures");
  ScaledProblem s;
  s.mesh = problem.mesh;
  s.gamma = problem.gas.heat_capacity_ratio;
  s.units = units_of(problem);
  s.inlet = inlet_stream(problem);
  s.outlet.gamma = s.gamma;
  s.outlet.pressure = problem.exit_pressure / s.units.pressure;
  s.inlet_planes = planes_of(*problem.mesh, PatchKind::inlet);
  s.outlet_planes = planes_of(*problem.mesh, PatchKind::outlet);
  s.prescribed = prescribed_states(problem, s.units);
  const double mach = std::max(exit_mach(problem), problem.inlet.mach.value_or(0.0));
  const auto fast = isentropic_state(mach, std::acos(0.0), s.gamma);
  s.reference_speed = fast[velocity_x];
  const auto& areas = problem.mesh->areas();
  s.reference_length = problem.mesh->pitch() > 0.0
                           ? problem.mesh->pitch()
                           : std::sqrt(std::accumulate(areas.begin(), areas.end(), 0.0));
  return s;
}

void refresh_planes(ScaledProblem& problem, std::span<const State<double>> cells, double share) {
  const double gamma = problem.gamma;
  const auto follow = [share](double& mean, double now) { mean += share * (now - mean); };
  const auto follow_stream = [&](auto& stream, const Plane& plane) {
    const auto q = plane_mean(*problem.mesh, plane, cells, [](const auto& cell) { return cell; });
    const double a = speed_of_sound(q, gamma);
    follow(stream.u, q[velocity_x] / a);
    follow(stream.v, q[velocity_y] / a);
    follow(stream.impedance, q[density] * a);
    return (q[velocity_x] * q[velocity_x] + q[velocity_y] * q[velocity_y]) / (a * a);
  };
  for (const Plane& plane : problem.inlet_planes) {
    const double mach_squared = follow_stream(problem.inlet, plane);
    follow(problem.inlet.beta, std::sqrt(std::max(1.0 - mach_squared, 0.0)));
  }
  for (const Plane& plane : problem.outlet_planes) {
    follow(problem.outlet.mach_squared, follow_stream(problem.outlet, plane));
    const auto fluxes = plane_mean(*problem.mesh, plane, cells, [gamma](const auto& cell) {
      return physical_flux(cell, mesh::Point(1.0, 0.0), gamma);
    });
    follow(problem.outlet.pressure_behind_shock, pressure_behind_shock(fluxes, gamma));
    // A set pressure above it drives the shock into the row, one below it sweeps it away.
    problem.outlet.axially_supersonic =
        problem.outlet.u > 1.0 && problem.outlet.pressure < problem.outlet.pressure_behind_shock;
  }
}

std::vector<State<double>> cold_start(const FlowProblem& problem, const ScaledProblem& scaled) {
  const auto& mesh = *problem.mesh;
  const MeanDirection direction(mesh);
  const double first = starting_mach(problem), last = exit_mach(problem);
  std::vector<State<double>> cells;
  for (const mesh::Point& x : mesh.centroids())
    cells.push_back(isentropic_state(first + (last - first) * direction.way(x.x()),
                                     direction.angle(x.x(), problem.inlet.angle), scaled.gamma));
  return cells;
}

}  // namespace falcate::solver
