#include "tests/validation/exact_channels.h"

#include <fmt/format.h>

#include <array>
#include <cmath>
#include <numbers>
#include <stdexcept>

#include "mesh/structured.h"
#include "solver/steady_solver.h"
#include "tests/verification/exact_flow.h"
#include "tests/verification/shock_behind_wave.h"

namespace falcate::validation {
namespace {

using mesh::PatchKind;
using mesh::Point;
using verification::behind_shock;
using verification::BehindShock;
using verification::wave_angle;

constexpr double gamma = 1.4, degree = std::numbers::pi / 180.0;

/// What one mesh of a flow between walls is made of. Density and speed of sound at rest are 1.
struct Channel {
  std::function<Point(double, double)> map;
  std::array<PatchKind, 4> sides;
  int ni = 1, nj = 1;  ///< of the coarsest mesh
  mesh::CellKind cells = mesh::CellKind::quads;
  std::function<solver::Primitive(const Point&)> exact, prescribed;
  double mach = 1.0, exit_pressure = 0.5 / gamma;  ///< of a stream that enters along x
};

struct Solved {
  mesh::PassageMesh mesh;
  solver::FlowSolution solution;
};

Solved solved(const Channel& channel, int level) {
  const int n = 1 << level;
  Solved s{mesh::PassageMesh::build(mesh::structured(channel.ni * n, channel.nj * n, channel.cells,
                                                     channel.map, channel.sides)),
           {}};
  solver::FlowProblem problem;
  problem.mesh = &s.mesh;
  problem.gas = {gamma, 1.0};
  problem.inlet = {1.0 / gamma, 1.0 / gamma, std::acos(0.0), channel.mach};
  problem.exit_pressure = channel.exit_pressure;
  problem.prescribed = channel.prescribed;
  std::vector<solver::Primitive> start;
  for (const Point& x : s.mesh.centroids()) start.push_back(channel.exact(x));
  s.solution = solver::solve_steady(problem, {}, start);
  if (s.solution.summary.status == solver::SolutionStatus::failed)
    throw std::runtime_error(s.solution.summary.reason);
  return s;
}

/// Sum of the fluxes through the boundary faces of these kinds whose middle is `inside`.
solver::BoundaryFlux flux_through(const Solved& s, const std::vector<solver::BoundaryFlux>& fluxes,
                                  PatchKind kind, const std::function<bool(const Point&)>& inside) {
  solver::BoundaryFlux sum;
  for (const auto& patch : s.mesh.patches()) {
    if (patch.kind != kind) continue;
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f) {
      if (!inside(s.mesh.faces()[static_cast<std::size_t>(f)].midpoint)) continue;
      const auto& flux = fluxes[static_cast<std::size_t>(f - s.mesh.interior_face_count())];
      sum.mass += flux.mass;
      sum.momentum_x += flux.momentum_x;
      sum.momentum_y += flux.momentum_y;
    }
  }
  return sum;
}

/// A flux that is compared with its exact value.
struct FluxFigure {
  const char* words;
  PatchKind kind;
  std::function<bool(const Point&)> inside;
  double solver::BoundaryFlux::*part;
  double exact;
};

Condition compared(const Channel& channel, const std::vector<FluxFigure>& figures,
                   std::string words) {
  Condition condition;
  condition.words = std::move(words);
  for (const auto& figure : figures)
    condition.findings.push_back({figure.words, "", figure.exact, {}, 0.0});
  for (int level = 0; level < 3; ++level) {
    const Solved s = solved(channel, level);
    const bool steady = s.solution.summary.status == solver::SolutionStatus::steady;
    condition.steady = condition.steady && steady;
    for (std::size_t i = 0; i < figures.size(); ++i) {
      const auto& f = figures[i];
      const auto value = [&](const std::vector<solver::BoundaryFlux>& fluxes) {
        return flux_through(s, fluxes, f.kind, f.inside).*f.part;
      };
      condition.findings[i].found.push_back(value(s.solution.boundary));
      condition.findings[i].spread =
          steady ? 0.0 : std::abs(value(s.solution.halves[1]) - value(s.solution.halves[0]));
    }
  }
  return condition;
}

/// Sum over 0..1 by Gauss's rule of three points in many steps.
double integral(const std::function<double(double)>& f) {
  constexpr int steps = 400;
  const double reach = std::sqrt(0.6) / 2.0;
  double sum = 0.0;
  for (int i = 0; i < steps; ++i) {
    const auto at = [&](double x) { return f((i + x) / steps); };
    sum += (5.0 * at(0.5 - reach) + 8.0 * at(0.5) + 5.0 * at(0.5 + reach)) / 18.0;
  }
  return sum / steps;
}

const char* cell_words(mesh::CellKind kind) {
  switch (kind) {
    case mesh::CellKind::quads:
      return "quadrilaterals";
    case mesh::CellKind::triangles:
      return "triangles";
    case mesh::CellKind::mixed:
      return "both kinds of cells";
  }
  return "";
}

struct CurvedCondition {
  mesh::CellKind cells;
  int across;  ///< of the coarsest mesh
  double mach;
};
using enum mesh::CellKind;
const std::array<CurvedCondition, 10> curved_conditions = {{{quads, 4, 2.25},
                                                            {quads, 6, 1.8},
                                                            {quads, 8, 2.25},
                                                            {quads, 10, 2.6},
                                                            {quads, 12, 3.0},
                                                            {triangles, 5, 2.25},
                                                            {triangles, 8, 2.0},
                                                            {mixed, 4, 2.4},
                                                            {mixed, 6, 2.25},
                                                            {mixed, 10, 2.8}}};

// Shock-free vortex between circular walls, a quarter turn.
struct Vortex {
  static constexpr double inner = 1.0, outer = 1.384;
  double mach;

