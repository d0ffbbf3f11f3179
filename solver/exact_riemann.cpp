#include "solver/exact_riemann.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace falcate::solver {
namespace {

double sound(const RiemannSide& q, double gamma) {
  return std::sqrt(gamma * q.pressure / q.density);
}

struct Curve {
  double value, slope;
};

/// Toro eqs. 4.6, 4.7, 4.37: change of velocity over the wave of one side, and its slope in p.
Curve wave_curve(const RiemannSide& q, double p, double gamma) {
  const double a = sound(q, gamma);
  if (p <= q.pressure) {
    const double ratio = p / q.pressure, power = 0.5 * (gamma - 1.0) / gamma;
    return {2.0 * a / (gamma - 1.0) * (std::pow(ratio, power) - 1.0),
            std::pow(ratio, -0.5 * (gamma + 1.0) / gamma) / (q.density * a)};
  }
  const double b = (gamma - 1.0) / (gamma + 1.0) * q.pressure;
  const double root = std::sqrt(2.0 / ((gamma + 1.0) * q.density) / (b + p));
  return {(p - q.pressure) * root, root * (1.0 - 0.5 * (p - q.pressure) / (b + p))};
}

/// Toro eq. 4.46: exact where both waves are rarefactions, too high elsewhere.
double two_rarefactions(const RiemannSide& l, const RiemannSide& r, double gamma) {
  const double al = sound(l, gamma), ar = sound(r, gamma), z = 0.5 * (gamma - 1.0) / gamma;
  const double top = al + ar - 0.5 * (gamma - 1.0) * (r.velocity - l.velocity);
  return std::pow(top / (al / std::pow(l.pressure, z) + ar / std::pow(r.pressure, z)), 1.0 / z);
}

double star_density(const RiemannSide& q, double p, double gamma) {
  const double ratio = p / q.pressure, g = (gamma - 1.0) / (gamma + 1.0);
  return p > q.pressure ? q.density * (ratio + g) / (g * ratio + 1.0)
                        : q.density * std::pow(ratio, 1.0 / gamma);
}

/// The half of the solution left of the contact, Toro sec. 4.5.
RiemannSide left_half(const RiemannSide& l, const RiemannSide& star, double gamma, double speed) {
  const double a = sound(l, gamma);
  if (star.pressure > l.pressure) {
    const double shock =
        l.velocity - a * std::sqrt(0.5 * (gamma + 1.0) / gamma * star.pressure / l.pressure +
                                   0.5 * (gamma - 1.0) / gamma);
    return speed <= shock ? l : star;
  }
  if (speed <= l.velocity - a) return l;
  if (speed >= star.velocity - sound(star, gamma)) return star;
  const double ratio =
      2.0 / (gamma + 1.0) + (gamma - 1.0) / (gamma + 1.0) * (l.velocity - speed) / a;
  return {l.density * std::pow(ratio, 2.0 / (gamma - 1.0)),
          2.0 / (gamma + 1.0) * (a + 0.5 * (gamma - 1.0) * l.velocity + speed),
          l.pressure * std::pow(ratio, 2.0 * gamma / (gamma - 1.0))};
}

RiemannSide mirrored(const RiemannSide& q) { return {q.density, -q.velocity, q.pressure}; }

}  // namespace

RiemannStar riemann_star(const RiemannSide& left, const RiemannSide& right, double gamma) {
  const double parting = right.velocity - left.velocity;
  if (2.0 / (gamma - 1.0) * (sound(left, gamma) + sound(right, gamma)) <= parting)
    throw std::invalid_argument("the two states part so fast that a vacuum opens between them");
  double p = two_rarefactions(left, right, gamma);
  for (int step = 0; step < 100; ++step) {
    const Curve l = wave_curve(left, p, gamma), r = wave_curve(right, p, gamma);
    const double change = (l.value + r.value + parting) / (l.slope + r.slope);
    p = std::max(0.1 * p, p - change);
    if (std::abs(change) <= 1e-15 * p) break;
  }
  const double velocity =
      0.5 * (left.velocity + right.velocity + wave_curve(right, p, gamma).value -
             wave_curve(left, p, gamma).value);
  return {p, velocity, star_density(left, p, gamma), star_density(right, p, gamma)};
}

RiemannSide riemann_state(const RiemannSide& left, const RiemannSide& right, double gamma,
                          double speed) {
  const RiemannStar star = riemann_star(left, right, gamma);
  if (speed <= star.velocity)
    return left_half(left, {star.density_left, star.velocity, star.pressure}, gamma, speed);
  return mirrored(left_half(mirrored(right), {star.density_right, -star.velocity, star.pressure},
                            gamma, -speed));
}

State<double> godunov_flux(const State<double>& left, const State<double>& right,
                           const mesh::Point& n, double gamma) {
  const mesh::Point unit = n / n.norm(), along(-unit.y(), unit.x());
  const auto part = [](const State<double>& q, const mesh::Point& direction) {
    return q[velocity_x] * direction.x() + q[velocity_y] * direction.y();
  };
  const RiemannSide l{left[density], part(left, unit), left[pressure]};
  const RiemannSide r{right[density], part(right, unit), right[pressure]};
  const RiemannSide q = riemann_state(l, r, gamma, 0.0);
  const double tangential = part(riemann_star(l, r, gamma).velocity >= 0.0 ? left : right, along);
  const mesh::Point w = q.velocity * unit + tangential * along;
  return physical_flux<double>({q.density, w.x(), w.y(), q.pressure}, n, gamma);
}

}  // namespace falcate::solver
