// Derivatives of dual numbers against derivatives of the calculus books, written out.
#include "solver/dual.h"

#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <string>

namespace falcate::solver {
namespace {

using D = Dual<2>;

struct Rule {
  const char* name;
  std::function<D(const D&, const D&)> dual;
  std::function<double(double, double)> value, by_x, by_y;
};

double one(double, double) { return 1.0; }
double none(double, double) { return 0.0; }

const Rule rules[] = {
    {"sum", [](D x, D y) { return x + y; }, [](double x, double y) { return x + y; }, one, one},
    {"difference", [](D x, D y) { return x - y; }, [](double x, double y) { return x - y; }, one,
     [](double, double) { return -1.0; }},
    {"product", [](D x, D y) { return x * y; }, [](double x, double y) { return x * y; },
     [](double, double y) { return y; }, [](double x, double) { return x; }},
    {"quotient", [](D x, D y) { return x / y; }, [](double x, double y) { return x / y; },
     [](double, double y) { return 1.0 / y; }, [](double x, double y) { return -x / (y * y); }},
    {"negative", [](D x, D) { return -x; }, [](double x, double) { return -x; },
     [](double, double) { return -1.0; }, none},
    {"square_root", [](D x, D) { return sqrt(x); }, [](double x, double) { return std::sqrt(x); },
     [](double x, double) { return 0.5 / std::sqrt(x); }, none},
    {"exponential", [](D x, D) { return exp(x); }, [](double x, double) { return std::exp(x); },
     [](double x, double) { return std::exp(x); }, none},
    {"logarithm", [](D x, D) { return log(x); }, [](double x, double) { return std::log(x); },
     [](double x, double) { return 1.0 / x; }, none},
    {"sine", [](D x, D) { return sin(x); }, [](double x, double) { return std::sin(x); },
     [](double x, double) { return std::cos(x); }, none},
    {"cosine", [](D x, D) { return cos(x); }, [](double x, double) { return std::cos(x); },
     [](double x, double) { return -std::sin(x); }, none},
    {"arc_tangent", [](D x, D) { return atan(x); }, [](double x, double) { return std::atan(x); },
     [](double x, double) { return 1.0 / (1.0 + x * x); }, none},
    {"direction", [](D x, D y) { return atan2(y, x); },
     [](double x, double y) { return std::atan2(y, x); },
     [](double x, double y) { return -y / (x * x + y * y); },
     [](double x, double y) { return x / (x * x + y * y); }},
    {"power", [](D x, D) { return pow(x, 2.7); }, [](double x, double) { return std::pow(x, 2.7); },
     [](double x, double) { return 2.7 * std::pow(x, 1.7); }, none},
    {"size", [](D, D y) { return abs(y); }, [](double, double y) { return std::abs(y); }, none,
     [](double, double y) { return y < 0.0 ? -1.0 : 1.0; }},
    {"smaller", [](D x, D y) { return smaller(x, y); },
     [](double x, double y) { return std::min(x, y); },
     [](double x, double y) { return x < y ? 1.0 : 0.0; },
     [](double x, double y) { return x < y ? 0.0 : 1.0; }},
    {"larger", [](D x, D y) { return larger(x, y); },
     [](double x, double y) { return std::max(x, y); },
     [](double x, double y) { return x > y ? 1.0 : 0.0; },
     [](double x, double y) { return x > y ? 0.0 : 1.0; }},
    {"constants_mixed_in", [](D x, D y) { return (2.0 * x - 1.0) / (y + 3.0); },
     [](double x, double y) { return (2.0 * x - 1.0) / (y + 3.0); },
     [](double, double y) { return 2.0 / (y + 3.0); },
     [](double x, double y) { return -(2.0 * x - 1.0) / ((y + 3.0) * (y + 3.0)); }},
    {"compound_assignment",
     [](D x, D y) {
       D z = x;
       z *= y;
       z += x;
       z -= y;
       return z;
     },
     [](double x, double y) { return x * y + x - y; }, [](double, double y) { return y + 1.0; },
     [](double x, double) { return x - 1.0; }},
};

class DualRule : public testing::TestWithParam<Rule> {};

TEST_P(DualRule, HasItsDerivative) {
  const Rule& rule = GetParam();
  for (const double x : {0.3, 1.0, 2.5})
    for (const double y : {-1.7, -0.4, 0.2, 3.1}) {
      const D out = rule.dual(D::seeded(x, 0), D::seeded(y, 1));
      EXPECT_NEAR(out.value, rule.value(x, y), 1e-14 * (1.0 + std::abs(out.value)));
      EXPECT_NEAR(out.derivative[0], rule.by_x(x, y), 1e-13 * (1.0 + std::abs(rule.by_x(x, y))));
      EXPECT_NEAR(out.derivative[1], rule.by_y(x, y), 1e-13 * (1.0 + std::abs(rule.by_y(x, y))));
    }
}

INSTANTIATE_TEST_SUITE_P(Rules, DualRule, testing::ValuesIn(rules),
                         [](const auto& info) { return std::string(info.param.name); });

TEST(Dual, ChainsThroughAComposition) {
  // d/dx exp(sin(x)/x) = exp(sin(x)/x) (x cos x - sin x)/x^2
  const double x = 0.8;
  const auto d = Dual<1>::seeded(x, 0);
  const auto out = exp(sin(d) / d);
  const double value = std::exp(std::sin(x) / x);
  EXPECT_NEAR(out.value, value, 1e-15);
  EXPECT_NEAR(out.derivative[0], value * (x * std::cos(x) - std::sin(x)) / (x * x), 1e-15);
}

TEST(Dual, ComparesByValue) {
  const D low = D::seeded(1.0, 0), high = D::seeded(2.0, 1);
  EXPECT_TRUE(low < high && low <= high && high > low && high >= low);
  EXPECT_FALSE(high < low || high <= low || low > high || low >= high);
  EXPECT_EQ(value_of(high), 2.0);
  EXPECT_EQ(value_of(3.0), 3.0);
}

TEST(Dual, TakesTheFirstOnATie) {
  const D a = D::seeded(1.0, 0), b = D::seeded(1.0, 1);
  EXPECT_EQ(smaller(a, b).derivative[0], 1.0);
  EXPECT_EQ(larger(a, b).derivative[0], 1.0);
}

}  // namespace
}  // namespace falcate::solver
