#include "post/nozzle.h"

#include <gtest/gtest.h>

#include <cmath>
#include <set>
#include <string>

#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

const solver::Gas air;

Nozzle convergent(double diameter) {
  Nozzle n;
  n.throat_diameter = n.exit_diameter = diameter;
  n.velocity_coefficient = n.discharge_coefficient = 1.0;
  return n;
}

/// Shaped for Mach 2: area ratio 1.6875 (NACA Report 1135).
Nozzle mach_two() {
  Nozzle n = convergent(2e-3);
  n.exit_diameter = n.throat_diameter * std::sqrt(1.6875);
  return n;
}

NozzleFlow flow_at(const Nozzle& nozzle, double supply_to_exhaust) {
  return nozzle_flow(air, {supply_to_exhaust * 1e5, 293.15}, nozzle, 1e5);
}

// 2 mm, 8 bar absolute, 293.15 K air: 5.93248 g/s by NACA Report 1135 equations, recomputed.
TEST(NozzleFlow, ChokedMassFlow) {
  const NozzleFlow flow = nozzle_flow(air, {8e5, 293.15}, convergent(2e-3), 101325.0);
  EXPECT_NEAR(flow.mass_flow, 5.93248e-3, 5e-9);
  EXPECT_TRUE(flow.choked);
  EXPECT_EQ(flow.regime, NozzleRegime::choked);
  EXPECT_NEAR(flow.exit_pressure, 8e5 * 0.528282, 1.0);
}

TEST(NozzleFlow, CountAndDischargeCoefficientScaleTheMassFlow) {
  Nozzle nozzle = convergent(2e-3);
  const double one = flow_at(nozzle, 8.0).mass_flow;
  nozzle.count = 3;
  nozzle.discharge_coefficient = 0.9;
  EXPECT_NEAR(flow_at(nozzle, 8.0).mass_flow, 2.7 * one, 1e-12 * one);
}

// 5 bar absolute to atmosphere: Mach 1.7, about 430 m/s (isentropic relations).
TEST(NozzleFlow, SpoutingVelocityOfAFewBarIsSupersonic) {
  const NozzleFlow flow = nozzle_flow(air, {5e5, 293.15}, convergent(2e-3), 101325.0);
  EXPECT_NEAR(flow.jet_mach, 1.7, 0.005);
  EXPECT_NEAR(flow.spouting_velocity, 464.0, 1.0);
  EXPECT_EQ(flow.jet_velocity, flow.spouting_velocity);
}

// Lost kinetic energy stays as heat: total temperature of the jet is that of the supply.
TEST(NozzleFlow, VelocityCoefficientKeepsTheTotalTemperature) {
  Nozzle nozzle = convergent(2e-3);
  nozzle.velocity_coefficient = 0.95;
  const NozzleFlow flow = flow_at(nozzle, 5.0);
  EXPECT_NEAR(flow.jet_velocity, 0.95 * flow.spouting_velocity, 1e-10);
  const double total = flow.jet_temperature + 0.5 * std::pow(flow.jet_velocity, 2) / 1004.675;
  EXPECT_NEAR(total, 293.15, 1e-9);
  EXPECT_NEAR(flow.jet_density, 1e5 / (287.05 * flow.jet_temperature), 1e-12);
  EXPECT_NEAR(flow.jet_mach, flow.jet_velocity / std::sqrt(1.4 * 287.05 * flow.jet_temperature),
              1e-12);
}

TEST(NozzleFlow, ConvergentChokesAtTheCriticalRatio) {
  EXPECT_EQ(flow_at(convergent(2e-3), 1.88).regime, NozzleRegime::subsonic);
  EXPECT_EQ(flow_at(convergent(2e-3), 1.90).regime, NozzleRegime::choked);
  EXPECT_NEAR(flow_at(convergent(2e-3), 1.5).design_supply_to_exhaust, 1.892929, 5e-7);
  EXPECT_FALSE(flow_at(convergent(2e-3), 1.5).choked);
}

// Area ratio 1.6875: exit Mach 2, p0/p = 7.8244 (1/0.127805), normal shock at the exit raises the
// pressure 4.5 times; subsonic branch chokes at p/p0 of M = 0.3722. NACA Report 1135.
TEST(NozzleFlow, RegimesOfAConvergentDivergentNozzle) {
  const Nozzle n = mach_two();
  EXPECT_NEAR(flow_at(n, 5.0).design_supply_to_exhaust, 1.0 / 0.127805, 1e-4);
  EXPECT_NEAR(flow_at(n, 5.0).exit_mach, 2.0, 1e-9);
  const double shock_at_exit = 1.0 / (0.127805 * 4.5);
  EXPECT_EQ(flow_at(n, 1.05).regime, NozzleRegime::subsonic);
  EXPECT_EQ(flow_at(n, 1.3).regime, NozzleRegime::shock_inside);
  EXPECT_EQ(flow_at(n, 0.999 * shock_at_exit).regime, NozzleRegime::shock_inside);
  EXPECT_EQ(flow_at(n, 1.001 * shock_at_exit).regime, NozzleRegime::overexpanded);
  EXPECT_EQ(flow_at(n, 7.7).regime, NozzleRegime::overexpanded);
  EXPECT_EQ(flow_at(n, 7.83).regime, NozzleRegime::design);
  EXPECT_EQ(flow_at(n, 8.0).regime, NozzleRegime::underexpanded);
}

