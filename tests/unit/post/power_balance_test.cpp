// Energy equation along jet, passage and exit; Euler's turbine equation gives the shaft power.
#include "post/power_balance.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

constexpr double degree = std::numbers::pi / 180.0;
const solver::Gas air;

StreamState stream(double velocity, double angle_deg, double pressure, double total_temperature) {
  StreamState s;
  s.velocity_m_s = velocity;
  s.angle_deg = angle_deg;
  s.pressure_pa = pressure;
  s.total_temperature_k = total_temperature;
  const double temperature =
      total_temperature - 0.5 * velocity * velocity / solver::heat_capacity(air);
  s.mach = velocity / solver::speed_of_sound(air, temperature);
  s.total_pressure_pa = pressure / solver::pressure_ratio(s.mach, air.heat_capacity_ratio);
  return s;
}

/// Invented wheel: jet of 400 m/s at 20 degrees, blades at 120 m/s.
WheelDuty duty() {
  WheelDuty d;
  d.blade_speed = 120.0;
  d.jet_angle_deg = 20.0;
  d.jet.jet_velocity = 400.0;
  d.jet.spouting_velocity = 420.0;
  d.jet.mass_flow = 0.004;
  d.jet.jet_pressure = 1e5;
  return d;
}

/// The jet as the blades see it.
StreamState jet_stream() {
  const double x = 400.0 * std::sin(20.0 * degree), y = 400.0 * std::cos(20.0 * degree) - 120.0;
  return stream(std::hypot(x, y), std::atan2(x, y) / degree, 1e5, 270.0);
}

PassageFigures balanced(const StreamState& in, const StreamState& out, double capacity,
                        const WheelDuty& d) {
  PassageFigures f;
  f.inlet = in;
  f.exit = out;
  f.capacity_ratio = capacity;
  const double w1 = in.velocity_m_s * std::cos(in.angle_deg * degree);
  const double w2 = out.velocity_m_s * std::cos(out.angle_deg * degree);
  const double surplus = surplus_tangential_velocity(f, d);
  f.power_w = d.jet.mass_flow * std::min(capacity, 1.0) * d.blade_speed * (w1 - surplus - w2);
  f.absolute_exit_velocity_m_s =
      std::hypot(out.velocity_m_s * std::sin(out.angle_deg * degree), w2 + d.blade_speed);
  set_power_balance(f, air, d);
  return f;
}

double all_losses(const PassageFigures& f) {
  return f.nozzle_loss_w + f.spill_loss_w + f.entry_loss_w + f.blade_loss_w + f.leaving_loss_w;
}

TEST(PowerBalance, SupplyIsShaftPowerAndLosses) {
  const WheelDuty d = duty();
  for (const double capacity : {0.6, 1.0, 1.1})
    for (const double exit_angle : {140.0, 155.0})
      for (const double exit_velocity : {200.0, 280.0}) {
        const StreamState in = stream(260.0, 28.0, 1.2e5, 270.0);
        const StreamState out = stream(exit_velocity, exit_angle, 1e5, 270.0);
        const PassageFigures f = balanced(in, out, capacity, d);
        EXPECT_NEAR(f.supply_power_w, 0.5 * 0.004 * 420.0 * 420.0, 1e-12);
        EXPECT_NEAR(f.power_w + all_losses(f), f.supply_power_w, 1e-12 * f.supply_power_w);
      }
}

// A jet that enters as it is and is turned at its speed leaves nothing in the blades; its mirror
// image carries off the absolute velocity of the handbook's triangle.
TEST(PowerBalance, IdealImpulseBladeLosesTheLeavingVelocityAlone) {
  const WheelDuty d = duty();
  const StreamState in = jet_stream();
  StreamState out = in;
  out.angle_deg = 180.0 - in.angle_deg;
  const PassageFigures f = balanced(in, out, 1.0, d);
  const double scale = 1e-12 * f.supply_power_w;
  EXPECT_NEAR(f.spill_loss_w, 0.0, scale);
  EXPECT_NEAR(f.entry_loss_w, 0.0, scale);
  EXPECT_NEAR(f.blade_loss_w, 0.0, scale);
  EXPECT_NEAR(f.nozzle_loss_w, 0.002 * (420.0 * 420.0 - 400.0 * 400.0), scale);
  const double across = 400.0 * std::cos(20.0 * degree) - 2.0 * 120.0;
  const double through = 400.0 * std::sin(20.0 * degree);
  EXPECT_NEAR(f.leaving_loss_w, 0.002 * (across * across + through * through), scale);
}

// Velocity coefficient 0.9 of the blades at equal pressure: (1 - 0.81) w1^2/2 is lost.
TEST(PowerBalance, BladeLossIsTheKineticEnergyThatTheBladesTake) {
  const WheelDuty d = duty();
  const StreamState in = jet_stream();
  const StreamState out = stream(0.9 * in.velocity_m_s, 150.0, 1e5, 270.0);
  const PassageFigures f = balanced(in, out, 0.8, d);
  const double w1 = in.velocity_m_s;
  EXPECT_NEAR(f.blade_loss_w, 0.8 * 0.002 * 0.19 * w1 * w1, 1e-12 * f.supply_power_w);
  EXPECT_NEAR(f.spill_loss_w, 0.2 * 0.002 * 400.0 * 400.0, 1e-12 * f.supply_power_w);
}

