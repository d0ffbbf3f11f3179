/// The transonic turbine cascade SPLEEN C1 beside its measurements at mid-span: pressure taps on
/// the blade and a traverse behind it. Source of the data: Lavagnoli, Lopes, Simonassi & Torre,
/// Zenodo 10.5281/zenodo.13712768 (2024), CC-BY; files vki_spleen_c1_*.csv in tests/data. Angles in
/// degrees from the axial direction, as the data have them.
#pragma once
#include <string>
#include <vector>

#include "tests/validation/solved_passage.h"

namespace falcate::validation {

/// One of the measured conditions, as the files label them. The labels are nominal.
struct MeasuredCondition {
  std::string reynolds_thousands, mach_label;
};
/// Those with traverse, taps and inlet angle at the two Mach numbers asked for.
const std::vector<MeasuredCondition>& measured_conditions();

struct Tap {
  std::string side;
  double x = 0.0;     ///< from the leading edge, axial chords
  double mach = 0.0;  ///< isentropic, from the pressure
};

struct Measurement {
  double inlet_angle = 0.0, inlet_mach = 0.0;
  double exit_angle = 0.0;      ///< of the momentum over one pitch
  double exit_pressure = 0.0;   ///< static, mean over one pitch, over the inlet total pressure
  double total_pressure = 0.0;  ///< mass mean behind the row over that before it
  std::vector<Tap> taps;
};
Measurement measurement(const MeasuredCondition& condition);

/// The same row computed at the measured inlet angle and exit pressure.
struct ComputedRow {
  double inlet_mach = 0.0, exit_angle = 0.0, exit_mach = 0.0, total_pressure = 0.0;
  int cells = 0;
  solver::SteadySummary summary;
  std::vector<Tap> wall;  ///< a face each, from leading to trailing edge
};
ComputedRow computed_row(const Measurement& measured, int cells);

/// Computed Mach number of the wall beside a tap (linear in x between faces).
double mach_beside(const ComputedRow& computed, const Tap& tap);

/// Computed less measured Mach numbers at the taps, the leading edge left out.
struct WallAgreement {
  int taps = 0;
  double root_mean_square = 0.0, worst = 0.0;
};
/// `attached`: the taps of the pressure side and of the suction side up to 65 % of the axial chord;
/// else those behind, where the measured layer separates.
WallAgreement wall_agreement(const Measurement& measured, const ComputedRow& computed,
                             bool attached);

}  // namespace falcate::validation