  /// Clockwise, at a distance r from the axis.
  double speed(double r) const {
    return mach / std::sqrt(1.0 + 0.5 * (gamma - 1.0) * mach * mach) * inner / r;
  }
  solver::Primitive at(const Point& x) const {
    const double r = x.norm(), w = speed(r), a2 = 1.0 - 0.5 * (gamma - 1.0) * w * w;
    const double rho = std::pow(a2, 1.0 / (gamma - 1.0));
    return {rho, w * x.y() / r, -w * x.x() / r, rho * a2 / gamma};
  }
};

Condition vortex_condition(const CurvedCondition& c) {
  const Vortex vortex{c.mach};
  constexpr double inner = Vortex::inner, gap = Vortex::outer - inner;
  Channel channel;
  channel.map = [=](double xi, double eta) {
    const double r = inner + gap * eta, angle = std::acos(0.0) * (1.0 - xi);
    return Point(r * std::cos(angle), r * std::sin(angle));
  };
  channel.sides = {PatchKind::wall, PatchKind::prescribed, PatchKind::wall, PatchKind::prescribed};
  channel.ni = 4 * c.across;
  channel.nj = c.across;
  channel.cells = c.cells;
  channel.exact = channel.prescribed = [=](const Point& x) { return vortex.at(x); };
  const auto at_exit = [=](double eta) { return vortex.at({inner + gap * eta, 0.0}); };
  const double flow =
      gap * integral([=](double eta) { return -at_exit(eta).density * at_exit(eta).v; });
  const double momentum = -gap * integral([=](double eta) {
    const auto q = at_exit(eta);
    return q.pressure + q.density * q.v * q.v;
  });
  // Uniform pressure over a quarter circle pushes by pressure times radius both ways.
  const double in = -inner * vortex.at({inner, 0.0}).pressure;
  const double out = Vortex::outer * vortex.at({Vortex::outer, 0.0}).pressure;
  const auto on_inner = [](const Point& x) { return x.norm() < inner + 0.5 * gap; };
  const auto on_outer = [](const Point& x) { return x.norm() > inner + 0.5 * gap; };
  const auto leaving = [](const Point& x) { return x.y() < x.x(); };
  using F = solver::BoundaryFlux;
  return compared(
      channel,
      {{"force on the inner wall, x", PatchKind::wall, on_inner, &F::momentum_x, in},
       {"force on the inner wall, y", PatchKind::wall, on_inner, &F::momentum_y, in},
       {"force on the outer wall, x", PatchKind::wall, on_outer, &F::momentum_x, out},
       {"force on the outer wall, y", PatchKind::wall, on_outer, &F::momentum_y, out},
       {"mass flow", PatchKind::prescribed, leaving, &F::mass, flow},
       {"momentum of the outflow", PatchKind::prescribed, leaving, &F::momentum_y, momentum}},
      fmt::format("{} {} across, Mach {} at the inner wall", 4 * c.across, cell_words(c.cells),
                  c.mach));
}

// Ringleb's flow between two of its streamlines k; speed q, angle of the stream asin(q/k).
solver::Primitive ringleb(const Point& x) {
  return verification::exact_flow("ringleb_transonic").exact(x);
}

struct RinglebRange {
  double inner, outer, top;  ///< k of the walls, speed at the entry
  double end;                ///< part of the way from entry to exit: 0.5 is the axis of symmetry
};

struct RinglebCondition {
  mesh::CellKind cells;
  int across;
  double inner, outer;
};
const std::array<RinglebCondition, 10> transonic_conditions = {{{quads, 4, 1.2, 0.7},
                                                                {quads, 6, 1.15, 0.7},
                                                                {quads, 8, 1.2, 0.7},
                                                                {quads, 10, 1.1, 0.65},
                                                                {quads, 12, 1.25, 0.75},
                                                                {triangles, 5, 1.2, 0.7},
                                                                {triangles, 8, 1.1, 0.7},
                                                                {mixed, 4, 1.15, 0.7},
                                                                {mixed, 6, 1.2, 0.7},
                                                                {mixed, 10, 1.2, 0.65}}};
const std::array<RinglebCondition, 10> subsonic_conditions = {{{quads, 4, 0.6, 0.4},
                                                               {quads, 6, 0.65, 0.45},
                                                               {quads, 8, 0.6, 0.4},
                                                               {quads, 10, 0.7, 0.5},
                                                               {quads, 12, 0.55, 0.4},
                                                               {triangles, 5, 0.6, 0.4},
                                                               {triangles, 8, 0.65, 0.4},
                                                               {mixed, 4, 0.65, 0.45},
                                                               {mixed, 6, 0.6, 0.4},
                                                               {mixed, 10, 0.7, 0.45}}};

Point ringleb_map(const RinglebRange& range, double xi, double eta) {
  const double k = range.inner + (range.outer - range.inner) * eta;
  const double start = std::asin(range.top / k), way = range.end * xi;
  const double angle = start + (std::acos(-1.0) - 2.0 * start) * way;
  return verification::ringleb_point(k, k * std::sin(angle), way <= 0.5 ? 1.0 : -1.0);
}

/// Force of the exact flow on a wall: pressure times the normal out of the gas, along the wall.
Point wall_force(const RinglebRange& range, double eta) {
  const auto part = [&](int component) {
    return integral([&, component](double xi) {
      constexpr double step = 1e-5;
      const double a = std::max(0.0, xi - step), b = std::min(1.0, xi + step);
      const Point tangent = (ringleb_map(range, b, eta) - ringleb_map(range, a, eta)) / (b - a);
      // South (eta 0): the outward normal is to the right of the way; north: to the left.
      const double side = eta < 0.5 ? 1.0 : -1.0;
      const Point normal(side * tangent.y(), -side * tangent.x());
      return ringleb(ringleb_map(range, xi, eta)).pressure * normal[component];
    });
  };
  return {part(0), part(1)};
}

Condition ringleb_condition(const RinglebCondition& c, double top, double end) {
  const RinglebRange range{c.inner, c.outer, top, end};
  Channel channel;
  channel.map = [=](double xi, double eta) { return ringleb_map(range, xi, eta); };
  channel.sides = {PatchKind::wall, PatchKind::prescribed, PatchKind::wall, PatchKind::prescribed};
  channel.ni = 4 * c.across;
  channel.nj = c.across;
  channel.cells = c.cells;
  channel.exact = channel.prescribed = ringleb;
  const Point inner = wall_force(range, 0.0), outer = wall_force(range, 1.0);
  const double middle = 0.5 * (c.inner + c.outer);
  const auto streamline = [](const Point& x) {
    const auto q = ringleb(x);
    const double speed = std::hypot(q.u, q.v);
    return speed / std::max(1e-9, std::abs(q.v) / speed);
  };
  const auto on_inner = [=](const Point& x) { return streamline(x) > middle; };
  const auto on_outer = [=](const Point& x) { return streamline(x) <= middle; };
  using F = solver::BoundaryFlux;
  return compared(
      channel,
      {{"force on the inner wall, x", PatchKind::wall, on_inner, &F::momentum_x, inner.x()},
       {"force on the inner wall, y", PatchKind::wall, on_inner, &F::momentum_y, inner.y()},
       {"force on the outer wall, x", PatchKind::wall, on_outer, &F::momentum_x, outer.x()},
       {"force on the outer wall, y", PatchKind::wall, on_outer, &F::momentum_y, outer.y()}},
      fmt::format("{} {} across, streamlines {} and {}", 4 * c.across, cell_words(c.cells), c.inner,
                  c.outer));
}

// A shock that meets a wall and is reflected.
struct Reflection {
  double mach, wave;  ///< of the stream; of the first shock, rad
  BehindShock first = behind_shock(mach, wave);
  double second_wave = wave_angle(first.mach, first.turning);
  BehindShock second = behind_shock(first.mach, second_wave);

