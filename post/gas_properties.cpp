#include "post/gas_properties.h"

#include <cassert>
#include <cmath>

namespace falcate::post {

// Gas constants: universal constant 8314.462618 J/(kmol K) (CODATA 2018) over the molar mass.
const std::vector<NamedGas>& named_gases() {
  static const char* const white =
      "heat capacity ratio at 300 K: common practice; viscosity: White, Viscous Fluid Flow, "
      "table 1-2 (from memory)";
  static const std::vector<NamedGas> gases = {
      {"air", "dry air", {1.400, 287.05}, 1.716e-5, 273.0, 111.0, white},
      {"nitrogen", "nitrogen", {1.400, 296.80}, 1.663e-5, 273.0, 107.0, white},
      {"carbon-dioxide", "carbon dioxide", {1.289, 188.92}, 1.370e-5, 273.0, 222.0, white},
      {"argon", "argon", {1.667, 208.13}, 2.125e-5, 273.0, 144.0, white},
      {"helium",
       "helium",
       {1.667, 2077.26},
       1.870e-5,
       273.15,
       79.4,
       "heat capacity ratio: monatomic gas; viscosity: common practice (from memory)"},
      {"steam-ideal",
       "superheated steam taken as an ideal gas",
       {1.300, 461.52},
       1.120e-5,
       350.0,
       1064.0,
       "heat capacity ratio 1.3: common practice for superheated steam; viscosity: White, Viscous "
       "Fluid Flow, table 1-2 (from memory)"},
  };
  return gases;
}

const NamedGas* find_gas(std::string_view name) {
  for (const NamedGas& gas : named_gases())
    if (name == gas.name) return &gas;
  return nullptr;
}

double viscosity(const NamedGas& gas, double temperature) {
  assert(temperature > 0.0);
  return gas.reference_viscosity * std::pow(temperature / gas.reference_temperature, 1.5) *
         (gas.reference_temperature + gas.sutherland_constant) /
         (temperature + gas.sutherland_constant);
}

}  // namespace falcate::post
