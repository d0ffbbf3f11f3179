#include "post/colour_map.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>

namespace falcate::post {
namespace {

std::array<double, 3> oklch_to_linear_srgb(double lightness, double chroma, double hue) {
  const double a = chroma * std::cos(hue), b = chroma * std::sin(hue);
  const double l = std::pow(lightness + 0.3963377774 * a + 0.2158037573 * b, 3);
  const double m = std::pow(lightness - 0.1055613458 * a - 0.0638541728 * b, 3);
  const double s = std::pow(lightness - 0.0894841775 * a - 1.2914855480 * b, 3);
  return {4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s,
          -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s,
          -0.0041960863 * l - 0.7034186147 * m + 1.7076147010 * s};
}

bool in_gamut(const std::array<double, 3>& rgb) {
  return std::all_of(rgb.begin(), rgb.end(), [](double c) { return c >= 0.0 && c <= 1.0; });
}

double encode(double linear) {
  return linear <= 0.0031308 ? 12.92 * linear : 1.055 * std::pow(linear, 1.0 / 2.4) - 0.055;
}

}  // namespace

std::array<double, 3> map_colour(double t) {
  t = std::clamp(t, 0.0, 1.0);
  const double lightness = 0.27 + 0.68 * t;
  const double hue = (278.0 + 182.0 * t) * std::numbers::pi / 180.0;
  double chroma = 0.035 + 0.125 * std::sin(std::numbers::pi * t);
  auto rgb = oklch_to_linear_srgb(lightness, chroma, hue);
  while (!in_gamut(rgb) && chroma > 0.0) {
    chroma -= 0.001;
    rgb = oklch_to_linear_srgb(lightness, std::max(chroma, 0.0), hue);
  }
  for (double& c : rgb) c = encode(std::clamp(c, 0.0, 1.0));
  return rgb;
}

std::string map_colour_hex(double t) {
  const auto rgb = map_colour(t);
  const auto byte = [](double c) { return static_cast<int>(std::lround(255.0 * c)); };
  return fmt::format("#{:02x}{:02x}{:02x}", byte(rgb[0]), byte(rgb[1]), byte(rgb[2]));
}

}  // namespace falcate::post
