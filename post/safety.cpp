#include "post/safety.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <numbers>

namespace falcate::post {
namespace {

constexpr double mega = 1e6;
constexpr double zero_celsius = 273.15;

double angular_speed(double rpm) { return rpm * std::numbers::pi / 30.0; }

/// Larger of ring and disc stress over density times w^2, m^2.
double stress_factor(double poisson, double outer, double bore, bool ringed) {
  const double disc = bore > 0.0
                          ? 0.25 * ((3.0 + poisson) * outer * outer + (1.0 - poisson) * bore * bore)
                          : 0.125 * (3.0 + poisson) * outer * outer;
  return ringed ? std::max(outer * outer, disc) : disc;
}

std::string megapascal(double stress) { return fmt::format("{:.3g} MPa", stress / mega); }
std::string rpm_text(double rpm) { return fmt::format("{:.0f} rpm", rpm); }

/// Sound below the allowable stress, refused at or beyond it, caution within a tenth of it.
Verdict judge(double stress, double allowable) {
  if (!(stress < allowable)) return Verdict::refuse;
  return stress > 0.9 * allowable ? Verdict::caution : Verdict::sound;
}

SafetyRow stress_row(const std::string& part, const std::string& when, double stress,
                     const Material& material, bool runaway) {
  const double margin = material.allowable_stress / stress;
  SafetyRow row;
  row.quantity = fmt::format("Hoop stress in the {} at {}", part, when);
  row.value = fmt::format("{} of {} allowable for {} (margin {:.2f})", megapascal(stress),
                          megapascal(material.allowable_stress), material.title, margin);
  row.verdict = judge(stress, material.allowable_stress);
  if (row.verdict == Verdict::sound) return row;
  if (row.verdict == Verdict::caution)
    row.caution = "Little margin: balance, flaws and heat are not in this number.";
  else if (runaway)
    row.caution =
        "A free wheel would pass its allowable stress: never run it without its load, and fit "
        "containment in the plane of the wheel that holds the fragments.";
  else
    row.caution =
        "Beyond the allowable stress: do not run at this speed. Use a stronger material, a smaller "
        "wheel or a lower speed.";
  return row;
}

void add_stresses(std::vector<SafetyRow>& rows, const SafetyInput& input, double rpm,
                  const std::string& when, bool runaway) {
  const double w = angular_speed(rpm);
  const double rim_speed = w * input.outer_radius;
  const Material* material = input.material;
  if (material == nullptr) {
    SafetyRow row;
    row.quantity = fmt::format("Hoop stress over density at {}", when);
    const double factor =
        stress_factor(1.0 / 3.0, input.outer_radius, input.bore_radius, input.ringed);
    row.value = fmt::format("{:.4g} kPa m3/kg", factor * w * w / 1e3);
    row.verdict = Verdict::caution;
    row.caution =
        "No material given, so strength cannot be judged: give the wheel's material, or multiply "
        "by "
        "its density and compare with its allowable stress.";
    rows.push_back(row);
    return;
  }
  if (input.ringed && rpm > 0.0)
    rows.push_back(
        stress_row("ring", when, ring_stress(material->density, rim_speed), *material, runaway));
  if (rpm > 0.0)
    rows.push_back(stress_row("disc", when,
                              disc_stress(*material, input.outer_radius, input.bore_radius, w),
                              *material, runaway));
}

SafetyRow largest_speed_row(const SafetyInput& input) {
  SafetyRow row;
  const double largest =
      largest_speed_rpm(*input.material, input.outer_radius, input.bore_radius, input.ringed);
  row.quantity = "Largest speed the material allows";
  row.value = rpm_text(largest);
  row.caution =
      "Typical strength, uniform disc, no flaws, no heat and no fatigue: a number to start from, "
      "not "
      "a certificate. Local codes and a licensed engineer decide.";
  row.verdict = Verdict::caution;
  return row;
}

SafetyRow runaway_row(const SafetyInput& input) {
  SafetyRow row;
  const double runaway = *input.runaway_speed_rpm;
  row.quantity = "Runaway speed";
  row.value =
      rpm_text(runaway) + (input.runaway_is_bound ? " at most (no drag)" : " (computed, no drag)");
  row.verdict = Verdict::caution;
  row.caution =
      "A wheel that loses its load runs up to this speed within moments. Test behind containment "
      "in "
      "the plane of the wheel, start it from a distance, keep eyes and hands out of that plane; an "
      "overspeed test goes to 120 % of the highest speed allowed.";
  if (input.material != nullptr && runaway >= largest_speed_rpm(*input.material, input.outer_radius,
                                                                input.bore_radius, input.ringed))
    row.verdict = Verdict::refuse;
  return row;
}

SafetyRow supply_row(const SafetyInput& input) {
  SafetyRow row;
  const double gauge = input.supply_pressure - input.atmospheric_pressure;
  row.quantity = "Supply pressure";
  row.value = fmt::format("{:.3g} bar(g)", gauge / 1e5);
  // 0.5 bar(g): the threshold from which pressure-equipment rules commonly apply.
  row.verdict = gauge > 0.5e5 ? Verdict::caution : Verdict::sound;
  if (row.verdict == Verdict::caution)
    row.caution =
        "Vessels, hoses and fittings never beyond their rated pressure, with a relief valve and a "
        "regulator. No printed part, plastic pipe or glass as a pressure vessel: plastics fail "
        "without warning. Local codes and a licensed engineer decide.";
  return row;
}

SafetyRow jet_row(const SafetyInput& input) {
  SafetyRow row;
  row.quantity = "Jet velocity";
  row.value = fmt::format("{:.0f} m/s", input.jet_velocity);
  row.verdict = Verdict::caution;
  row.caution =
      "Wear eye and hearing protection: such jets can pass 100 dB, carry chips, and drive gas "
      "through "
      "skin. Ventilate where the gas is not air: it displaces what people breathe.";
  return row;
}

SafetyRow cold_row(const SafetyInput& input) {
  SafetyRow row;
  row.quantity = "Temperature of the jet";
  row.value = fmt::format("{:.0f} degC", input.jet_temperature - zero_celsius);
  const bool icing = input.jet_temperature < zero_celsius;
  row.verdict = icing ? Verdict::caution : Verdict::sound;
  if (icing)
    row.caution =
        "Below freezing: moisture ices nozzles, blades and exhaust, and cold makes plastics "
        "brittle. "
        "Dry the gas; a vessel that empties fast cools further.";
  return row;
}

SafetyRow heat_row(const SafetyInput& input) {
  SafetyRow row;
  row.quantity = "Supply temperature";
  row.value =
      fmt::format("{:.0f} degC, {} up to {:.0f} degC", input.supply_temperature - zero_celsius,
                  input.material->title, input.material->highest_temperature - zero_celsius);
  if (input.supply_temperature > input.material->highest_temperature) {
    row.verdict = Verdict::refuse;
    row.caution =
        "Gas at rest against the blade reaches the supply temperature: the material softens.";
  }
  return row;
}

}  // namespace

const std::vector<Material>& materials() {
  static const char* const typical = "typical, from memory";
  static const std::vector<Material> rows = {
      {"photopolymer", "printed photopolymer resin", 1180.0, 0.40, 7e6, 30e6, 318.0, typical},
      {"nylon-sintered", "laser-sintered nylon 12", 950.0, 0.40, 12e6, 42e6, 353.0, typical},
      {"acetal", "machined acetal (POM)", 1410.0, 0.37, 20e6, 60e6, 363.0, typical},
      {"aluminium-6061", "aluminium 6061-T6", 2700.0, 0.33, 80e6, 240e6, 373.0,
       "a third of the yield strength; typical, from memory"},
      {"aluminium-7075", "aluminium 7075-T6", 2810.0, 0.33, 165e6, 495e6, 373.0,
       "a third of the yield strength; typical, from memory"},
      {"stainless-316l", "stainless steel 316L", 8000.0, 0.30, 56e6, 170e6, 573.0,
       "a third of the yield strength; typical, from memory"},
      {"titanium-6al-4v", "titanium Ti-6Al-4V", 4430.0, 0.34, 275e6, 825e6, 573.0,
       "a third of the yield strength; typical, from memory"},
  };
  return rows;
}

const Material* find_material(std::string_view name) {
  for (const Material& material : materials())
    if (name == material.name) return &material;
  return nullptr;
}

double ring_stress(double density, double rim_speed) { return density * rim_speed * rim_speed; }

double disc_stress(const Material& material, double outer_radius, double bore_radius,
                   double angular_speed) {
  assert(bore_radius >= 0.0 && bore_radius < outer_radius);
  return material.density * angular_speed * angular_speed *
         stress_factor(material.poisson_ratio, outer_radius, bore_radius, false);
}

double largest_speed_rpm(const Material& material, double outer_radius, double bore_radius,
                         bool ringed) {
  const double factor = stress_factor(material.poisson_ratio, outer_radius, bore_radius, ringed);
  return std::sqrt(material.allowable_stress / (material.density * factor)) * 30.0 /
         std::numbers::pi;
}

double runaway_bound_rpm(double jet_velocity, double jet_angle_deg, double mean_radius) {
  assert(mean_radius > 0.0);
  const double u = jet_velocity * std::cos(jet_angle_deg * std::numbers::pi / 180.0);
  return u / mean_radius * 30.0 / std::numbers::pi;
}

const char* verdict_words(Verdict verdict) {
  switch (verdict) {
    case Verdict::sound:
      return "sound";
    case Verdict::caution:
      return "take care";
    case Verdict::refuse:
      return "not allowed";
  }
  return "";
}

std::vector<SafetyRow> safety_rows(const SafetyInput& input) {
  assert(input.outer_radius > 0.0);
  std::vector<SafetyRow> rows;
  if (input.running_speed_rpm)
    add_stresses(rows, input, *input.running_speed_rpm, "running speed", false);
  if (input.runaway_speed_rpm) {
    rows.push_back(runaway_row(input));
    add_stresses(rows, input, *input.runaway_speed_rpm, "runaway speed", true);
  }
  if (input.material != nullptr) rows.push_back(largest_speed_row(input));
  rows.push_back(supply_row(input));
  if (input.jet_velocity > 0.0) {
    rows.push_back(jet_row(input));
    rows.push_back(cold_row(input));
  }
  if (input.material != nullptr) rows.push_back(heat_row(input));
  return rows;
}

}  // namespace falcate::post
