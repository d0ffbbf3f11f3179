// Steady modes of the linearised Euler equations at the in- and outflow planes: those that leave go
// through as they are, but for the second order in their amplitude; those that would come in do
// not.
//   exp(i (k x + l y)), density and speed of sound of the mean 1, stream (u, v):
//   sound: (u k + v l)^2 = k^2 + l^2, du = -k dp/W, dv = -l dp/W, drho = dp, W = u k + v l
//   vorticity and entropy: u k + v l = 0
// Source: Giles, AIAA J. 28(12) (1990) 2050-2058; modes derived here from the equations.
#include <gtest/gtest.h>

#include <complex>
#include <numbers>
#include <string>

#include "solver/inlet.h"
#include "solver/outlet.h"

namespace falcate::solver {
namespace {

using Complex = std::complex<double>;
using Mode = std::array<Complex, 4>;  ///< density, u, v, pressure; mean density and sound speed 1
constexpr double gamma = 1.4;
constexpr Complex i1(0.0, 1.0);

struct Stream {
  const char* name;
  double mach, angle_deg;
};
const Stream streams[] = {{"subsonic", 0.5, 40},
                          {"falling", 0.5, 130},
                          {"supersonic", 1.5, 30},
                          {"falling_fast", 1.5, 150}};

/// Of the two sound waves the one whose influence goes downstream (+1) or upstream (-1) in x.
/// Below Mach 1 it decays that way; above, its front lies along the Mach line that points that way.
Mode sound(double u, double v, double l, int direction) {
  const double m2 = u * u + v * v;
  Complex k;
  if (m2 < 1.0) {
    k = l * (u * v + static_cast<double>(direction) * i1 * std::sqrt(1.0 - m2)) / (1.0 - u * u);
  } else {
    const double side = v < 0.0 ? -1.0 : 1.0;
    const double front = std::atan2(v, u) - direction * side * std::asin(1.0 / std::sqrt(m2));
    EXPECT_EQ(std::cos(front) > 0.0, direction > 0);
    k = -l * std::tan(front);
  }
  const Complex w = u * k + v * l;
  EXPECT_LT(std::abs(w * w - k * k - l * l), 1e-12 * l * l);
  return {1.0, -k / w, -l / w, 1.0};
}

Mode vorticity(double u, double v, double l) {
  const double k = -v * l / u;
  return {0.0, l, -k, 0.0};
}

/// A plane of even faces, the uniform stream at total density and pressure 1, and ripples on it.
class PlaneModes : public testing::TestWithParam<Stream> {
 protected:
  static constexpr int faces = 48;
  static constexpr double pitch = 0.7;

  PlaneModes() {
    const double angle = GetParam().angle_deg * std::numbers::pi / 180.0, m = GetParam().mach;
    const double t = 1.0 / (1.0 + 0.5 * (gamma - 1.0) * m * m), w = m * std::sqrt(gamma * t);
    const double rho = std::pow(t, 1.0 / (gamma - 1.0));
    mean_ = {rho, w * std::sin(angle), w * std::cos(angle), rho * t};
    sound_ = std::sqrt(gamma * t);
    u_ = mean_[1] / sound_;
    v_ = mean_[2] / sound_;
    std::vector<double> lengths(faces, pitch / faces);
    for (int j = 0; j < faces; ++j) y_.push_back(pitch * (j + 0.5) / faces);
    waves_ = PlaneWaves(lengths, y_, pitch);
  }

  double wave_number(int harmonic) const { return 2.0 * std::numbers::pi * harmonic / pitch; }

  std::vector<State<double>> rippled(const Mode& mode, int harmonic, double amplitude) const {
    const State<double> unit = {mean_[0], sound_, sound_, mean_[0] * sound_ * sound_};
    std::vector<State<double>> cells(y_.size(), mean_);
    for (std::size_t j = 0; j < y_.size(); ++j) {
      const Complex turn = amplitude * std::exp(i1 * (wave_number(harmonic) * y_[j] + 0.4));
      for (std::size_t k = 0; k < 4; ++k) cells[j][k] += unit[k] * (mode[k] * turn).real();
    }
    return cells;
  }

