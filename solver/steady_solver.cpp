#include "solver/steady_solver.h"

#include <algorithm>
#include <chrono>
#include <cmath>

#include "solver/gmres.h"
#include "solver/newton_preconditioner.h"

namespace falcate::solver {
namespace {

using Cells = std::vector<State<double>>;

constexpr double least_cfl = 1e-2, greatest_cfl = 1e12;
/// Planes follow the flow until the residual has fallen this far; then they stand still, so that
/// Newton's method sees one fixed problem.
constexpr double planes_settled = 1e-3;

/// How a march goes about its steps. Bold lets shocks move, which raises the residual for a while,
/// and mostly arrives sooner; where it has not arrived after its steps, cautious starts again.
struct Manner {
  double largest_change;  ///< relative, of density or pressure, in one step
  double growth_allowed;  ///< of the residual in one step
};
constexpr Manner bold{0.3, 1.2}, cautious{0.4, 1.05};
constexpr int bold_steps = 50;
/// A bold march whose residual has fallen this far goes on beyond its steps.
constexpr double way_under = 0.03;
/// Of the averaging time asked for: an average over less says nothing.
constexpr double least_time_averaged = 0.25;

/// Of density and pressure, the gas at rest being 1: no cell falls below the first; changes of a
/// cell below the second do not shorten a step; a step may bring a cell to twice its own and this.
constexpr double all_but_empty = 1e-6, thin = 1e-2, much = 0.05;

/// Each linear system is solved until |A dq + R| <= linear_tolerance |R|. More would be lost: what
/// the state is away from the linear model is mostly larger.
constexpr double linear_tolerance = 0.1;
constexpr int krylov_space = 60;

double norm(const Cells& residual) {
  double sum = 0.0;
  for (const auto& r : residual)
    for (const double v : r) sum += v * v;
  return std::sqrt(sum);
}

/// -R / |R|, in the range of single precision however small R is.
SingleVector right_hand_side(const Cells& residual, double size) {
  SingleVector b(4 * static_cast<Eigen::Index>(residual.size()));
  for (std::size_t i = 0; i < residual.size(); ++i)
    for (std::size_t k = 0; k < 4; ++k)
      b(static_cast<Eigen::Index>(4 * i + k)) = static_cast<float>(-residual[i][k] / size);
  return b;
}

/// One pseudo-transient march: the state it works on and the parts of a step.
class March {
 public:
  March(const FlowProblem& problem, const SteadyOptions& options)
      : problem_(scale(problem)),
        options_(options),
        residual_(problem_, options.scheme),
        matrix_(residual_),
        preconditioner_(matrix_, {.level_of_fill = options.level_of_fill}),
        gmres_(4 * static_cast<Eigen::Index>(residual_.mesh().cell_count()), krylov_space) {
    begin(problem, {}, bold);
    reference_ = size_;
  }

  /// From given states, or as first guessed where there are none.
  void begin(const FlowProblem& problem, const std::vector<Primitive>& start,
             const Manner& manner) {
    if (start.empty())
      cells_ = cold_start(problem, problem_);
    else
      std::transform(start.begin(), start.end(), cells_.begin(),
                     [&](const Primitive& q) { return problem_.units.scaled(q); });
    manner_ = manner;
    cfl_ = options_.initial_cfl;
    refresh_planes(problem_, cells_);
    evaluate();
  }

  double drop() const { return size_ / reference_; }
  bool converged() const { return size_ <= options_.residual_drop * reference_; }
  bool exhausted() const { return cfl_ < least_cfl; }

  ConvergencePoint step(int number) {
    if (drop() > planes_settled) {
      refresh_planes(problem_, cells_);
      evaluate();
    }
    linearise();
    add_pseudo_time();
    const SingleVector change = solve_linear();
    advance(change);
    return {number, drop(), cfl_, linear_.iterations};
  }

  bool finite() const { return std::isfinite(size_); }

