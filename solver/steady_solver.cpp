#include "solver/steady_solver.h"

#include <algorithm>
#include <chrono>
#include <cmath>

#include "solver/gmres.h"
#include "solver/incomplete_lu.h"
#include "solver/jacobian.h"

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
constexpr Manner bold{0.3, 2.0}, cautious{0.4, 1.05};
constexpr int bold_steps = 50;

double norm(const Cells& residual) {
  double sum = 0.0;
  for (const auto& r : residual)
    for (const double v : r) sum += v * v;
  return std::sqrt(sum);
}

Vector flattened(const Cells& cells) {
  Vector v(4 * static_cast<Eigen::Index>(cells.size()));
  for (std::size_t i = 0; i < cells.size(); ++i)
    for (std::size_t k = 0; k < 4; ++k) v(static_cast<Eigen::Index>(4 * i + k)) = cells[i][k];
  return v;
}

/// One pseudo-transient march: the state it works on and the parts of a step.
class March {
 public:
  March(const FlowProblem& problem, const SteadyOptions& options)
      : problem_(scale(problem)),
        options_(options),
        residual_(problem_, options.scheme),
        jacobian_(residual_),
        rough_(jacobian_.matrix()),
        preconditioner_(rough_, options.level_of_fill),
        cells_(cold_start(problem, problem_)),
        cfl_(options.initial_cfl) {
    refresh_planes(problem_, cells_);
    evaluate();
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
    jacobian_.assemble(cells_);
    jacobian_.assemble_blend(options_.preconditioner_order, rough_);
    evaluations_ += 2;
    add_pseudo_time(jacobian_.matrix());
    add_pseudo_time(rough_);
    const Vector change = solve_linear();
    advance(change);
    return {number, drop(), cfl_, linear_.iterations};
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
  void evaluate() {
    sums_.resize(cells_.size());
    residual_.evaluate<double>(cells_, fluxes_, sums_);
    size_ = norm(sums_);
    ++evaluations_;
  }

  /// V M / dt on the diagonal; V / dt = (sum of face wave speeds) / CFL.
  void add_pseudo_time(BlockMatrix& matrix) const {
    const auto speeds = residual_.spectral_sums(cells_);
    for (int i = 0; i < matrix.rows(); ++i) {
      const auto ui = static_cast<std::size_t>(i);
      const auto m = conserved_by_primitive(cells_[ui], problem_.gamma);
      matrix.block(matrix.diagonal(i)) += speeds[ui] / cfl_ * Eigen::Map<const Block>(m.data());
    }
  }

  Vector solve_linear() {
    preconditioner_.factor(rough_);
    Vector change = Vector::Zero(4 * static_cast<Eigen::Index>(cells_.size()));
    const double tolerance = std::clamp(0.1 * drop(), 1e-4, 1e-2);
    linear_ = gmres([&](const Vector& x, Vector& y) { jacobian_.matrix().multiply(x, y); },
                    [&](const Vector& x, Vector& y) { preconditioner_.solve(x, y); },
                    -flattened(sums_), change, {tolerance, 120, 60});
    krylov_ += linear_.iterations;
    evaluations_ += 2 * linear_.iterations;
    return change;
  }

  /// Largest part of the change that keeps density and pressure within the manner's limit.
  double allowed_part(const Vector& change) const {
    double part = 1.0;
    for (std::size_t i = 0; i < cells_.size(); ++i)
      for (const std::size_t k : {std::size_t{density}, std::size_t{pressure}}) {
        const double relative =
            std::abs(change(static_cast<Eigen::Index>(4 * i + k))) / cells_[i][k];
        if (relative * part > manner_.largest_change) part = manner_.largest_change / relative;
      }
    return part;
  }

  /// Takes as much of the change as lowers the pseudo-transient residual; sets the next CFL.
  void advance(const Vector& change) {
    const Cells before = cells_;
    const double size_before = size_;
    double part = change.allFinite() ? allowed_part(change) : 0.0;
    const bool whole = part > 0.99;
    for (int halving = 0; part > 1e-3 && halving < 6; ++halving, part *= 0.5) {
      for (std::size_t i = 0; i < cells_.size(); ++i)
        for (std::size_t k = 0; k < 4; ++k)
          cells_[i][k] = before[i][k] + part * change(static_cast<Eigen::Index>(4 * i + k));
      evaluate();
      if (std::isfinite(size_) && transient_size(before) <= manner_.growth_allowed * size_before) {
        const double fall = size_before / size_;
        const double growth = whole && halving == 0 ? std::clamp(fall, 1.5, 10.0)
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
  Jacobian jacobian_;
  BlockMatrix rough_;  ///< what the preconditioner factors
  IncompleteLu preconditioner_;
  Cells cells_, sums_;
  std::vector<State<double>> fluxes_;
  GmresSummary linear_;
  Manner manner_ = bold;
  double cfl_, size_ = 0.0, reference_ = 1.0;
  long krylov_ = 0, evaluations_ = 0;
};

}  // namespace

FlowSolution solve_steady(const FlowProblem& problem, const SteadyOptions& options,
                          const std::vector<Primitive>& start, const Observer& observer) {
  const auto began = std::chrono::steady_clock::now();
  March march(problem, options);
  std::vector<ConvergencePoint> history;
  int step = 0;
  const auto go_on = [&](const Manner& manner, int last_step) {
    march.begin(problem, start, manner);
    while (!march.converged() && step < last_step && !march.exhausted()) {
      history.push_back(march.step(++step));
      if (observer) observer(history.back());
    }
  };
  go_on(bold, std::min(bold_steps, options.max_steps));
  if (!march.converged() && step < options.max_steps) go_on(cautious, options.max_steps);
  FlowSolution solution = march.solution();
  SteadySummary& summary = solution.summary;
  summary.history = std::move(history);
  summary.newton_steps = step;
  summary.status = march.converged() ? SolutionStatus::steady : SolutionStatus::failed;
  summary.reason = march.converged()   ? "residual at its target"
                   : march.exhausted() ? "no step lowers the residual any more"
                                       : "step limit reached before the residual target";
  summary.seconds = std::chrono::duration<double>(std::chrono::steady_clock::now() - began).count();
  return solution;
}

std::vector<Primitive> prolong(const std::vector<Primitive>& coarse,
                               const std::vector<int>& parent) {
  std::vector<Primitive> fine;
  fine.reserve(parent.size());
  for (const int cell : parent) fine.push_back(coarse[static_cast<std::size_t>(cell)]);
  return fine;
}

}  // namespace falcate::solver
