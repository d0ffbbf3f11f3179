#include "post/number_text.h"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

namespace falcate::post {
namespace {

TEST(NumberText, KeepsSignificantDigits) {
  EXPECT_EQ(number_text(0.0123456), "0.01235");
  EXPECT_EQ(number_text(9.9996), "10.00");
  EXPECT_EQ(number_text(-3.14159, 3), "\u22123.14");
  EXPECT_EQ(number_text(88123.0, 3), "88\u202f100");
  EXPECT_EQ(number_text(0.0), "0");
  EXPECT_EQ(number_text(1.5e9, 3), "1.50e+09");
  EXPECT_EQ(number_text(std::numeric_limits<double>::infinity()), "n/a");
  EXPECT_EQ(whole_number_text(44999.7), "45\u202f000");
  EXPECT_EQ(whole_number_text(0.0), "0");
}

TEST(NumberText, ValueEndsWhereItsErrorDoes) {
  EXPECT_EQ(number_with_error(61.2351, 0.3849), "61.24 ± 0.38");
  EXPECT_EQ(number_with_error(61.2351, 0.0996), "61.24 ± 0.10");
  EXPECT_EQ(number_with_error(101322.0, 123.0), "101\u202f320 ± 120");
  EXPECT_EQ(number_with_error(-12.3, 4.5), "\u221212.3 ± 4.5");
  EXPECT_EQ(number_with_error(1.0, 1e-13), "1.00000 ± 0.00010");
  EXPECT_EQ(number_with_error(1.2345678, 0.0), "1.235");
  EXPECT_EQ(number_with_error(1.2345678, std::nan("")), "1.235");
  EXPECT_EQ(number_with_error(std::nan(""), 0.1), "n/a");
}

TEST(NumberText, StepsAreRound) {
  EXPECT_DOUBLE_EQ(even_step(1.0, 20), 0.05);
  EXPECT_DOUBLE_EQ(even_step(46.0, 20), 2.5);
  EXPECT_DOUBLE_EQ(even_step(7.0e5, 5), 2.0e5);
}

}  // namespace
}  // namespace falcate::post