  /// One step of true time by linearised implicit Euler, (V M / dt + dR/dq) dq = -R, shorter where
  /// a cell would change too much.
  ConvergencePoint time_step(int number, double longest) {
    follow_planes();
    evaluate();
    linearise();
    time_step_ = std::min(longest, time_step_ > 0.0 ? 2.0 * time_step_ : longest);
    add_time(1.0 / time_step_);
    SingleVector change = solve_linear();
    for (int cut = 0; cut < 3 && !(change.allFinite() && allowed_part(change) > 0.99); ++cut) {
      add_time(3.0 / time_step_);
      time_step_ *= 0.25;
      change = solve_linear();
    }
    if (change.allFinite()) move(Cells(cells_), 1.0, change);
    return {number, drop(), cfl_, linear_.iterations};
  }

  /// Length of the last step of true time.
  double last_time_step() const { return time_step_; }

  /// A fiftieth of the time the reference speed needs from plane to plane.
  double time_step_length() const {
    double first = 1e300, last = -1e300;
    for (const auto& node : residual_.mesh().nodes()) {
      first = std::min(first, node.x());
      last = std::max(last, node.x());
    }
    return 0.02 * (last - first) / problem_.reference_speed;
  }

  FlowSolution solution() const {
    FlowSolution out;
    for (const auto& q : cells_) out.cells.push_back(problem_.units.physical(q));
    for (auto f = static_cast<std::size_t>(residual_.mesh().interior_face_count());
         f < fluxes_.size(); ++f)
      out.boundary.push_back(problem_.units.physical_flux(fluxes_[f]));
    out.summary.residual_drop = drop();
    out.summary.krylov_iterations = krylov_;
    out.summary.residual_evaluations = evaluations_;
    return out;
  }

 private:
  /// A part of the change, and the residual there.
  void move(const Cells& from, double part, const SingleVector& change) {
    for (std::size_t i = 0; i < cells_.size(); ++i)
      for (std::size_t k = 0; k < 4; ++k) {
        const double step =
            part * static_cast<double>(change(static_cast<Eigen::Index>(4 * i + k)));
        cells_[i][k] = k == density || k == pressure ? moved_quantity(from[i][k], step)
                                                     : moved_velocity(from[i][k] + step);
      }
    evaluate();
  }

  /// The mean states on the planes follow an unsteady flow slowly: they are those of its average.
  void follow_planes() { refresh_planes(problem_, cells_, 0.1); }

  /// Density and pressure stay those of a gas: cells all but empty hold up neither the others nor
  /// the whole march, and none takes in more than it can.
  static double moved_quantity(double from, double step) {
    return std::clamp(positive_step(from, step), all_but_empty, 2.0 * from + much);
  }
  double moved_velocity(double velocity) const {
    const double greatest = 1.2 * std::sqrt(2.0 * problem_.gamma / (problem_.gamma - 1.0));
    return std::clamp(velocity, -greatest, greatest);
  }

  void evaluate() {
    sums_.resize(cells_.size());
    residual_.evaluate<double>(cells_, fluxes_, sums_);
    size_ = norm(sums_);
    ++evaluations_;
  }

  void linearise() {
    matrix_.assemble(cells_);
    evaluations_ += 2;
  }

  /// V M / dt on the diagonal; V / dt = (sum of face wave speeds) / CFL.
  void add_pseudo_time() {
    auto rates = residual_.spectral_sums(cells_);
    for (double& rate : rates) rate /= cfl_;
    matrix_.add_rates(rates);
  }

  /// V M / dt on the diagonal.
  void add_time(double rate) {
    std::vector<double> rates = residual_.mesh().areas();
    for (double& value : rates) value *= rate;
    matrix_.add_rates(rates);
  }

  SingleVector solve_linear() {
    preconditioner_.factor();
    SingleVector change = SingleVector::Zero(4 * static_cast<Eigen::Index>(cells_.size()));
    linear_ =
        gmres_.solve([&](const SingleVector& x, SingleVector& y) { matrix_.multiply(x, y); },
                     [&](const SingleVector& x, SingleVector& y) { preconditioner_.solve(x, y); },
                     right_hand_side(sums_, size_), change, {linear_tolerance, 120});
    krylov_ += linear_.iterations;
    evaluations_ += 2 * linear_.iterations;
    return change * static_cast<float>(size_);
  }

