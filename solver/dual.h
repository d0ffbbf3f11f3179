/// Forward-mode dual number: a value and its exact derivatives with respect to N seeds.
/// The residual is written once on a number type; with `Dual` it returns its own derivatives.
/// Source: Griewank & Walther, Evaluating Derivatives, SIAM, 2nd ed. 2008, ch. 3.
#pragma once
#include <array>
#include <cmath>

namespace falcate::solver {

template <int N>
struct Dual {
  double value = 0.0;
  std::array<double, N> derivative{};

  Dual() = default;
  Dual(double v) : value(v) {}  // NOLINT: constants mix freely with duals

  static Dual seeded(double v, int seed) {
    Dual d(v);
    d.derivative[static_cast<std::size_t>(seed)] = 1.0;
    return d;
  }

  Dual& operator+=(const Dual& b) { return *this = *this + b; }
  Dual& operator-=(const Dual& b) { return *this = *this - b; }
  Dual& operator*=(const Dual& b) { return *this = *this * b; }

  /// Chain rule: outer value `v` with outer derivative `slope` taken at this number.
  Dual chain(double v, double slope) const {
    Dual out(v);
    for (std::size_t i = 0; i < N; ++i) out.derivative[i] = slope * derivative[i];
    return out;
  }
  /// alpha * a + beta * b in the derivatives.
  static Dual blend(double v, double alpha, const Dual& a, double beta, const Dual& b) {
    Dual out(v);
    for (std::size_t i = 0; i < N; ++i)
      out.derivative[i] = alpha * a.derivative[i] + beta * b.derivative[i];
    return out;
  }

  friend Dual operator+(const Dual& a, const Dual& b) {
    return blend(a.value + b.value, 1.0, a, 1.0, b);
  }
  friend Dual operator-(const Dual& a, const Dual& b) {
    return blend(a.value - b.value, 1.0, a, -1.0, b);
  }
  friend Dual operator*(const Dual& a, const Dual& b) {
    return blend(a.value * b.value, b.value, a, a.value, b);
  }
  friend Dual operator/(const Dual& a, const Dual& b) {
    const double inverse = 1.0 / b.value;
    const double quotient = a.value * inverse;
    return blend(quotient, inverse, a, -quotient * inverse, b);
  }
  friend Dual operator-(const Dual& a) { return a.chain(-a.value, -1.0); }
  friend bool operator<(const Dual& a, const Dual& b) { return a.value < b.value; }
  friend bool operator>(const Dual& a, const Dual& b) { return a.value > b.value; }
  friend bool operator<=(const Dual& a, const Dual& b) { return a.value <= b.value; }
  friend bool operator>=(const Dual& a, const Dual& b) { return a.value >= b.value; }

  friend Dual sqrt(const Dual& a) {
    const double root = std::sqrt(a.value);
    return a.chain(root, 0.5 / root);
  }
  friend Dual exp(const Dual& a) {
    const double e = std::exp(a.value);
    return a.chain(e, e);
  }
  friend Dual log(const Dual& a) { return a.chain(std::log(a.value), 1.0 / a.value); }
  friend Dual sin(const Dual& a) { return a.chain(std::sin(a.value), std::cos(a.value)); }
  friend Dual cos(const Dual& a) { return a.chain(std::cos(a.value), -std::sin(a.value)); }
  friend Dual atan(const Dual& a) {
    return a.chain(std::atan(a.value), 1.0 / (1.0 + a.value * a.value));
  }
  friend Dual atan2(const Dual& y, const Dual& x) {
    const double square = x.value * x.value + y.value * y.value;
    return blend(std::atan2(y.value, x.value), x.value / square, y, -y.value / square, x);
  }
  friend Dual pow(const Dual& a, double power) {
    const double p = std::pow(a.value, power);
    return a.chain(p, power * p / a.value);
  }
  friend Dual abs(const Dual& a) { return a.value < 0.0 ? -a : a; }
};

inline double value_of(double a) { return a; }
template <int N>
double value_of(const Dual<N>& a) {
  return a.value;
}

/// Minimum and maximum that take the derivative of the one chosen (the first on a tie).
template <class T>
T smaller(const T& a, const T& b) {
  return b < a ? b : a;
}
template <class T>
T larger(const T& a, const T& b) {
  return a < b ? b : a;
}

}  // namespace falcate::solver