  double slope() const { return std::tan(second_wave - first.turning); }  ///< of the second shock
  double foot() const { return 1.0 / std::tan(wave); }
  double length() const { return foot() + 0.9 / slope(); }

  solver::Primitive state(double m, double angle, double pressure, double density) const {
    const double t = 1.0 / (1.0 + 0.2 * mach * mach), rho1 = std::pow(t, 2.5);
    const double p = rho1 * t / gamma * pressure, rho = rho1 * density;
    const double w = m * std::sqrt(gamma * p / rho);
    return {rho, w * std::cos(angle), -w * std::sin(angle), p};
  }
  solver::Primitive stream() const { return state(mach, 0.0, 1.0, 1.0); }
  solver::Primitive behind_first() const {
    return state(first.mach, first.turning, first.pressure_ratio, first.density_ratio);
  }
  solver::Primitive behind_second() const {
    return state(second.mach, 0.0, first.pressure_ratio * second.pressure_ratio,
                 first.density_ratio * second.density_ratio);
  }
  solver::Primitive at(const Point& x) const {
    if (x.y() < 1.0 - std::tan(wave) * x.x()) return stream();
    return x.y() < slope() * (x.x() - foot()) ? behind_second() : behind_first();
  }
};

struct ReflectionCondition {
  int across;
  double mach, wave_deg;
};
const std::array<ReflectionCondition, 10> reflection_conditions = {{{8, 2.9, 29.0},
                                                                    {9, 2.5, 30.0},
                                                                    {10, 2.9, 29.0},
                                                                    {11, 3.2, 27.0},
                                                                    {12, 2.2, 33.0},
                                                                    {13, 3.5, 26.0},
                                                                    {14, 2.7, 30.0},
                                                                    {15, 2.4, 32.0},
                                                                    {16, 2.9, 29.0},
                                                                    {20, 3.0, 28.0}}};

Condition reflection_condition(const ReflectionCondition& c) {
  const Reflection r{c.mach, c.wave_deg * degree};
  Channel channel;
  channel.map = [=](double xi, double eta) { return Point(r.length() * xi, eta); };
  channel.sides = {PatchKind::wall, PatchKind::outlet, PatchKind::prescribed,
                   PatchKind::prescribed};
  channel.nj = c.across;
  channel.ni = static_cast<int>(std::lround(r.length() * c.across));
  channel.exact = [=](const Point& x) { return r.at(x); };
  channel.prescribed = [=](const Point& x) {
    return x.y() > 1.0 - 1e-9 ? r.behind_first() : r.stream();
  };
  channel.mach = c.mach;
  channel.exit_pressure = r.stream().pressure;
  const auto everywhere = [](const Point&) { return true; };
  const auto first = r.behind_first(), second = r.behind_second();
  const auto at_exit = [&](double (*flux)(const solver::Primitive&)) {
    return 0.9 * flux(second) + 0.1 * flux(first);
  };
  const double force =
      -(r.foot() * r.stream().pressure + (r.length() - r.foot()) * second.pressure);
  using F = solver::BoundaryFlux;
  return compared(
      channel,
      {{"force on the wall", PatchKind::wall, everywhere, &F::momentum_y, force},
       {"mass flow", PatchKind::outlet, everywhere, &F::mass,
        at_exit([](const solver::Primitive& q) { return q.density * q.u; })},
       {"axial momentum of the outflow", PatchKind::outlet, everywhere, &F::momentum_x,
        at_exit([](const solver::Primitive& q) { return q.pressure + q.density * q.u * q.u; })},
       {"momentum of the outflow across", PatchKind::outlet, everywhere, &F::momentum_y,
        at_exit([](const solver::Primitive& q) { return q.density * q.u * q.v; })}},
      fmt::format("{} cells across, Mach {}, shock at {} deg", 4 * c.across, c.mach, c.wave_deg));
}

template <class Conditions, class Solve>
ExactCase exact_case(const char* name, const char* words, const char* source,
                     const Conditions& conditions, const Solve& solve) {
  return {name, words, source, static_cast<int>(conditions.size()),
          [&conditions, solve](int i) { return solve(conditions[static_cast<std::size_t>(i)]); }};
}

}  // namespace

std::vector<ExactCase> exact_channel_cases() {
  return {exact_case("V", "supersonic vortex between circular walls",
                     "Aftosmis, Gaitonde, Tavares, AIAA 94-0415, 1994", curved_conditions,
                     vortex_condition),
          exact_case("R1", "Ringleb's flow through Mach 1", "Ringleb, ZAMM 20, 1940, 185-198",
                     transonic_conditions,
                     [](const RinglebCondition& c) { return ringleb_condition(c, 0.5, 0.5); }),
          exact_case("R2", "Ringleb's flow below Mach 1", "Ringleb, ZAMM 20, 1940, 185-198",
                     subsonic_conditions,
                     [](const RinglebCondition& c) { return ringleb_condition(c, 0.35, 1.0); }),
          exact_case("O", "shock reflected at a wall", "NACA Report 1135, 1953, eqs. 128 to 139",
                     reflection_conditions, reflection_condition)};
}

}  // namespace falcate::validation