  /// Largest part of the change that keeps density and pressure within the manner's limit.
  double allowed_part(const SingleVector& change) const {
    double part = 1.0;
    for (std::size_t i = 0; i < cells_.size(); ++i)
      for (const std::size_t k : {std::size_t{density}, std::size_t{pressure}}) {
        const double relative =
            std::abs(static_cast<double>(change(static_cast<Eigen::Index>(4 * i + k)))) /
            std::max(cells_[i][k], thin);
        if (relative * part > manner_.largest_change) part = manner_.largest_change / relative;
      }
    return part;
  }

  /// Takes as much of the change as lowers the pseudo-transient residual; sets the next CFL.
  void advance(const SingleVector& change) {
    const Cells before = cells_;
    const double size_before = size_;
    double part = change.allFinite() ? allowed_part(change) : 0.0;
    const bool whole = part > 0.99;
    for (int halving = 0; part > 1e-3 && halving < 6; ++halving, part *= 0.5) {
      move(before, part, change);
      if (std::isfinite(size_) && transient_size(before) <= manner_.growth_allowed * size_before) {
        const double fall = size_before / size_;
        const double growth = whole && halving == 0 ? std::clamp(fall, 2.0, 10.0)
                              : halving == 0        ? 1.2
                                                    : 0.7;
        cfl_ = std::min(cfl_ * growth * (linear_.converged ? 1.0 : 0.5), greatest_cfl);
        return;
      }
    }
    cells_ = before;
    evaluate();
    cfl_ *= 0.1;
  }

  /// |V/dt (U(q) - U(q_before)) + R(q)|: what a pseudo-time step is meant to bring to zero.
  double transient_size(const Cells& before) const {
    const auto speeds = residual_.spectral_sums(before);
    double sum = 0.0;
    for (std::size_t i = 0; i < cells_.size(); ++i) {
      const auto u = conserved(cells_[i], problem_.gamma),
                 old = conserved(before[i], problem_.gamma);
      for (std::size_t k = 0; k < 4; ++k) {
        const double r = speeds[i] / cfl_ * (u[k] - old[k]) + sums_[i][k];
        sum += r * r;
      }
    }
    return std::sqrt(sum);
  }

  ScaledProblem problem_;
  SteadyOptions options_;
  Residual residual_;
  NewtonMatrix matrix_;
  NewtonPreconditioner preconditioner_;
  Gmres gmres_;
  Cells cells_, sums_;
  std::vector<State<double>> fluxes_;
  GmresSummary linear_;
  Manner manner_ = bold;
  double time_step_ = 0.0;
  double cfl_ = 1.0, size_ = 0.0, reference_ = 1.0;
  long krylov_ = 0, evaluations_ = 0;
};

/// Running mean of a solution in time.
class TimeMean {
 public:
  /// `length` of the time step that ended in `now`.
  void add(const FlowSolution& now, bool second_half, double length) {
    if (sum_.cells.empty()) {
      sum_.cells.resize(now.cells.size());
      sum_.boundary.resize(now.boundary.size());
      sum_.halves.fill(sum_.boundary);
    }
    for (std::size_t i = 0; i < now.cells.size(); ++i) {
      sum_.cells[i].density += length * now.cells[i].density;
      sum_.cells[i].u += length * now.cells[i].u;
      sum_.cells[i].v += length * now.cells[i].v;
      sum_.cells[i].pressure += length * now.cells[i].pressure;
    }
    const std::size_t half = second_half ? 1 : 0;
    for (std::size_t i = 0; i < now.boundary.size(); ++i)
      add_scaled(sum_.halves[half][i], now.boundary[i], length);
    lengths_[half] += length;
  }

  double length() const { return lengths_[0] + lengths_[1]; }

  FlowSolution mean() const {
    FlowSolution out = sum_;
    const double share = 1.0 / length();
    for (Primitive& q : out.cells)
      q = {q.density * share, q.u * share, q.v * share, q.pressure * share};
    for (std::size_t half = 0; half < 2; ++half)
      for (std::size_t i = 0; i < out.boundary.size(); ++i) {
        const BoundaryFlux sum = sum_.halves[half][i];
        out.halves[half][i] = {};
        add_scaled(out.halves[half][i], sum, 1.0 / lengths_[half]);
        add_scaled(out.boundary[i], sum, share);
      }
    return out;
  }

