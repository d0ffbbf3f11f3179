/// A quantity written with its unit ("6 bar(g)", "44 mm", "60000 rpm", "20 degC") as an SI value.
/// Units are those of UDUNITS-2. A pressure carries its datum as (a)/(g) or in the unit's name
/// (bara, psig). Gauge pressures are returned above the atmosphere; the caller adds it.
/// Errors: `QuantityError`, plain words with the remedy. Thread-safe.
#pragma once
#include <stdexcept>
#include <string>

namespace falcate::cases {

enum class Dimension {
  none,
  length,
  angle,
  pressure,           ///< of a stream: must say absolute or gauge
  absolute_pressure,  ///< of the atmosphere: absolute, said or not
  stress,
  temperature,
  rotational_speed,
  gas_constant,
  viscosity,
  density
};

class QuantityError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

enum class PressureDatum { none, absolute, gauge };

struct Quantity {
  double value = 0.0;  ///< SI: m, rad, Pa, K, rad/s, J/(kg K), Pa s, kg/m3
  PressureDatum datum = PressureDatum::none;
};

Quantity parse_quantity(const std::string& text, Dimension dimension);

/// SI value -> number in `unit`; a datum suffix such as (a) on the unit is ignored.
double from_si(double value, const std::string& unit, Dimension dimension);

/// "a length", "an angle", ... and a unit to offer in messages.
const char* dimension_name(Dimension dimension);
const char* example_of(Dimension dimension);

}  // namespace falcate::cases
