#include "post/colour_map.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

namespace falcate::post {
namespace {

double linear(double c) { return c <= 0.04045 ? c / 12.92 : std::pow((c + 0.055) / 1.055, 2.4); }

/// CIE lightness of an sRGB colour, 0..100 (IEC 61966-2-1 luminance weights, CIE 1976 L*).
double lightness(const std::array<double, 3>& rgb) {
  const double y = 0.2126 * linear(rgb[0]) + 0.7152 * linear(rgb[1]) + 0.0722 * linear(rgb[2]);
  return y > 0.008856 ? 116.0 * std::cbrt(y) - 16.0 : 903.3 * y;
}

/// What remains for an eye without middle-wave cones (Machado, Oliveira & Fernandes 2009, severity
/// 1; matrix from memory).
std::array<double, 3> without_green_cones(const std::array<double, 3>& c) {
  return {std::clamp(0.367322 * c[0] + 0.860646 * c[1] - 0.227968 * c[2], 0.0, 1.0),
          std::clamp(0.280085 * c[0] + 0.672501 * c[1] + 0.047413 * c[2], 0.0, 1.0),
          std::clamp(-0.011820 * c[0] + 0.042940 * c[1] + 0.968881 * c[2], 0.0, 1.0)};
}

TEST(ColourMap, LightnessRisesEvenlyFromDarkToLight) {
  const double range = lightness(map_colour(1.0)) - lightness(map_colour(0.0));
  EXPECT_GT(range, 65.0);
  for (int i = 0; i < 50; ++i) {
    const double step = lightness(map_colour((i + 1) / 50.0)) - lightness(map_colour(i / 50.0));
    EXPECT_GT(step, 0.5 * range / 50.0) << i;
    EXPECT_LT(step, 1.6 * range / 50.0) << i;
  }
}

TEST(ColourMap, OrderSurvivesWithoutGreenCones) {
  for (int i = 0; i < 20; ++i) {
    EXPECT_GT(lightness(without_green_cones(map_colour((i + 1) / 20.0))),
              lightness(without_green_cones(map_colour(i / 20.0))) + 1.0)
        << i;
  }
}

TEST(ColourMap, ValuesOutsideTakeTheEndColours) {
  EXPECT_EQ(map_colour_hex(-3.0), map_colour_hex(0.0));
  EXPECT_EQ(map_colour_hex(7.0), map_colour_hex(1.0));
  EXPECT_EQ(map_colour_hex(0.5).size(), 7u);
}

}  // namespace
}  // namespace falcate::post