 private:
  static void add_scaled(BoundaryFlux& to, const BoundaryFlux& f, double factor) {
    to.mass += factor * f.mass;
    to.momentum_x += factor * f.momentum_x;
    to.momentum_y += factor * f.momentum_y;
    to.energy += factor * f.energy;
  }
  FlowSolution sum_;
  std::array<double, 2> lengths_{};
};

}  // namespace

FlowSolution solve_steady(const FlowProblem& problem, const SteadyOptions& options,
                          const std::vector<Primitive>& start, const Observer& observer) {
  const auto began = std::chrono::steady_clock::now();
  March march(problem, options);
  std::vector<ConvergencePoint> history;
  int step = 0;
  const auto go_on = [&](const Manner& manner, int patience) {
    march.begin(problem, start, manner);
    const double under_way = way_under * march.drop();
    const int first = step;
    while (!march.converged() && step < options.max_steps && !march.exhausted() &&
           (step < first + patience || march.drop() < under_way)) {
      history.push_back(march.step(++step));
      if (observer) observer(history.back());
    }
  };
  go_on(bold, bold_steps);
  if (!march.converged()) go_on(cautious, options.max_steps);
  const bool steady = march.converged(), stuck = march.exhausted();
  TimeMean mean;
  const int half = options.averaging_steps / 2;
  int averaged = 0;
  if (!steady && half > 0) {
    march.begin(problem, start, cautious);
    for (int n = 0; n < 3 * half && march.finite(); ++n) {
      history.push_back(march.time_step(++step, march.time_step_length()));
      if (observer) observer(history.back());
      if (n >= half && march.finite())
        mean.add(march.solution(), averaged++ >= half, march.last_time_step());
    }
  }
  const bool whole = averaged > 0 && averaged == 2 * half;
  const bool mean_stands =
      whole && mean.length() >= least_time_averaged * averaged * march.time_step_length();
  FlowSolution solution = mean_stands ? mean.mean() : march.solution();
  SteadySummary& summary = solution.summary;
  summary = march.solution().summary;
  summary.history = std::move(history);
  summary.newton_steps = step;
  summary.status = steady        ? SolutionStatus::steady
                   : mean_stands ? SolutionStatus::averaged
                                 : SolutionStatus::failed;
  summary.reason = steady        ? "residual at its target"
                   : mean_stands ? "no steady flow found; averaged over time"
                   : whole       ? "its time steps had to be too short to average over"
                   : stuck       ? "no step lowers the residual any more"
                                 : "step limit reached before the residual target";
  summary.seconds = std::chrono::duration<double>(std::chrono::steady_clock::now() - began).count();
  return solution;
}

std::vector<Primitive> prolong(const std::vector<Primitive>& cells, const mesh::PassageMesh& coarse,
                               const mesh::PassageMesh& fine, const std::vector<int>& parent) {
  if (cells.empty()) return {};
  const GradientStencil stencil(coarse);
  const auto carried = [&](int to) {
    const int from = parent[static_cast<std::size_t>(to)];
    const Primitive& own = cells[static_cast<std::size_t>(from)];
    const mesh::Point way = fine.centroids()[static_cast<std::size_t>(to)] -
                            coarse.centroids()[static_cast<std::size_t>(from)];
    Primitive q = own;
    for (const auto& neighbour : stencil.of(from)) {
      const Primitive& other = cells[static_cast<std::size_t>(neighbour.cell)];
      const double share = neighbour.weight.dot(way);
      q.density += share * (other.density - own.density);
      q.u += share * (other.u - own.u);
      q.v += share * (other.v - own.v);
      q.pressure += share * (other.pressure - own.pressure);
    }
    const bool mild = std::abs(q.density - own.density) <= 0.5 * own.density &&
                      std::abs(q.pressure - own.pressure) <= 0.5 * own.pressure;
    return mild ? q : own;
  };
  std::vector<Primitive> out;
  out.reserve(parent.size());
  for (int cell = 0; cell < fine.cell_count(); ++cell) out.push_back(carried(cell));
  return out;
}

}  // namespace falcate::solver
