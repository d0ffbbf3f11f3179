#include "solver/newton_preconditioner.h"

namespace falcate::solver {
namespace {

constexpr float share_of_wide = 0.5f;

}  // namespace

NewtonPreconditioner::NewtonPreconditioner(const NewtonMatrix& matrix,
                                           const MultigridOptions& options)
    : matrix_(matrix),
      joined_(matrix.compact()),
      coarse_(joined_.coarse_pattern(matrix.compact())),
      multigrid_(coarse_, options),
      smoother_(matrix.wide(), 0, options.rows_a_run) {}

void NewtonPreconditioner::factor() {
  joined_.sum(matrix_.compact(), coarse_);
  multigrid_.factor();
  const WeightedMatrix mean[] = {{&matrix_.wide(), share_of_wide},
                                 {&matrix_.compact(), 1.0f - share_of_wide}};
  smoother_.factor(mean);
}

void NewtonPreconditioner::solve(const SingleVector& b, SingleVector& x) const {
  joined_.restrict_to(b, coarse_rhs_);
  multigrid_.solve(coarse_rhs_, coarse_solution_);
  x.setZero(b.size());
  joined_.add_to(coarse_solution_, x);
  matrix_.compact().residual(b, x, rest_);
  smoother_.solve(rest_, change_);
  x += change_;
}

}  // namespace falcate::solver
