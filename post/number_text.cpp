#include "post/number_text.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstddef>

namespace falcate::post {
namespace {

int exponent_of(double value) { return static_cast<int>(std::floor(std::log10(std::abs(value)))); }

double rounded_to_place(double value, int place) {
  const double unit = std::pow(10.0, place);
  return std::round(value / unit) * unit;
}

std::string thousands_apart(std::string text) {
  const std::size_t point = std::min(text.find('.'), text.size());
  if (point < 5) return text;
  for (std::size_t at = point; at > 3;) {
    at -= 3;
    text.insert(at, "\u202f");
  }
  return text;
}

/// `place` is the power of ten of the last digit shown.
std::string fixed(double value, int place) {
  std::string text = fmt::format("{:.{}f}", place > 0 ? rounded_to_place(value, place) : value,
                                 std::max(0, -place));
  if (text.find_first_not_of("-0.") == std::string::npos && text.front() == '-') text.erase(0, 1);
  if (text.front() == '-') return "\u2212" + thousands_apart(text.substr(1));
  return thousands_apart(text);
}

}  // namespace

std::string number_text(double value, int digits) {
  if (!std::isfinite(value)) return "n/a";
  if (value == 0.0) return "0";
  int exponent = exponent_of(value);
  if (exponent_of(rounded_to_place(value, exponent - digits + 1)) > exponent) ++exponent;
  if (exponent < -4 || exponent >= 7) return fmt::format("{:.{}e}", value, digits - 1);
  return fixed(value, exponent - digits + 1);
}

std::string whole_number_text(double value) {
  return std::isfinite(value) ? fixed(value, 0) : "n/a";
}

std::string number_with_error(double value, double error) {
  if (!std::isfinite(value)) return "n/a";
  if (!std::isfinite(error) || error <= 0.0) return number_text(value);
  error = std::max(error, 1e-4 * std::abs(value));
  int place = exponent_of(error) - 1;
  if (exponent_of(rounded_to_place(error, place)) > place + 1) ++place;
  if (place < -7 || exponent_of(std::max(error, std::abs(value))) >= 8) {
    return fmt::format("{} ± {:.1e}", number_text(value), error);
  }
  return fixed(value, place) + " ± " + fixed(error, place);
}

double even_step(double range, int count) {
  const double raw = range / count;
  const double power = std::pow(10.0, std::floor(std::log10(raw)));
  for (const double step : {1.0, 2.0, 2.5, 5.0}) {
    if (raw <= step * power * (1.0 + 1e-9)) return step * power;
  }
  return 10.0 * power;
}

}  // namespace falcate::post
