/// Plain sentences on what a solved flow did (choked, not started, limit load, beyond runaway), and
/// on what it did where it could not be solved. SI units; Mach numbers relative to the blades.
/// Source of the starting limit: Kantrowitz & Donaldson, NACA ACR L5D20 (1945).
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "post/passage_figures.h"

namespace falcate::cases {

/// What is known of a point before it is solved.
struct EntryFacts {
  double relative_mach = 0.0;  ///< 0: left open
  double inlet_angle = 0.0;    ///< rad
  double throat_ratio = 0.0;   ///< throat over inlet stream width
  double heat_capacity_ratio = 1.4;
  double exit_pressure = 0.0;  ///< set, Pa
  bool wheel = false;
};

/// Least Mach number at which a passage of this throat ratio starts; none below the ratio of 0.6
/// (gamma 1.4) that no Mach number starts; 1 where it always starts.
std::optional<double> least_starting_mach(double throat_ratio, double gamma);

/// "it starts only above Mach 2.07 (Kantrowitz limit)", without a full stop.
std::string starting_words(double throat_ratio, double gamma);

std::vector<std::string> flow_remarks(const EntryFacts& entry, const post::PassageFigures& figures,
                                      bool behind_shock);

/// What the last state of an unsolved flow shows.
struct UnsolvedFlow {
  bool finite = true;
  double entering_mass_flow = 0.0;  ///< kg/(s m)
  double reversed_share = 0.0;      ///< of the passage's area, gas running against the stream
  double greatest_mach = 0.0;
};
UnsolvedFlow unsolved_flow(const solver::FlowProblem& problem,
                           const solver::FlowSolution& solution);

/// One clause without a full stop: "the passage does not start at relative Mach 1.50, ...".
std::string unsolved_words(const EntryFacts& entry, const UnsolvedFlow& flow);

}  // namespace falcate::cases
