/// Shock-free supersonic impulse rows, exact: a uniform stream, simple waves, a free vortex and
/// their mirror image; Mach 2 turned by 130 deg (S1) and Mach 2.5 by 140 deg (S3), no loss. The
/// blades' edges are cusps. Sources: the first line of each file; Boxer, Sterrett & Wlodarski, NACA
/// RM L52B06 (1952); Goldman & Scullin, NASA TN D-4421 (1968).
#pragma once
#include <string>
#include <vector>

#include "tests/validation/solved_passage.h"

namespace falcate::validation {

/// A row and what its figures keep on a mesh of so many cells.
struct ImpulseRow {
  const char* name;
  const char* file;
  double pitch;  ///< over width
  double mach, inlet_deg;
  int cells;
  double angle_deg, mach_share, loss;  ///< loss of total pressure over that of the inlet
  double between_kinks, at_kinks;      ///< of the wall's Mach number, as shares
};
const std::vector<ImpulseRow>& impulse_rows();

inline constexpr double impulse_width = 0.01;          ///< m
inline constexpr double impulse_total_pressure = 1e6;  ///< Pa

SolvedPassage solved(const ImpulseRow& row);

/// Exact Mach number along a side, and where its slope jumps; x over the width.
struct ExactSide {
  std::vector<double> x, mach, kinks;

  ExactSide(const ImpulseRow& row, const std::string& side);
  double at(double place) const;
  double from_kink(double place) const;  ///< distance to the nearest
};

/// Errors of the wall's Mach number as shares, 5 % of the width left out at the cusps.
struct SurfaceError {
  double worst = 0.0;
  double between_kinks = 0.0;  ///< the worst further than 0.03 widths from any kink
  double root_mean_square = 0.0;
};
SurfaceError surface_error(const ImpulseRow& row, const SolvedPassage& passage, int level);

}  // namespace falcate::validation