// Behind the normal shock in the exit plane: M = 0.577350 (NACA Report 1135).
TEST(NozzleFlow, ShockAtTheExitLeavesSubsonic) {
  const NozzleFlow flow =
      flow_at(mach_two(), 1.0 / (solver::pressure_ratio(2.0, 1.4) * 4.5) - 1e-9);
  EXPECT_EQ(flow.regime, NozzleRegime::shock_inside);
  EXPECT_NEAR(flow.exit_mach, 0.577350, 1e-6);
  EXPECT_LT(flow.jet_mach, 1.0);
}

TEST(NozzleFlow, MassFlowIsContinuousWhereTheThroatChokes) {
  const double choking =
      1.0 / solver::pressure_ratio(
                solver::mach_from_area_ratio(1.6875, 1.4, solver::Branch::subsonic), 1.4);
  for (const double ratio : {1e-6, 1e-5}) {
    const NozzleFlow below = flow_at(mach_two(), choking * (1.0 - ratio));
    const NozzleFlow above = flow_at(mach_two(), choking * (1.0 + ratio));
    EXPECT_FALSE(below.choked);
    EXPECT_TRUE(above.choked);
    EXPECT_NEAR(below.mass_flow / above.mass_flow, 1.0, 20.0 * ratio);
  }
}

// A normal shock keeps mass and momentum, so the jet must not jump as the shock leaves the nozzle,
// nor where the nozzle comes to its design point.
TEST(NozzleFlow, JetVelocityIsContinuousFromRegimeToRegime) {
  double last = flow_at(mach_two(), 1.05).jet_velocity;
  for (double ratio = 1.05; ratio < 9.0; ratio += 0.002) {
    const double now = flow_at(mach_two(), ratio).jet_velocity;
    EXPECT_NEAR(now, last, 3.0) << ratio;
    last = now;
  }
}

TEST(NozzleFlow, OverexpandedNozzleFallsShortOfTheSpoutingVelocity) {
  const NozzleFlow flow = flow_at(mach_two(), 3.0);
  EXPECT_LT(flow.jet_velocity, 0.99 * flow.spouting_velocity);
  const NozzleFlow at_design = flow_at(mach_two(), 1.0 / solver::pressure_ratio(2.0, 1.4));
  EXPECT_NEAR(at_design.jet_velocity / at_design.spouting_velocity, 1.0, 1e-12);
  EXPECT_NEAR(at_design.momentum_velocity / at_design.spouting_velocity, 1.0, 1e-9);
}

// Sonic jet with mass and momentum kept, recomputed from the control volume: 325, 431, 484, 516 m/s
// at 293.15 K, 1.000, 0.982, 0.943, 0.886 of the isentropic velocity.
TEST(NozzleFlow, MomentumVelocityOfAConvergentNozzle) {
  const double ratios[] = {2.0, 4.0, 8.0, 20.0}, velocity[] = {325.0, 431.0, 484.0, 516.0};
  const double fraction[] = {1.000, 0.982, 0.943, 0.886};
  for (int i = 0; i < 4; ++i) {
    const NozzleFlow flow = flow_at(convergent(2e-3), ratios[i]);
    EXPECT_NEAR(flow.momentum_velocity, velocity[i], 0.5);
    EXPECT_NEAR(flow.momentum_velocity / flow.spouting_velocity, fraction[i], 5e-4);
  }
}

TEST(NozzleFlow, NoFlowAgainstAHigherExhaustPressure) {
  const NozzleFlow flow = flow_at(mach_two(), 0.9);
  EXPECT_EQ(flow.regime, NozzleRegime::no_flow);
  EXPECT_EQ(flow.mass_flow, 0.0);
  EXPECT_EQ(flow.jet_velocity, 0.0);
  EXPECT_EQ(flow.jet_temperature, 293.15);
}

TEST(NozzleFlow, EveryRegimeHasItsWords) {
  std::set<std::string> words;
  for (int i = 0; i <= static_cast<int>(NozzleRegime::underexpanded); ++i)
    words.insert(regime_words(static_cast<NozzleRegime>(i)));
  EXPECT_EQ(words.size(), 7u);
  EXPECT_EQ(words.count(""), 0u);
}

// The blade sees the static state of the jet; at rest it sees the jet itself.
TEST(RelativeInlet, AtRestIsTheJet) {
  const NozzleFlow jet = flow_at(convergent(2e-3), 5.0);
  const RelativeInlet inlet = relative_inlet(air, jet, inlet_triangle(jet.jet_velocity, 20.0, 0.0));
  EXPECT_NEAR(inlet.condition.total_pressure / 5e5, 1.0, 1e-12);
  EXPECT_NEAR(inlet.condition.total_temperature, 293.15, 1e-10);
  EXPECT_NEAR(inlet.mach, jet.jet_mach, 1e-12);
}

// Rothalpy of a tangentially moving frame: cp T0rel = cp T0 - c_u u + u^2/2 (Dixon, Fluid
// Mechanics and Thermodynamics of Turbomachinery).
TEST(RelativeInlet, EnergyInTheMovingFrame) {
  const NozzleFlow jet = flow_at(convergent(2e-3), 5.0);
  const double u = 150.0, cu = jet.jet_velocity * std::cos(20.0 * std::acos(-1.0) / 180.0);
  const RelativeInlet inlet = relative_inlet(air, jet, inlet_triangle(jet.jet_velocity, 20.0, u));
  EXPECT_NEAR(inlet.condition.total_temperature, 293.15 + (0.5 * u * u - cu * u) / 1004.675, 1e-9);
  EXPECT_NEAR(inlet.condition.total_pressure * solver::pressure_ratio(inlet.mach, 1.4), 1e5, 1e-6);
  EXPECT_NEAR(inlet.axial_mach, inlet.mach * std::sin(inlet.condition.angle), 1e-14);
  EXPECT_EQ(inlet.condition.mach, inlet.mach);
}

}  // namespace
}  // namespace falcate::post
