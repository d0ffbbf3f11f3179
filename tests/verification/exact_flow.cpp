#include "tests/verification/exact_flow.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace falcate::verification {
namespace {

using mesh::PatchKind;
using mesh::Point;

// Ringleb's transonic flow: Ringleb, Z. Angew. Math. Mech. 20(4) (1940) 185-198. Between the
// streamlines k = 0.7 and 1.2 (walls), from q = 0.5 to the axis of symmetry: subsonic to Mach 1.4.
// The half that slows down again is left out: a smooth return through Mach 1 is not isolated
// (Morawetz, Comm. Pure Appl. Math. 9 (1956) 45-68), so a solver may settle on a neighbour with a
// weak shock. A second channel, k = 0.4 to 0.6, is subsonic and runs through both halves.

struct Hodograph {
  double a, rho, j;
  explicit Hodograph(double q)
      : a(std::sqrt(1.0 - 0.5 * (gamma_of_air - 1.0) * q * q)),
        rho(std::pow(a, 2.0 / (gamma_of_air - 1.0))),
        j(1.0 / a + 1.0 / (3.0 * a * a * a) + 1.0 / (5.0 * std::pow(a, 5)) -
          0.5 * std::log((1.0 + a) / (1.0 - a))) {}
};

mesh::Point place(double k, double q, double side) {
  const Hodograph h(q);
  const double x = 0.5 / h.rho * (2.0 / (k * k) - 1.0 / (q * q)) - 0.5 * h.j;
  const double y = std::sqrt(std::max(0.0, 1.0 - q * q / (k * k))) / (k * h.rho * q);
  return {x, side * y};
}

/// Speed at a point: root of (x + J/2)^2 + y^2 = 1/(2 rho q^2)^2 (a circle for each speed).
double speed_at(const mesh::Point& x) {
  const auto miss = [&](double q) {
    const Hodograph h(q);
    const double dx = x.x() + 0.5 * h.j, radius = 0.5 / (h.rho * q * q);
    return dx * dx + x.y() * x.y() - radius * radius;
  };
  double low = 0.2, high = 2.0;  // the circles shrink as q rises
  for (int i = 0; i < 200; ++i) {
    const double middle = 0.5 * (low + high);
    (miss(middle) < 0.0 ? low : high) = middle;
  }
  return 0.5 * (low + high);
}

solver::Primitive ringleb(const mesh::Point& x) {
  const double q = speed_at(x);
  const Hodograph h(q);
  const double square = 2.0 * h.rho * (x.x() + 0.5 * h.j) + 1.0 / (q * q);  // 2/k^2
  const double sine = std::min(1.0, q * std::sqrt(0.5 * square));
  const double cosine = std::sqrt(1.0 - sine * sine) * (x.y() < 0.0 ? -1.0 : 1.0);
  return {h.rho, q * cosine, -q * sine, h.rho * h.a * h.a / gamma_of_air};
}

/// xi along the stream from above to below the axis, eta from the inner to the outer wall.
struct Range {
  double inner, outer, top;  ///< k of the walls, speed at the entry
  double end;                ///< part of the way from entry to exit: 0.5 is the axis of symmetry
};
const Range transonic{1.2, 0.7, 0.5, 0.5}, subsonic{0.6, 0.4, 0.35, 1.0};

mesh::PassageMesh channel(const Range& range, int n, const OrderCase& c) {
  using mesh::PatchKind;
  const auto map = [&](double xi, double eta) {
    const double k = range.inner + (range.outer - range.inner) * eta;
    // sin(angle) = q/k; the angle runs evenly from the entry through 90 deg to the exit.
    const double start = std::asin(range.top / k), way = range.end * xi;
    const double angle = start + (std::acos(-1.0) - 2.0 * start) * way;
    return place(k, k * std::sin(angle), way <= 0.5 ? 1.0 : -1.0);
  };
  return mesh::PassageMesh::build(mesh::structured(
      4 * n, n, c.cells, map,
      {PatchKind::wall, PatchKind::prescribed, PatchKind::wall, PatchKind::prescribed}, 0.0,
      c.perturbation * 6.0 / n));
}

// Shock-free supersonic vortex between circular walls: Aftosmis, Gaitonde & Tavares, AIAA 94-0415
// (1994); inner radius 1, outer 1.384, Mach 2.25 at the inner wall.

constexpr double inner = 1.0, outer = 1.384, inner_mach = 2.25;

/// Clockwise vortex in units of the total state.
solver::Primitive supersonic_vortex(const mesh::Point& x) {
  const double r = x.norm();
  // Speed of sound at rest 1: a_i from the energy equation at the inner wall.
  const double ai = 1.0 / std::sqrt(1.0 + 0.5 * (gamma_of_air - 1.0) * inner_mach * inner_mach);
  const double w = ai * inner_mach * inner / r;
  const double a2 = 1.0 - 0.5 * (gamma_of_air - 1.0) * w * w;
  const double rho = std::pow(a2, 1.0 / (gamma_of_air - 1.0));
  return {rho, w * x.y() / r, -w * x.x() / r, rho * a2 / gamma_of_air};
}

mesh::PassageMesh quarter_ring(int n, const OrderCase& c) {
  using mesh::PatchKind;
  const auto map = [](double xi, double eta) {
    const double r = inner + (outer - inner) * eta, angle = std::acos(0.0) * (1.0 - xi);
    return mesh::Point(r * std::cos(angle), r * std::sin(angle));
  };
  return mesh::PassageMesh::build(mesh::structured(
      4 * n, n, c.cells, map,
      {PatchKind::wall, PatchKind::prescribed, PatchKind::wall, PatchKind::prescribed}, 0.0,
      c.perturbation * 6.0 / n));
}

// The isentropic vortex in the frame that travels with it, where it is steady: Shu,
// NASA/CR-97-206253 (1997); Yee, Sandham & Djomehri, J. Comput. Phys. 150 (1999) 199-238. The total
// enthalpy differs from streamline to streamline. Where streamlines are closed nothing but the
// scheme's own dissipation would settle their entropy, so the square lies beside the centre, and
// the exact state is given all round it: each streamline comes in from outside.

constexpr double strength = 5.0;

/// Speed of sound and density far away 1.
solver::Primitive isentropic_vortex(const mesh::Point& x) {
  const double pi = std::acos(-1.0), r2 = x.squaredNorm();
  const double temperature = 1.0 - (gamma_of_air - 1.0) * strength * strength /
                                       (8.0 * gamma_of_air * pi * pi) * std::exp(1.0 - r2);
  const double turn = strength / (2.0 * pi) * std::exp(0.5 * (1.0 - r2)) / std::sqrt(gamma_of_air);
  const double rho = std::pow(temperature, 1.0 / (gamma_of_air - 1.0));
  return {rho, -turn * x.y(), turn * x.x(), rho * temperature / gamma_of_air};
}

mesh::PassageMesh square(int n, const OrderCase& c) {
  using mesh::PatchKind;
  const auto map = [](double xi, double eta) {
    return mesh::Point(0.2 + 1.6 * xi, -0.8 + 1.6 * eta);
  };
  return mesh::PassageMesh::build(mesh::structured(
      n, n, c.cells, map,
      {PatchKind::prescribed, PatchKind::prescribed, PatchKind::prescribed, PatchKind::prescribed},
      0.0, c.perturbation * 8.0 / n));
}

mesh::PassageMesh transonic_channel(int n, const OrderCase& c) { return channel(transonic, n, c); }
mesh::PassageMesh subsonic_channel(int n, const OrderCase& c) { return channel(subsonic, n, c); }

}  // namespace

