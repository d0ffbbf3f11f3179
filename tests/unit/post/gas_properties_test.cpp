#include "post/gas_properties.h"

#include <gtest/gtest.h>

#include <cmath>
#include <map>
#include <string>

namespace falcate::post {
namespace {

// Molar masses kg/kmol: IUPAC standard atomic weights; dry air: US Standard Atmosphere 1976.
TEST(GasProperties, GasConstantIsTheUniversalOneOverTheMolarMass) {
  const std::map<std::string, double> molar_mass = {
      {"air", 28.9644},  {"nitrogen", 28.0134}, {"carbon-dioxide", 44.0095},
      {"argon", 39.948}, {"helium", 4.002602},  {"steam-ideal", 18.01528}};
  ASSERT_EQ(named_gases().size(), molar_mass.size());
  for (const NamedGas& gas : named_gases()) {
    const double universal = 8314.462618;  // CODATA 2018
    const double expected = universal / molar_mass.at(gas.name);
    EXPECT_NEAR(gas.gas.gas_constant, expected, 5e-5 * expected) << gas.name;
    EXPECT_GT(std::string(gas.source).size(), 20u) << gas.name;
  }
}

// Monatomic gases: 5/3; diatomic: 7/5 (kinetic theory).
TEST(GasProperties, HeatCapacityRatios) {
  EXPECT_NEAR(find_gas("argon")->gas.heat_capacity_ratio, 5.0 / 3.0, 1e-3);
  EXPECT_NEAR(find_gas("helium")->gas.heat_capacity_ratio, 5.0 / 3.0, 1e-3);
  EXPECT_NEAR(find_gas("nitrogen")->gas.heat_capacity_ratio, 7.0 / 5.0, 1e-3);
  // cp 0.846 and cv 0.657 kJ/(kg K) at 300 K: common property tables (from memory).
  EXPECT_NEAR(find_gas("carbon-dioxide")->gas.heat_capacity_ratio, 0.846 / 0.657, 3e-3);
}

// US Standard Atmosphere 1976: mu = 1.458e-6 T^1.5/(T + 110.4); 1.7894e-5 Pa s at 288.15 K.
TEST(GasProperties, ViscosityOfAir) {
  EXPECT_NEAR(viscosity(*find_gas("air"), 288.15), 1.7894e-5, 0.005 * 1.7894e-5);
  for (double t : {250.0, 350.0, 500.0}) {
    const double standard = 1.458e-6 * t * std::sqrt(t) / (t + 110.4);
    EXPECT_NEAR(viscosity(*find_gas("air"), t), standard, 0.006 * standard) << t;
  }
}

// Dilute-gas viscosities at 300 K, uPa s: CRC Handbook (from memory).
TEST(GasProperties, ViscosityOfTheOthers) {
  EXPECT_NEAR(viscosity(*find_gas("nitrogen"), 300.0), 17.9e-6, 0.02 * 17.9e-6);
  EXPECT_NEAR(viscosity(*find_gas("carbon-dioxide"), 300.0), 15.0e-6, 0.02 * 15.0e-6);
  EXPECT_NEAR(viscosity(*find_gas("argon"), 300.0), 22.9e-6, 0.02 * 22.9e-6);
  EXPECT_NEAR(viscosity(*find_gas("helium"), 300.0), 20.0e-6, 0.02 * 20.0e-6);
  EXPECT_NEAR(viscosity(*find_gas("steam-ideal"), 400.0), 13.3e-6, 0.03 * 13.3e-6);
}

TEST(GasProperties, UnknownGasIsNull) {
  EXPECT_EQ(find_gas("phlogiston"), nullptr);
  EXPECT_EQ(find_gas(""), nullptr);
}

}  // namespace
}  // namespace falcate::post
