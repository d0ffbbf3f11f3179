// Every row of flux_methods: what a numerical flux must do by its definition, and how near it comes
// to the flux of the exact Riemann solution.
#include "solver/flux.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <random>
#include <regex>
#include <set>
#include <string>

#include "solver/exact_riemann.h"

namespace falcate::solver {
namespace {

using mesh::Point;
constexpr double gamma = 1.4;
using Values = State<double>;

class FluxOf : public testing::TestWithParam<FluxMethod> {
 protected:
  static Values flux(const Values& l, const Values& r, const Point& n) {
    return numerical_flux(GetParam().kind, l, r, n, gamma);
  }
};

std::mt19937& dice() {
  static std::mt19937 engine;
  return engine;
}

double between(double low, double high) {
  return std::uniform_real_distribution<double>(low, high)(dice());
}

Values any_state() {
  return {between(0.3, 3.0), between(-2.5, 2.5), between(-2.5, 2.5), between(0.3, 3.0)};
}

Point any_normal() {
  const double angle = between(0.0, 2.0 * std::numbers::pi);
  return between(0.1, 2.0) * Point(std::cos(angle), std::sin(angle));
}

void expect_near(const Values& a, const Values& b, double tolerance, const char* what) {
  for (std::size_t k = 0; k < 4; ++k) EXPECT_NEAR(a[k], b[k], tolerance) << what << " " << k;
}

/// Velocity in the axes of a turned observer.
Values turned(const Values& q, double c, double s) {
  return {q[0], c * q[1] - s * q[2], s * q[1] + c * q[2], q[3]};
}

TEST_P(FluxOf, IsConsistent) {
  dice().seed(1);
  for (int i = 0; i < 200; ++i) {
    const auto q = any_state();
    const auto n = any_normal();
    expect_near(flux(q, q, n), physical_flux(q, n, gamma), 1e-12, "equal states");
  }
}

TEST_P(FluxOf, IsConservative) {
  dice().seed(2);
  for (int i = 0; i < 200; ++i) {
    const auto l = any_state(), r = any_state();
    const auto n = any_normal();
    auto back = flux(r, l, -n);
    for (double& f : back) f = -f;
    expect_near(flux(l, r, n), back, 1e-12, "seen from the other side");
  }
}

TEST_P(FluxOf, DoesNotDependOnTheAxes) {
  dice().seed(3);
  for (int i = 0; i < 200; ++i) {
    const auto l = any_state(), r = any_state();
    const auto n = any_normal();
    const double angle = between(0.0, 2.0 * std::numbers::pi);
    const double c = std::cos(angle), s = std::sin(angle);
    const Point m(c * n.x() - s * n.y(), s * n.x() + c * n.y());
    expect_near(flux(turned(l, c, s), turned(r, c, s), m), turned(flux(l, r, n), c, s), 1e-11,
                "turned axes");
  }
}

TEST_P(FluxOf, GrowsWithTheLengthOfTheFace) {
  dice().seed(4);
  for (int i = 0; i < 200; ++i) {
    const auto l = any_state(), r = any_state();
    const auto n = any_normal();
    auto scaled = flux(l, r, n);
    for (double& f : scaled) f *= 3.7;
    expect_near(flux(l, r, 3.7 * n), scaled, 1e-11, "longer face");
  }
}

// A contact or shear layer that moves with normal velocity w carries the upwind state's flux: that
// of the exact solution. At w = 0 nothing but pressure crosses.
TEST_P(FluxOf, KeepsContactAndShear) {
  dice().seed(5);
  for (int i = 0; i < 200; ++i) {
    const auto n = any_normal();
    const Point unit = n / n.norm(), along(-unit.y(), unit.x());
    const double w = i % 4 == 0 ? 0.0 : between(-2.0, 2.0), p = between(0.3, 3.0);
    const auto side = [&] {
      const Point v = w * unit + between(-2.0, 2.0) * along;
      return Values{between(0.3, 3.0), v.x(), v.y(), p};
    };
    const auto l = side(), r = side();
    // The Roe average of unequal states can lie within its entropy correction of a sonic point,
    // but that acts on sound waves, of which there are none here.
    const auto f = flux(l, r, n);
    if (w == 0.0)
      expect_near(f, {0.0, p * n.x(), p * n.y(), 0.0}, 1e-12, "at rest");
    else
      expect_near(f, godunov_flux(l, r, n, gamma), 2e-12, "moving");
  }
}

struct Closeness {
  FluxKind kind;
  double order;    ///< in the jump, of the difference from Godunov's flux
  bool one_sided;  ///< takes exactly the upwind flux where every wave runs one way
};
// SLAU2 meters its own pressure diffusion, not that of the linearised waves, and its supersonic
// mass flux is rho_left times the density-weighted mean velocity: both differ by the first order in
// the jump from Godunov's flux (Kitamura & Shima 2013, eqs. 2.3).
const Closeness closeness[] = {
    {FluxKind::slau2, 1.0, false}, {FluxKind::hllc, 2.0, true}, {FluxKind::roe, 2.0, true}};

const Closeness& closeness_of(FluxKind kind) {
  for (const auto& row : closeness)
    if (row.kind == kind) return row;
  throw std::out_of_range("a flux without its row in this table");
}

double miss_at(FluxKind kind, const Values& q, const Values& jump, const Point& n, double size) {
  Values l = q, r = q;
  for (std::size_t k = 0; k < 4; ++k) l[k] -= size * jump[k], r[k] += size * jump[k];
  const auto f = numerical_flux(kind, l, r, n, gamma), exact = godunov_flux(l, r, n, gamma);
  double sum = 0.0;
  for (std::size_t k = 0; k < 4; ++k) sum += (f[k] - exact[k]) * (f[k] - exact[k]);
  return std::sqrt(sum);
}

// Normal Mach numbers away from 0 and 1, where waves change direction between the two states.
TEST_P(FluxOf, ComesNearGodunovsFluxForSmallJumps) {
  dice().seed(6);
  for (const double mach : {-0.7, -0.3, 0.2, 0.5, 0.8})
    for (int i = 0; i < 20; ++i) {
      const auto n = any_normal();
      const Point v = std::sqrt(gamma) * mach * n / n.norm();
      const Values q{1.0, v.x(), v.y(), 1.0};
      const Values jump{between(-1, 1), between(-1, 1), between(-1, 1), between(-1, 1)};
      const double coarse = miss_at(GetParam().kind, q, jump, n, 2e-3);
      const double fine = miss_at(GetParam().kind, q, jump, n, 1e-3);
      const double order = std::log2(coarse / fine);
      EXPECT_GT(order, closeness_of(GetParam().kind).order - 0.15) << "Mach " << mach;
      EXPECT_LT(coarse, 0.02) << "Mach " << mach;
    }
}

TEST_P(FluxOf, TakesTheUpwindFluxWhereEveryWaveRunsOneWay) {
  dice().seed(7);
  for (int i = 0; i < 200; ++i) {
    const auto n = any_normal();
    const Point unit = n / n.norm();
    const auto fast = [&](double w) {
      const Point v = w * unit + between(-1.0, 1.0) * Point(-unit.y(), unit.x());
      return Values{between(0.9, 1.1), v.x(), v.y(), between(0.9, 1.1)};
    };
    const double w = between(2.5, 4.0), sign = i % 2 == 0 ? 1.0 : -1.0;
    const bool any = closeness_of(GetParam().kind).one_sided;
    const auto l = fast(sign * w), r = fast(sign * (any ? between(2.5, 4.0) : w));
    const auto upwind = physical_flux(sign > 0.0 ? l : r, n, gamma);
    const auto f = flux(l, r, n);
    for (std::size_t k = 0; k < 4; ++k)
      EXPECT_NEAR(f[k], upwind[k], 1e-13 * n.norm() * 100.0) << "equation " << k;
  }
}

// At equal states the derivatives with respect to both sides add up to that of the physical flux,
// written out here: m = rho w, F = (m, m u + p nx, m v + p ny, w (g/(g-1) p + rho (u^2+v^2)/2)).
TEST_P(FluxOf, DerivativesAddUpToThePhysicalOnes) {
  dice().seed(8);
  for (int i = 0; i < 100; ++i) {
    const auto q = any_state();
    const auto n = any_normal();
    const double u = q[1], v = q[2], w = u * n.x() + v * n.y(), rho = q[0];
    const double kinetic = 0.5 * (u * u + v * v), h = gamma / (gamma - 1.0) * q[3] + rho * kinetic;
    const double exact[4][4] = {
        {w, rho * n.x(), rho * n.y(), 0.0},
        {w * u, rho * (w + u * n.x()), rho * u * n.y(), n.x()},
        {w * v, rho * v * n.x(), rho * (w + v * n.y()), n.y()},
        {w * kinetic, h * n.x() + w * rho * u, h * n.y() + w * rho * v, w * gamma / (gamma - 1.0)}};
    State<Dual<4>> both;
    for (std::size_t k = 0; k < 4; ++k) both[k] = Dual<4>::seeded(q[k], static_cast<int>(k));
    const auto f = numerical_flux(GetParam().kind, both, both, n, gamma);
    for (std::size_t row = 0; row < 4; ++row)
      for (std::size_t col = 0; col < 4; ++col)
        EXPECT_NEAR(f[row].derivative[col], exact[row][col], 1e-11) << row << " " << col;
  }
}

// Of unequal states the chain rule is checked against central differences, good to about 1e-8.
TEST_P(FluxOf, DerivativesOfUnequalStates) {
  dice().seed(9);
  for (int i = 0; i < 50; ++i) {
    const Values l{1.0, between(0.3, 0.6), between(-0.5, 0.5), 1.0};
    const Values r{between(1.1, 1.4), between(0.3, 0.6), between(-0.5, 0.5), between(1.1, 1.4)};
    const Point n(0.9, between(-0.2, 0.2));
    State<Dual<8>> dl, dr;
    for (std::size_t k = 0; k < 4; ++k) {
      dl[k] = Dual<8>::seeded(l[k], static_cast<int>(k));
      dr[k] = Dual<8>::seeded(r[k], static_cast<int>(k) + 4);
    }
    const auto f = numerical_flux(GetParam().kind, dl, dr, n, gamma);
    for (std::size_t seed = 0; seed < 8; ++seed) {
      Values lp = l, lm = l, rp = r, rm = r;
      const double step = 1e-5;
      (seed < 4 ? lp[seed] : rp[seed - 4]) += step;
      (seed < 4 ? lm[seed] : rm[seed - 4]) -= step;
      const auto fp = flux(lp, rp, n), fm = flux(lm, rm, n);
      for (std::size_t k = 0; k < 4; ++k)
        EXPECT_NEAR(f[k].derivative[seed], (fp[k] - fm[k]) / (2.0 * step), 1e-7)
            << "equation " << k << " seed " << seed;
    }
  }
}

INSTANTIATE_TEST_SUITE_P(Rows, FluxOf, testing::ValuesIn(flux_methods),
                         [](const auto& info) { return std::string(info.param.name); });

TEST(FluxMethods, EveryRowIsNamedDescribedAndCited) {
  std::set<std::string_view> names;
  std::set<FluxKind> kinds;
  for (const auto& row : flux_methods) {
    EXPECT_FALSE(row.name.empty());
    EXPECT_FALSE(row.description.empty()) << row.name;
    EXPECT_TRUE(std::regex_search(std::string(row.citation), std::regex(R"(\((19|20)\d\d\))")))
        << row.name;
    EXPECT_TRUE(names.insert(row.name).second) << row.name;
    EXPECT_TRUE(kinds.insert(row.kind).second) << row.name;
  }
}

}  // namespace
}  // namespace falcate::solver
