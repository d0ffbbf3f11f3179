/// What the solver returns, SI units: cell states and the fluxes through every boundary face.
#pragma once
#include <array>
#include <string>
#include <vector>

namespace falcate::solver {

struct Primitive {
  double density = 0.0;   ///< kg/m3
  double u = 0.0;         ///< m/s, axial
  double v = 0.0;         ///< m/s, tangential
  double pressure = 0.0;  ///< Pa
};

/// Flux through a face, integrated over it, per metre of height, positive out of the domain:
/// mass kg/(s m), momentum x and y N/m, energy W/m. At a wall mass = energy = 0 and the momentum
/// flux is p n, which is also the force of the gas on that wall.
struct BoundaryFlux {
  double mass = 0.0, momentum_x = 0.0, momentum_y = 0.0, energy = 0.0;
};

enum class SolutionStatus { steady, averaged, failed };

struct ConvergencePoint {
  int step = 0;
  double residual = 0.0;  ///< L2 norm relative to the first
  double cfl = 0.0;
  int krylov_iterations = 0;
};

/// Options in, summary out: why the solve stopped, counts, time.
struct SteadySummary {
  SolutionStatus status = SolutionStatus::failed;
  std::string reason;          ///< plain words
  double residual_drop = 1.0;  ///< last / first residual norm
  int newton_steps = 0;
  long krylov_iterations = 0;
  long residual_evaluations = 0;  ///< Jacobian-vector products count as two
  double seconds = 0.0;
  std::vector<ConvergencePoint> history;
};

struct FlowSolution {
  std::vector<Primitive> cells;        ///< one a cell of the mesh
  std::vector<BoundaryFlux> boundary;  ///< one a boundary face, face interior_face_count() first
  /// Averaged flows only: the boundary fluxes of the first and second half of the averaging time;
  /// their difference tells how far the average can be trusted.
  std::array<std::vector<BoundaryFlux>, 2> halves;
  SteadySummary summary;
};

}  // namespace falcate::solver
