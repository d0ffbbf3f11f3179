#include "cases/quantity.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <thread>
#include <vector>

namespace falcate::cases {
namespace {

constexpr double bar = 1e5;
constexpr double psi = 6894.757293168;  // Pa; exact from lb and inch, NIST SP 811

struct Good {
  const char* text;
  Dimension dimension;
  double value;
  PressureDatum datum;
};

TEST(Quantity, ReadsEachKindWithItsUnit) {
  const std::vector<Good> table{
      {"44 mm", Dimension::length, 0.044, PressureDatum::none},
      {"0.5 inch", Dimension::length, 0.0127, PressureDatum::none},
      {"20 deg", Dimension::angle, std::numbers::pi / 9.0, PressureDatum::none},
      {"0.3 rad", Dimension::angle, 0.3, PressureDatum::none},
      {"6 bar(g)", Dimension::pressure, 6 * bar, PressureDatum::gauge},
      {"6bar(a)", Dimension::pressure, 6 * bar, PressureDatum::absolute},
      {"6 bar (a)", Dimension::pressure, 6 * bar, PressureDatum::absolute},
      {"6 bar abs", Dimension::pressure, 6 * bar, PressureDatum::absolute},
      {"6 bar gauge", Dimension::pressure, 6 * bar, PressureDatum::gauge},
      {"6 bara", Dimension::pressure, 6 * bar, PressureDatum::absolute},
      {"6 barg", Dimension::pressure, 6 * bar, PressureDatum::gauge},
      {"80 psia", Dimension::pressure, 80 * psi, PressureDatum::absolute},
      {"80 psig", Dimension::pressure, 80 * psi, PressureDatum::gauge},
      {"101.325 kPa(a)", Dimension::pressure, 101325.0, PressureDatum::absolute},
      {"250 kPa(g)", Dimension::pressure, 250e3, PressureDatum::gauge},
      {"0.6 MPa(a)", Dimension::pressure, 6 * bar, PressureDatum::absolute},
      {"100000 Pa(a)", Dimension::pressure, bar, PressureDatum::absolute},
      {"950 hPa", Dimension::absolute_pressure, 95e3, PressureDatum::none},
      {"20 degC", Dimension::temperature, 293.15, PressureDatum::none},
      {"-40 degF", Dimension::temperature, 233.15, PressureDatum::none},
      {"300 K", Dimension::temperature, 300.0, PressureDatum::none},
      {"60000 rpm", Dimension::rotational_speed, 2000.0 * std::numbers::pi, PressureDatum::none},
      {"6e4 rpm", Dimension::rotational_speed, 2000.0 * std::numbers::pi, PressureDatum::none},
      {"600 rev/min", Dimension::rotational_speed, 20.0 * std::numbers::pi, PressureDatum::none},
      {"100 rad/s", Dimension::rotational_speed, 100.0, PressureDatum::none},
      {"188.9 J/(kg K)", Dimension::gas_constant, 188.9, PressureDatum::none},
      {"1.5e-5 Pa s", Dimension::viscosity, 1.5e-5, PressureDatum::none},
      {"7.8 g/cm3", Dimension::density, 7800.0, PressureDatum::none},
      {"120 MPa", Dimension::stress, 120e6, PressureDatum::none},
      {"120 N/mm2", Dimension::stress, 120e6, PressureDatum::none},
      {"+5 mm", Dimension::length, 0.005, PressureDatum::none},
  };
  for (const Good& row : table) {
    SCOPED_TRACE(row.text);
    const Quantity quantity = parse_quantity(row.text, row.dimension);
    EXPECT_NEAR(quantity.value, row.value, 1e-9 * std::abs(row.value));
    EXPECT_EQ(quantity.datum, row.datum);
  }
}

struct Bad {
  const char* text;
  Dimension dimension;
  const char* message;
};

TEST(Quantity, SaysWhatIsWrongWithABadOne) {
  const std::vector<Bad> table{
      {"6 bar", Dimension::pressure,
       "a pressure must say absolute or gauge: write \"6 bar(a)\" or \"6 bar(g)\""},
      {"90 psi", Dimension::pressure,
       "a pressure must say absolute or gauge: write \"90 psi(a)\" or \"90 psi(g)\""},
      {"1 bar(g)", Dimension::absolute_pressure, "must be absolute: write \"1 bar(a)\""},
      {"44", Dimension::length, "the unit is missing; give a length, such as \"44 mm\""},
      {"44 bar", Dimension::length,
       "\"bar\" is not a unit of length; give a length, such as \"44 mm\""},
      {"44 milimetre", Dimension::length,
       "\"milimetre\" is no known unit; give a length, such as \"44 mm\""},
      {"20 C", Dimension::temperature,
       "\"C\" is not a unit of temperature; give a temperature; write \"degC\" for degrees"},
      {"1000 Hz", Dimension::rotational_speed,
       "\"Hz\" is not a unit of rotational speed; give a rotational speed, such as \"60000 rpm\""},
      {"20 %", Dimension::angle, "\"%\" is not a unit of angle; give an angle, such as \"20 deg\""},
      {"fast", Dimension::rotational_speed, "must be a number and a unit, such as \"60000 rpm\""},
      {"", Dimension::length, "must be a number and a unit, such as \"44 mm\""},
      {"nan mm", Dimension::length, "must be a number and a unit, such as \"44 mm\""},
      {"1e999 mm", Dimension::length, "the number is too large or too small"},
      {"60,000 rpm", Dimension::rotational_speed,
       "a number has a point before its decimals and no comma, such as \"6.5\" or \"60000\""},
  };
  for (const Bad& row : table) {
    SCOPED_TRACE(row.text);
    try {
      parse_quantity(row.text, row.dimension);
      ADD_FAILURE() << "was read";
    } catch (const QuantityError& error) {
      EXPECT_STREQ(error.what(), row.message);
    }
  }
}

TEST(Quantity, GoesBackToTheUnitOfPeople) {
  EXPECT_NEAR(from_si(293.15, "degC", Dimension::temperature), 20.0, 1e-9);
  EXPECT_NEAR(from_si(6e5, "bar(a)", Dimension::pressure), 6.0, 1e-12);
  EXPECT_NEAR(from_si(std::numbers::pi, "deg", Dimension::angle), 180.0, 1e-12);
}

TEST(Quantity, IsSafeToReadFromSeveralThreads) {
  std::vector<std::jthread> threads;
  std::vector<double> values(4, 0.0);
  for (std::size_t i = 0; i < values.size(); ++i)
    threads.emplace_back([&values, i] {
      for (int k = 0; k < 200; ++k)
        values[i] += parse_quantity("1 bar(a)", Dimension::pressure).value;
    });
  threads.clear();
  for (const double value : values) EXPECT_NEAR(value, 200e5, 1e-3);
}

}  // namespace
}  // namespace falcate::cases
