// The exact Riemann solution against star values and wave speeds of Toro's test problems
// (tests/data/riemann_star_values.csv names the source), and against closed forms.
#include "solver/exact_riemann.h"

#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

namespace falcate::solver {
namespace {

constexpr double gamma = 1.4;

std::vector<std::string> parts(const std::string& line, char separator) {
  std::vector<std::string> out;
  std::istringstream in(line);
  for (std::string part; std::getline(in, part, separator);) out.push_back(part);
  return out;
}

/// Half a unit of the last printed digit.
double half_digit(const std::string& text) {
  const auto point = text.find('.');
  const auto decimals = point == std::string::npos ? 0 : text.size() - point - 1;
  return 0.5000001 * std::pow(10.0, -static_cast<double>(decimals));
}

void expect_printed(double value, const std::string& text, const std::string& what) {
  EXPECT_NEAR(value, std::stod(text), half_digit(text)) << what;
}

struct Problem {
  std::string name;
  RiemannSide left, right;
  std::vector<std::string> columns;
};

std::vector<Problem> problems() {
  std::ifstream file(FALCATE_SOURCE_DIR "/tests/data/riemann_star_values.csv");
  std::vector<Problem> out;
  std::string line;
  std::getline(file, line);
  std::getline(file, line);
  while (std::getline(file, line)) {
    const auto c = parts(line, ',');
    const auto number = [&](std::size_t k) { return std::stod(c.at(k)); };
    out.push_back(
        {c.at(0), {number(1), number(2), number(3)}, {number(4), number(5), number(6)}, c});
  }
  return out;
}

TEST(ExactRiemann, StarValuesOfTheTable) {
  const auto all = problems();
  ASSERT_EQ(all.size(), 7u);
  for (const auto& p : all) {
    const auto star = riemann_star(p.left, p.right, gamma);
    expect_printed(star.pressure, p.columns[7], p.name + " pressure");
    expect_printed(star.velocity, p.columns[8], p.name + " velocity");
    expect_printed(star.density_left, p.columns[9], p.name + " density left");
    expect_printed(star.density_right, p.columns[10], p.name + " density right");
  }
}

bool same(const RiemannSide& a, const RiemannSide& b, double relative) {
  return std::abs(a.density - b.density) < relative * b.density &&
         std::abs(a.pressure - b.pressure) < relative * b.pressure;
}

/// A head (SH) or shock (S) parts the outer state from what lies within, a tail (ST) or shock the
/// star state from what lies without. Across a shock the state jumps between neighbouring rays.
void expect_wave(const Problem& p, const std::string& name, double speed) {
  const bool left = name.back() == 'L';
  const auto star = riemann_star(p.left, p.right, gamma);
  const RiemannSide inner{left ? star.density_left : star.density_right, star.velocity,
                          star.pressure};
  const double out = left ? -1.0 : 1.0, step = 1e-3 * (1.0 + std::abs(speed));
  const auto outside = riemann_state(p.left, p.right, gamma, speed + out * step);
  const auto inside = riemann_state(p.left, p.right, gamma, speed - out * step);
  const bool head = name[1] == 'H', tail = name[1] == 'T';
  EXPECT_EQ(same(outside, left ? p.left : p.right, 1e-12), !tail) << p.name << " " << name;
  EXPECT_EQ(same(inside, inner, 1e-12), !head) << p.name << " " << name;
}

TEST(ExactRiemann, WavesOfTheTable) {
  int count = 0;
  for (const auto& p : problems())
    for (const auto& wave : parts(p.columns.at(11), ';')) {
      const auto pair = parts(wave.substr(wave.find_first_not_of(' ')), '=');
      expect_wave(p, pair.at(0), std::stod(pair.at(1)));
      ++count;
    }
  EXPECT_EQ(count, 21);
}

// Along a rarefaction: u + 2a/(gamma-1) and p/rho^gamma are those of the left state, x/t = u - a.
TEST(ExactRiemann, FanKeepsItsInvariants) {
  const RiemannSide l{1.0, 0.0, 1.0}, r{0.125, 0.0, 0.1};
  for (double s = -1.15; s < -0.1; s += 0.1) {
    const auto q = riemann_state(l, r, gamma, s);
    const double a = std::sqrt(gamma * q.pressure / q.density);
    EXPECT_NEAR(q.velocity - a, s, 1e-14);
    EXPECT_NEAR(q.velocity + 5.0 * a, 5.0 * std::sqrt(gamma), 1e-13);
    EXPECT_NEAR(q.pressure, std::pow(q.density, gamma), 1e-14);
  }
}

TEST(ExactRiemann, MirroredProblemHasTheMirroredAnswer) {
  const RiemannSide l{1.0, 0.75, 1.0}, r{0.125, 0.0, 0.1}, ml{0.125, 0.0, 0.1}, mr{1.0, -0.75, 1.0};
  for (double s = -2.0; s < 3.0; s += 0.13) {
    const auto q = riemann_state(l, r, gamma, s), m = riemann_state(ml, mr, gamma, -s);
    EXPECT_NEAR(q.density, m.density, 1e-14);
    EXPECT_NEAR(q.velocity, -m.velocity, 1e-14);
    EXPECT_NEAR(q.pressure, m.pressure, 1e-14);
  }
}

TEST(ExactRiemann, RefusesAVacuum) {
  try {
    riemann_star({1.0, -10.0, 1.0}, {1.0, 10.0, 1.0}, gamma);
    FAIL() << "a vacuum has no star state";
  } catch (const std::invalid_argument& error) {
    EXPECT_STREQ(error.what(), "the two states part so fast that a vacuum opens between them");
  }
}

}  // namespace
}  // namespace falcate::solver
