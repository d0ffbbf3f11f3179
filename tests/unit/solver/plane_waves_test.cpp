// The discrete circle Hilbert transform on pure harmonics: cos becomes sin, sin becomes -cos.
#include "solver/plane_waves.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace falcate::solver {
namespace {

constexpr double pitch = 0.013;

struct Faces {
  std::vector<double> lengths, centres;
};

/// `stretch` 0: even; else face ends y = pitch (s + stretch sin(2 pi s)/(2 pi)).
Faces faces(int n, double stretch) {
  const auto end = [&](int i) {
    const double s = static_cast<double>(i) / n;
    return pitch * (s + stretch * std::sin(2.0 * std::numbers::pi * s) / (2.0 * std::numbers::pi));
  };
  Faces f;
  for (int i = 0; i < n; ++i) {
    f.lengths.push_back(end(i + 1) - end(i));
    f.centres.push_back(0.5 * (end(i + 1) + end(i)));
  }
  return f;
}

/// Largest error over both transforms of harmonic l.
double worst_error(const Faces& f, int l) {
  const PlaneWaves waves(f.lengths, f.centres, pitch);
  std::vector<double> c, s;
  for (const double y : f.centres) {
    const double phase = 2.0 * std::numbers::pi * l * y / pitch;
    c.push_back(std::cos(phase));
    s.push_back(std::sin(phase));
  }
  double worst = 0.0;
  for (std::size_t i = 0; i < c.size(); ++i) {
    worst = std::max(worst, std::abs(waves.hilbert<double>(c, i) - s[i]));
    worst = std::max(worst, std::abs(waves.hilbert<double>(s, i) + c[i]));
  }
  return worst;
}

TEST(PlaneWaves, TransformsEachHarmonicExactlyOnEvenFaces) {
  for (const int n : {7, 16, 33})
    for (int l = 1; 2 * l < n; ++l)
      EXPECT_LT(worst_error(faces(n, 0.0), l), 1e-12) << n << " faces, harmonic " << l;
}

// On uneven faces the sums are quadratures, second order in the length of a face for a smooth
// distribution of faces.
TEST(PlaneWaves, TransformsLowHarmonicsToSecondOrderOnUnevenFaces) {
  for (int l = 1; l <= 3; ++l) {
    const double coarse = worst_error(faces(48, 0.3), l), fine = worst_error(faces(96, 0.3), l);
    EXPECT_LT(coarse, 0.03) << "harmonic " << l;
    EXPECT_GT(std::log2(coarse / fine), 1.8) << "harmonic " << l;
  }
}

TEST(PlaneWaves, GivesNothingForAnEvenField) {
  const Faces f = faces(20, 0.0);
  const PlaneWaves waves(f.lengths, f.centres, pitch);
  const std::vector<double> same(20, 3.7);
  EXPECT_NEAR(waves.mean<double>(same), 3.7, 1e-14);
  for (std::size_t i = 0; i < 20; ++i) EXPECT_NEAR(waves.hilbert<double>(same, i), 0.0, 1e-12);
}

TEST(PlaneWaves, WeighsByLength) {
  const PlaneWaves waves({1.0, 3.0}, {0.5, 2.5}, 4.0);
  EXPECT_DOUBLE_EQ(waves.weight(0), 0.25);
  EXPECT_DOUBLE_EQ(waves.mean<double>(std::vector<double>{1.0, 5.0}), 4.0);
  EXPECT_TRUE(waves.periodic());
}

TEST(PlaneWaves, LeavesTheTransformOutWithoutAPeriod) {
  const PlaneWaves waves({1.0, 1.0, 1.0}, {0.5, 1.5, 2.5}, 0.0);
  EXPECT_FALSE(waves.periodic());
  EXPECT_EQ(waves.hilbert<double>(std::vector<double>{1.0, 2.0, 4.0}, 1), 0.0);
}

}  // namespace
}  // namespace falcate::solver
