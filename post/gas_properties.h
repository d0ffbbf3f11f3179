/// Named working gases: heat capacity ratio, gas constant and viscosity.
///   mu(T) = mu_ref (T/T_ref)^1.5 (T_ref + S) / (T + S)     (Sutherland)
/// SI units. Source: beside each row of the table. Limits: ideal gas with constant heat capacities
/// near room temperature (steam: superheated, 400 to 700 K).
#pragma once
#include <string_view>
#include <vector>

#include "solver/gas.h"

namespace falcate::post {

struct NamedGas {
  const char* name;   ///< as in a case file
  const char* title;  ///< for people
  solver::Gas gas;
  double reference_viscosity;    ///< mu_ref, Pa s
  double reference_temperature;  ///< T_ref, K
  double sutherland_constant;    ///< S, K
  const char* source;
};

const std::vector<NamedGas>& named_gases();
/// Null where no gas has that name.
const NamedGas* find_gas(std::string_view name);
double viscosity(const NamedGas& gas, double temperature);  ///< Pa s

}  // namespace falcate::post