  double outlet_miss(const Mode& mode, int harmonic, double amplitude) const {
    OutletStream s;
    s.gamma = gamma;
    s.pressure = mean_[3];
    s.u = u_;
    s.v = v_;
    s.impedance = mean_[0] * sound_;
    s.mach_squared = u_ * u_ + v_ * v_;
    const auto cells = rippled(mode, harmonic, amplitude);
    std::vector<State<double>> boundary(cells.size());
    outlet_states<double>(cells, s, waves_, boundary);
    return largest_difference(cells, boundary);
  }

  double inlet_miss(const Mode& mode, int harmonic, double amplitude) const {
    InletStream s;
    s.gamma = gamma;
    s.cotangent = v_ / u_;
    const double m2 = u_ * u_ + v_ * v_;
    s.regime = m2 > 1.0 ? InletRegime::simple_wave : InletRegime::subsonic;
    s.simple_wave = std::abs(std::atan2(v_, u_)) + prandtl_meyer(m2, gamma);
    s.u = u_;
    s.v = v_;
    s.impedance = mean_[0] * sound_;
    s.beta = std::sqrt(std::max(1.0 - m2, 0.0));
    const auto cells = rippled(mode, harmonic, amplitude);
    std::vector<State<double>> boundary(cells.size());
    inlet_states<double>(cells, s, waves_, boundary);
    return largest_difference(cells, boundary);
  }

  static double largest_difference(const std::vector<State<double>>& a,
                                   const std::vector<State<double>>& b) {
    double worst = 0.0;
    for (std::size_t j = 0; j < a.size(); ++j)
      for (std::size_t k = 0; k < 4; ++k) worst = std::max(worst, std::abs(a[j][k] - b[j][k]));
    return worst;
  }

  /// Second order: a tenth of the amplitude, a hundredth of what is sent back.
  template <class Miss>
  static void expect_second_order(const Miss& miss, const std::string& what) {
    const double large = miss(1e-3), small = miss(1e-4);
    EXPECT_LT(large, 5e-5) << what;
    EXPECT_LT(small, 1.1e-2 * large + 1e-14) << what;
  }

  State<double> mean_{};
  double sound_ = 0.0, u_ = 0.0, v_ = 0.0;
  std::vector<double> y_;
  PlaneWaves waves_;
};

TEST_P(PlaneModes, OutletLetsSoundOut) {
  for (const int harmonic : {1, 2, 5}) {
    const Mode mode = sound(u_, v_, wave_number(harmonic), +1);
    expect_second_order([&](double a) { return outlet_miss(mode, harmonic, a); },
                        "harmonic " + std::to_string(harmonic));
  }
}

TEST_P(PlaneModes, OutletLetsVorticityOut) {
  for (const int harmonic : {1, 3}) {
    Mode mode = vorticity(u_, v_, wave_number(harmonic));
    for (auto& part : mode) part /= wave_number(harmonic);
    expect_second_order([&](double a) { return outlet_miss(mode, harmonic, a); },
                        "harmonic " + std::to_string(harmonic));
  }
}

TEST_P(PlaneModes, OutletLetsEntropyOut) {
  const Mode mode = {1.0, 0.0, 0.0, 0.0};
  for (const int harmonic : {1, 3})
    expect_second_order([&](double a) { return outlet_miss(mode, harmonic, a); },
                        "harmonic " + std::to_string(harmonic));
}

TEST_P(PlaneModes, InletLetsSoundOut) {
  for (const int harmonic : {1, 2, 5}) {
    const Mode mode = sound(u_, v_, wave_number(harmonic), -1);
    expect_second_order([&](double a) { return inlet_miss(mode, harmonic, a); },
                        "harmonic " + std::to_string(harmonic));
  }
}

// What would come in from beyond is not taken over: the boundary differs in the first order.
TEST_P(PlaneModes, NeitherPlaneTakesOverIncomingWaves) {
  for (const int harmonic : {1, 2}) {
    const double l = wave_number(harmonic);
    EXPECT_GT(outlet_miss(sound(u_, v_, l, -1), harmonic, 1e-3), 2e-4);
    EXPECT_GT(inlet_miss(sound(u_, v_, l, +1), harmonic, 1e-3), 2e-4);
    EXPECT_GT(inlet_miss({1.0, 0.0, 0.0, 0.0}, harmonic, 1e-3), 2e-4) << "entropy";
  }
}

INSTANTIATE_TEST_SUITE_P(Streams, PlaneModes, testing::ValuesIn(streams),
                         [](const auto& info) { return std::string(info.param.name); });

}  // namespace
}  // namespace falcate::solver