// At limit load the exit pressure is not that of the exhaust. Isentropic flow on to it, energy
// equation: w_2a^2/2 = w_2^2/2 + c_p T_2 (1 - (p/p_2)^((gamma-1)/gamma)). Gas that leaves below the
// exhaust pressure carries off less than its velocity.
TEST(PowerBalance, CountsAnExitPressureOtherThanTheExhaustAsLeaving) {
  const WheelDuty d = duty();
  const StreamState in = jet_stream();
  for (const double pressure : {0.8e5, 1.2e5}) {
    const double cp = solver::heat_capacity(air), k = 2.0 / 7.0;
    StreamState out = in;  // no loss: total state kept
    out.angle_deg = 150.0;
    out.pressure_pa = pressure;
    out.velocity_m_s =
        std::sqrt(2.0 * cp * 270.0 * (1.0 - std::pow(pressure / in.total_pressure_pa, k)));
    const PassageFigures f = balanced(in, out, 1.0, d);
    const double scale = 1e-12 * f.supply_power_w,
                 temperature = 270.0 - 0.5 * out.velocity_m_s * out.velocity_m_s / cp;
    EXPECT_NEAR(f.entry_loss_w, 0.0, scale);
    EXPECT_NEAR(f.blade_loss_w, 0.0, scale);
    EXPECT_NEAR(f.leaving_loss_w,
                0.004 * (0.5 * std::pow(f.absolute_exit_velocity_m_s, 2) +
                         cp * temperature * (1.0 - std::pow(1e5 / pressure, k))),
                scale);
    EXPECT_NEAR(f.power_w + all_losses(f), f.supply_power_w, scale);
  }
}

// A passage that draws the jet in faster, at its angle, is given tangential momentum that the jet
// does not have (momentum theorem on the free jet ahead of the blades): it earns nothing.
TEST(PowerBalance, MomentumThatTheJetDoesNotHaveEarnsNothing) {
  const WheelDuty d = duty();
  const StreamState jet = jet_stream();
  StreamState in = jet;
  in.velocity_m_s *= 1.1;
  PassageFigures f;
  f.inlet = in;
  f.capacity_ratio = 0.99;
  EXPECT_EQ(surplus_tangential_velocity(f, d), 0.0);
  f.capacity_ratio = 1.08;
  EXPECT_NEAR(surplus_tangential_velocity(f, d), 0.1 * (400.0 * std::cos(20.0 * degree) - 120.0),
              1e-10);
  const PassageFigures balance = balanced(in, stream(200.0, 150.0, 1e5, 270.0), 1.08, d);
  EXPECT_NEAR(balance.entry_loss_w, 0.0, 1e-12 * balance.supply_power_w);
  EXPECT_NEAR(balance.power_w + all_losses(balance), balance.supply_power_w,
              1e-12 * balance.supply_power_w);
  f.inlet.velocity_m_s = 0.9 * jet.velocity_m_s;
  EXPECT_EQ(surplus_tangential_velocity(f, d), 0.0);
}

// A jet that narrows while the row draws it in, at its own tangential velocity, loses nothing.
TEST(PowerBalance, JetThatIsDrawnInLosesNothingAtTheEntry) {
  const WheelDuty d = duty();
  const StreamState jet = jet_stream();
  const double tangential = jet.velocity_m_s * std::cos(jet.angle_deg * degree);
  const double axial = 1.2 * jet.velocity_m_s * std::sin(jet.angle_deg * degree);
  StreamState in = jet;
  in.velocity_m_s = std::hypot(tangential, axial);
  in.angle_deg = std::atan2(axial, tangential) / degree;
  const PassageFigures f = balanced(in, stream(200.0, 150.0, 1e5, 270.0), 1.15, d);
  EXPECT_NEAR(f.entry_loss_w, 0.0, 1e-12 * f.supply_power_w);
  EXPECT_NEAR(f.spill_loss_w, 0.0, 1e-12 * f.supply_power_w);
}

// Total pressure lost ahead of the row moves from the blades' account to that of the entry.
TEST(PowerBalance, TotalPressureLostAheadOfTheRowCountsAsEntry) {
  const WheelDuty d = duty();
  StreamState in = jet_stream();
  const StreamState out = stream(200.0, 150.0, 1e5, 270.0);
  const PassageFigures before = balanced(in, out, 1.0, d);
  in.total_pressure_pa *= 0.95;
  const PassageFigures behind = balanced(in, out, 1.0, d);
  EXPECT_GT(behind.entry_loss_w, before.entry_loss_w);
  EXPECT_NEAR(behind.entry_loss_w + behind.blade_loss_w, before.entry_loss_w + before.blade_loss_w,
              1e-12 * before.supply_power_w);
}

}  // namespace
}  // namespace falcate::post
