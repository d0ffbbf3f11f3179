// Ringleb's transonic flow, exact: Ringleb, Z. Angew. Math. Mech. 20(4) (1940) 185-198. Between the
// streamlines k = 0.7 and 1.2 (walls), from q = 0.5 to the axis of symmetry: subsonic to Mach 1.4.
// The half that slows down again is left out: a smooth return through Mach 1 is not isolated
// (Morawetz, Comm. Pure Appl. Math. 9 (1956) 45-68), so a solver may settle on a neighbour with a
// weak shock. A second channel, k = 0.4 to 0.6, is subsonic and runs through both halves.
#include "tests/verification/exact_flow.h"

namespace falcate::verification {
namespace {

constexpr double gamma = 1.4;

struct Hodograph {
  double a, rho, j;
  explicit Hodograph(double q)
      : a(std::sqrt(1.0 - 0.5 * (gamma - 1.0) * q * q)),
        rho(std::pow(a, 2.0 / (gamma - 1.0))),
        j(1.0 / a + 1.0 / (3.0 * a * a * a) + 1.0 / (5.0 * std::pow(a, 5)) -
          0.5 * std::log((1.0 + a) / (1.0 - a))) {}
};

/// Point of streamline k with speed q; side +1 above the axis of symmetry, -1 below.
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
  return {h.rho, q * cosine, -q * sine, h.rho * h.a * h.a / gamma};
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

class Ringleb : public testing::TestWithParam<OrderCase> {
 protected:
  static void expect_second_order(const Range& range, double least_pressure_order = 1.9) {
    std::vector<double> entropy, pressure;
    for (const int n : {6, 12, 24}) {
      const auto e = solved_errors(channel(range, n, GetParam()), gamma, ringleb);
      entropy.push_back(e.entropy);
      pressure.push_back(e.pressure);
      std::printf("%2d cells across: entropy %.3e pressure %.3e\n", n, e.entropy, e.pressure);
    }
    EXPECT_GT(observed_order(entropy), 1.9);
    EXPECT_GT(observed_order(pressure), least_pressure_order);
  }
};

// Triangles alone fall short here: their pressure order is 1.73 on these meshes (entropy keeps its
// order), from the supersonic part along the convex wall, and that figure is held. Passages are
// meshed by quadrilaterals, which meet 1.9.
TEST_P(Ringleb, ErrorsFallAtSecondOrderThroughMachOne) {
  expect_second_order(transonic, GetParam().cells == mesh::CellKind::triangles ? 1.7 : 1.9);
}
TEST_P(Ringleb, ErrorsFallAtSecondOrderBelowMachOne) { expect_second_order(subsonic); }

INSTANTIATE_TEST_SUITE_P(Cells, Ringleb, testing::ValuesIn(order_cases),
                         [](const auto& info) { return std::string(info.param.name); });

// Points of the exact solution recomputed from the published formulas.
TEST(RinglebFormula, MatchesTheTable) {
  const auto p = place(1.0, 0.9, 1.0);
  EXPECT_NEAR(p.x(), 0.45633727, 1e-8);
  EXPECT_NEAR(p.y(), 0.75339762, 1e-8);
  const auto q = ringleb(p);
  EXPECT_NEAR(q.density, 0.64285059, 1e-8);
  EXPECT_NEAR(q.pressure, 0.38479200, 1e-8);
  EXPECT_NEAR(std::hypot(q.u, q.v) / std::sqrt(gamma * q.pressure / q.density), 0.983152, 1e-6);
}

}  // namespace
}  // namespace falcate::verification
