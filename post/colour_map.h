/// The colours of filled contours, for screen, print and colour-blind readers: lightness rises
/// evenly from dark to light, so that the order of values survives in grey, while the hue goes
/// from indigo through rose to straw.
///   In OKLab's polar form, for t from 0 to 1:
///   L = 0.27 + 0.68 t,  hue = 278 deg + 182 deg t,  C = min(0.035 + 0.125 sin(pi t), gamut limit).
/// OKLab: B. Ottosson, "A perceptual color space for image processing", 2020 (matrices from
/// memory). sRGB transfer curve: IEC 61966-2-1. Values outside 0..1 take the end colours.
#pragma once
#include <array>
#include <string>

namespace falcate::post {

/// sRGB, each 0..1.
std::array<double, 3> map_colour(double t);

/// The same as "#rrggbb".
std::string map_colour_hex(double t);

}  // namespace falcate::post