const std::vector<ExactFlow>& exact_flows() {
  static const std::vector<ExactFlow> flows = {
      {"supersonic_vortex", "supersonic vortex between circular walls, Mach 2.25 to 1.33",
       "Aftosmis, Gaitonde, Tavares, AIAA 94-0415, 1994", 6, supersonic_vortex, quarter_ring},
      {"ringleb_transonic", "Ringleb's flow through Mach 1, between curved walls",
       "Ringleb, Z. Angew. Math. Mech. 20, 1940, 185-198", 6, ringleb, transonic_channel},
      {"ringleb_subsonic", "Ringleb's flow below Mach 1, between curved walls",
       "Ringleb, Z. Angew. Math. Mech. 20, 1940, 185-198", 6, ringleb, subsonic_channel},
      {"isentropic_vortex", "isentropic vortex in its own frame, a square beside its centre",
       "Shu, NASA/CR-97-206253, 1997", 8, isentropic_vortex, square},
  };
  return flows;
}

const ExactFlow& exact_flow(const std::string& name) {
  for (const ExactFlow& flow : exact_flows())
    if (flow.name == name) return flow;
  throw std::out_of_range(name);
}

mesh::Point ringleb_point(double k, double q, double side) { return place(k, q, side); }

Errors solved_errors(const ExactFlow& flow, int n, const OrderCase& c) {
  const mesh::PassageMesh mesh = flow.mesh(n, c);
  solver::FlowProblem problem;
  problem.mesh = &mesh;
  problem.gas = {gamma_of_air, 1.0};
  problem.inlet = {1.0 / gamma_of_air, 1.0 / gamma_of_air, std::acos(0.0), {}};
  problem.exit_pressure = 0.5 / gamma_of_air;
  problem.prescribed = flow.exact;
  std::vector<solver::Primitive> start;
  for (const Point& x : mesh.centroids()) start.push_back(flow.exact(x));
  const auto solution = solver::solve_steady(problem, {}, start);
  double entropy_sum = 0.0, pressure_sum = 0.0, area = 0.0;
  for (std::size_t i = 0; i < solution.cells.size(); ++i) {
    const auto& q = solution.cells[i];
    const double entropy = q.pressure * gamma_of_air / std::pow(q.density, gamma_of_air) - 1.0;
    const double dp = q.pressure - flow.exact(mesh.centroids()[i]).pressure;
    entropy_sum += mesh.areas()[i] * entropy * entropy;
    pressure_sum += mesh.areas()[i] * dp * dp;
    area += mesh.areas()[i];
  }
  return {std::sqrt(entropy_sum / area), std::sqrt(pressure_sum / area), solution.summary};
}

double observed_order(const std::vector<double>& errors) {
  double sxx = 0.0, sxy = 0.0;
  const double middle = 0.5 * static_cast<double>(errors.size() - 1);
  for (std::size_t i = 0; i < errors.size(); ++i) {
    const double x = -(static_cast<double>(i) - middle) * std::log(2.0);
    sxx += x * x;
    sxy += x * std::log(errors[i]);
  }
  return sxy / sxx;
}

OrderStudy order_study(const ExactFlow& flow, const OrderCase& c) {
  OrderStudy study;
  std::vector<double> entropy, pressure;
  for (int level = 0, n = flow.coarsest; level < 3; ++level, n *= 2) {
    study.errors.push_back(solved_errors(flow, n, c));
    entropy.push_back(study.errors.back().entropy);
    pressure.push_back(study.errors.back().pressure);
  }
  study.entropy_order = observed_order(entropy);
  study.pressure_order = observed_order(pressure);
  return study;
}

}  // namespace falcate::verification
