#include "cases/flow_remarks.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "solver/gas_dynamics.h"

namespace falcate::cases {
namespace {

std::string bar(double pascal) { return fmt::format("{:.4f} bar(a)", pascal / 1e5); }

double axial_mach(const post::StreamState& stream) {
  return stream.mach * std::sin(stream.angle_deg * std::numbers::pi / 180.0);
}

bool above_starting_limit(const EntryFacts& entry) {
  return entry.relative_mach <= 1.0 ||
         entry.throat_ratio >=
             solver::starting_area_ratio(entry.relative_mach, entry.heat_capacity_ratio);
}

void add_exit_remark(const EntryFacts& entry, const post::PassageFigures& figures,
                     std::vector<std::string>& remarks) {
  constexpr double held = 0.01;
  const double missed = figures.exit.pressure_pa / entry.exit_pressure - 1.0;
  if (std::abs(missed) <= held) return;
  const std::string pressures =
      fmt::format("the mixed-out exit pressure is {}, not the {} set",
                  bar(figures.exit.pressure_pa), bar(entry.exit_pressure));
  const double axial = axial_mach(figures.exit);
  // Behind a shock along the outflow plane: more than that would drive it into the row.
  const double acts_from =
      figures.exit.pressure_pa *
      solver::normal_shock(std::max(axial, 1.0), entry.heat_capacity_ratio).pressure_ratio;
  if (axial > 0.98 && entry.exit_pressure < acts_from)
    remarks.push_back(fmt::format(
        "The row is at its limit load: the gas leaves at axial Mach {:.2f}, so that a pressure "
        "behind it below {} does not act on it; {}.",
        axial, bar(acts_from), pressures));
  else
    remarks.push_back(fmt::format("The exit pressure is missed: {}.", pressures));
}

}  // namespace

std::optional<double> least_starting_mach(double throat_ratio, double gamma) {
  if (throat_ratio >= 1.0) return 1.0;
  double low = 1.0, high = 50.0;
  if (solver::starting_area_ratio(high, gamma) > throat_ratio) return std::nullopt;
  for (int i = 0; i < 60; ++i) {
    const double middle = 0.5 * (low + high);
    (solver::starting_area_ratio(middle, gamma) > throat_ratio ? low : high) = middle;
  }
  return high;
}

std::string starting_words(double throat_ratio, double gamma) {
  const auto mach = least_starting_mach(throat_ratio, gamma);
  return mach ? fmt::format("it starts only above Mach {:.2f} (Kantrowitz limit)", *mach)
              : "it starts at no Mach number (Kantrowitz limit)";
}

std::vector<std::string> flow_remarks(const EntryFacts& entry, const post::PassageFigures& figures,
                                      bool behind_shock) {
  std::vector<std::string> remarks;
  if (behind_shock)
    remarks.push_back(fmt::format(
        "The passage does not start at relative Mach {:.2f}: a shock stands before the blades "
        "(computed as a normal shock) and the gas enters below the speed of sound.",
        entry.relative_mach));
  if (!above_starting_limit(entry))
    remarks.push_back(fmt::format("The throat is {:.3f} of the inlet stream width: {}.",
                                  entry.throat_ratio,
                                  starting_words(entry.throat_ratio, entry.heat_capacity_ratio)));
  if (entry.wheel && figures.capacity_ratio < 0.98)
    remarks.push_back(fmt::format(
        "The passage swallows {:.0f} % of the gas that the jet offers; the rest spills past it.",
        100.0 * figures.capacity_ratio));
  if (entry.wheel && figures.capacity_ratio > 1.02)
    remarks.push_back(fmt::format(
        "The passage would swallow {:.0f} % more gas than the jet offers: the jet narrows before "
        "the blades and fills fewer passages; force, torque and power are those of the nozzles' "
        "flow.",
        100.0 * (figures.capacity_ratio - 1.0)));
  add_exit_remark(entry, figures, remarks);
  if (entry.wheel && figures.tangential_force_n_m < 0.0)
    remarks.push_back("The gas brakes the wheel: this speed is beyond runaway.");
  return remarks;
}

UnsolvedFlow unsolved_flow(const solver::FlowProblem& problem,
                           const solver::FlowSolution& solution) {
  UnsolvedFlow flow;
  const auto& areas = problem.mesh->areas();
  double whole = 0.0, reversed = 0.0;
  for (std::size_t i = 0; i < solution.cells.size(); ++i) {
    const solver::Primitive& q = solution.cells[i];
    const double mach =
        std::hypot(q.u, q.v) / std::sqrt(problem.gas.heat_capacity_ratio * q.pressure / q.density);
    if (!std::isfinite(mach)) flow.finite = false;
    flow.greatest_mach = std::max(flow.greatest_mach, mach);
    whole += areas[i];
    if (q.u < 0.0) reversed += areas[i];
  }
  flow.reversed_share = whole > 0.0 ? reversed / whole : 0.0;
  for (const auto& patch : problem.mesh->patches()) {
    if (patch.kind != mesh::PatchKind::inlet) continue;
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f)
      flow.entering_mass_flow -=
          solution.boundary[static_cast<std::size_t>(f - problem.mesh->interior_face_count())].mass;
  }
  return flow;
}

std::string unsolved_words(const EntryFacts& entry, const UnsolvedFlow& flow) {
  constexpr double separated = 0.05;
  if (!flow.finite) return "the numbers ran away before a flow took shape";
  if (!(flow.entering_mass_flow > 0.0))
    return "no gas enters: the pressure behind the row drives it back";
  if (entry.wheel && entry.inlet_angle > 0.5 * std::numbers::pi)
    return "the wheel runs beyond runaway: the gas meets the blades from behind and separates";
  if (entry.relative_mach > 1.0)
    return fmt::format("the passage does not start at relative Mach {:.2f}{}", entry.relative_mach,
                       above_starting_limit(entry)
                           ? ""
                           : "; " + starting_words(entry.throat_ratio, entry.heat_capacity_ratio));
  if (flow.reversed_share > separated)
    return fmt::format("the flow is separated: it runs backwards in {:.0f} % of the passage",
                       100.0 * flow.reversed_share);
  if (flow.greatest_mach > 1.0)
    return fmt::format("the passage is choked: Mach {:.2f} is reached in it", flow.greatest_mach);
  return "no settled flow was found";
}

}  // namespace falcate::cases
