#include "post/safety.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <set>
#include <string>
#include <vector>

namespace falcate::post {
namespace {

using testing::HasSubstr;

Material with(double density, double poisson) {
  Material m = *find_material("aluminium-6061");
  m.density = density;
  m.poisson_ratio = poisson;
  return m;
}

// Thin ring rho U^2, and disc with a small hole (3 + nu)/4 rho U^2: Timoshenko & Goodier, Theory of
// Elasticity; values for resin 1180 (nu 0.35) and aluminium 2800 kg/m3 (nu 0.3), recomputed.
TEST(Stress, RingAndDisc) {
  const double speeds[] = {50, 100, 150, 200, 300};
  const double ring_resin[] = {2.95, 11.8, 26.6, 47.2, 106}, disc_resin[] = {2.5, 9.9, 22, 40, 89};
  const double ring_metal[] = {7.0, 28, 63, 112, 252}, disc_metal[] = {5.8, 23, 52, 93, 210};
  for (int i = 0; i < 5; ++i) {
    const double u = speeds[i], b = 0.025;
    EXPECT_NEAR(ring_stress(1180, u) / 1e6, ring_resin[i], 0.006 * ring_resin[i]);
    EXPECT_NEAR(ring_stress(2800, u) / 1e6, ring_metal[i], 0.006 * ring_metal[i]);
    EXPECT_NEAR(disc_stress(with(1180, 0.35), b, 1e-6, u / b) / 1e6, disc_resin[i],
                0.02 * disc_resin[i]);
    EXPECT_NEAR(disc_stress(with(2800, 0.30), b, 1e-6, u / b) / 1e6, disc_metal[i],
                0.02 * disc_metal[i]);
  }
}

// Without a bore half the stress of a pinhole; as the bore meets the rim, the thin ring (exact).
TEST(Stress, LimitsOfTheDisc) {
  const Material m = with(1000, 0.3);
  EXPECT_NEAR(disc_stress(m, 0.02, 0.0, 3000), 0.5 * disc_stress(m, 0.02, 1e-9, 3000), 1e-6);
  EXPECT_NEAR(disc_stress(m, 0.02, 0.02 * (1 - 1e-9), 3000), ring_stress(1000, 60.0), 1e-2);
}

// Working limit 5 to 10 MPa for resin: ring speed 65 to 92 m/s; a third of yield for the aluminium
// alloys: about 170 and 240 m/s. Recomputed from rho U^2.
TEST(Stress, LargestSpeed) {
  const auto rim = [](const char* name) {
    return largest_speed_rpm(*find_material(name), 0.025, 0.003, true) * std::numbers::pi / 30 *
           0.025;
  };
  EXPECT_GT(rim("photopolymer"), 65.0);
  EXPECT_LT(rim("photopolymer"), 92.0);
  EXPECT_NEAR(rim("aluminium-6061"), 170.0, 5.0);
  EXPECT_NEAR(rim("aluminium-7075"), 240.0, 5.0);
  for (const Material& m : materials()) {
    for (bool ringed : {true, false}) {
      const double w = largest_speed_rpm(m, 0.025, 0.003, ringed) * std::numbers::pi / 30;
      const double disc = disc_stress(m, 0.025, 0.003, w);
      const double worst = ringed ? std::max(disc, ring_stress(m.density, 0.025 * w)) : disc;
      EXPECT_NEAR(worst, m.allowable_stress, 1e-6 * worst) << m.name;
    }
  }
}

TEST(Materials, EveryRowIsUsableAndSaysWhereItIsFrom) {
  std::set<std::string> names;
  for (const Material& m : materials()) {
    EXPECT_TRUE(names.insert(m.name).second);
    EXPECT_EQ(find_material(m.name), &m);
    EXPECT_LT(m.allowable_stress, 0.4 * m.strength) << m.name;
    EXPECT_GT(m.density, 500.0);
    EXPECT_GT(m.poisson_ratio, 0.2);
    EXPECT_LT(m.poisson_ratio, 0.5);
    EXPECT_THAT(m.source, HasSubstr("from memory")) << m.name;
  }
  EXPECT_EQ(find_material("unobtainium"), nullptr);
}

// u = c1 cos(alpha1) is where the impulse stage's torque is nought: twice the best speed.
TEST(Runaway, BoundIsTwiceTheBestSpeed) {
  const double u = runaway_bound_rpm(430.0, 20.0, 0.023) * std::numbers::pi / 30 * 0.023;
  EXPECT_NEAR(u / 430.0, 2.0 * 0.469846, 2e-6);
}

SafetyInput spindle() {
  SafetyInput in;
  in.material = find_material("aluminium-6061");
  in.outer_radius = 0.025;
  in.bore_radius = 0.003;
  in.running_speed_rpm = 45000.0;
  in.runaway_speed_rpm = 160000.0;
  in.supply_pressure = 7e5;
  in.supply_temperature = 293.15;
  in.jet_temperature = 190.0;
  in.jet_velocity = 430.0;
  return in;
}

const SafetyRow& row(const std::vector<SafetyRow>& rows, const std::string& quantity) {
  const auto found = std::find_if(rows.begin(), rows.end(),
                                  [&](const SafetyRow& r) { return r.quantity == quantity; });
  static const SafetyRow none;
  EXPECT_NE(found, rows.end()) << quantity;
  return found == rows.end() ? none : *found;
}

// 45000 rpm on 25 mm: U = 117.81 m/s, rho U^2 = 2700 x 13879 = 37.5 MPa; 80/37.5 = 2.13.
TEST(SafetyRows, RunningSpeedIsSoundAndRunawayIsNot) {
  const auto rows = safety_rows(spindle());
  const SafetyRow& ring = row(rows, "Hoop stress in the ring at running speed");
  EXPECT_EQ(ring.value, "37.5 MPa of 80 MPa allowable for aluminium 6061-T6 (margin 2.13)");
  EXPECT_EQ(ring.verdict, Verdict::sound);
  EXPECT_EQ(ring.caution, "");
  const SafetyRow& free = row(rows, "Hoop stress in the ring at runaway speed");
  EXPECT_EQ(free.verdict, Verdict::refuse);
  EXPECT_EQ(free.caution,
            "A free wheel would pass its allowable stress: never run it without its load, and fit "
            "containment in the plane of the wheel that holds the fragments.");
  EXPECT_EQ(row(rows, "Runaway speed").verdict, Verdict::refuse);
  EXPECT_EQ(row(rows, "Runaway speed").value, "160000 rpm (computed, no drag)");
  EXPECT_THAT(row(rows, "Runaway speed").caution, HasSubstr("containment"));
}

TEST(SafetyRows, ASpeedBeyondTheAllowableStressIsRefused) {
  SafetyInput in = spindle();
  in.material = find_material("photopolymer");
  const SafetyRow ring = row(safety_rows(in), "Hoop stress in the ring at running speed");
  EXPECT_EQ(ring.verdict, Verdict::refuse);
  EXPECT_THAT(ring.caution, testing::StartsWith("Beyond the allowable stress: do not run"));
}

TEST(SafetyRows, LittleMarginIsACaution) {
  SafetyInput in = spindle();
  in.running_speed_rpm = 0.97 * largest_speed_rpm(*in.material, 0.025, 0.003, true);
  EXPECT_EQ(row(safety_rows(in), "Hoop stress in the ring at running speed").verdict,
            Verdict::caution);
  in.running_speed_rpm = 1.0001 * largest_speed_rpm(*in.material, 0.025, 0.003, true);
  EXPECT_EQ(row(safety_rows(in), "Hoop stress in the ring at running speed").verdict,
            Verdict::refuse);
}

TEST(SafetyRows, OpenWheelHasNoRing) {
  SafetyInput in = spindle();
  in.ringed = false;
  for (const SafetyRow& r : safety_rows(in))
    EXPECT_THAT(r.quantity, testing::Not(HasSubstr("ring ")));
}

TEST(SafetyRows, WithoutMaterialStrengthIsNotJudged) {
  SafetyInput in = spindle();
  in.material = nullptr;
  const SafetyRow r = row(safety_rows(in), "Hoop stress over density at running speed");
  EXPECT_EQ(r.value, "13.88 kPa m3/kg");  // U^2 = 13879 m2/s2
  EXPECT_EQ(r.verdict, Verdict::caution);
  EXPECT_THAT(r.caution, HasSubstr("No material given"));
}

TEST(SafetyRows, CautionsStandBesideTheirNumbers) {
  const auto rows = safety_rows(spindle());
  EXPECT_EQ(row(rows, "Supply pressure").value, "5.99 bar(g)");
  EXPECT_THAT(row(rows, "Supply pressure").caution, HasSubstr("plastics fail without warning"));
  EXPECT_THAT(row(rows, "Supply pressure").caution, HasSubstr("licensed engineer"));
  EXPECT_THAT(row(rows, "Jet velocity").caution, HasSubstr("eye and hearing protection"));
  EXPECT_EQ(row(rows, "Temperature of the jet").value, "-83 degC");
  EXPECT_THAT(row(rows, "Temperature of the jet").caution, HasSubstr("ices"));
  EXPECT_THAT(row(rows, "Largest speed the material allows").caution,
              HasSubstr("licensed engineer decide"));
}

TEST(SafetyRows, QuietWhereThereIsNothingToSay) {
  SafetyInput in = spindle();
  in.supply_pressure = 1.2e5;
  in.jet_temperature = 290.0;
  const auto rows = safety_rows(in);
  EXPECT_EQ(row(rows, "Supply pressure").verdict, Verdict::sound);
  EXPECT_EQ(row(rows, "Supply pressure").caution, "");
  EXPECT_EQ(row(rows, "Temperature of the jet").caution, "");
}

TEST(SafetyRows, HotGasAndPlastic) {
  SafetyInput in = spindle();
  in.material = find_material("photopolymer");
  in.supply_temperature = 373.15;
  const SafetyRow heat = row(safety_rows(in), "Supply temperature");
  EXPECT_EQ(heat.verdict, Verdict::refuse);
  EXPECT_EQ(heat.value, "100 degC, printed photopolymer resin up to 45 degC");
}

TEST(SafetyRows, StandstillHasNoStress) {
  SafetyInput in = spindle();
  in.running_speed_rpm = 0.0;
  for (const SafetyRow& r : safety_rows(in))
    EXPECT_THAT(r.quantity, testing::Not(HasSubstr("running speed")));
}

}  // namespace
}  // namespace falcate::post
