/// Numerical fluxes between two states, as a table: name, description, citation.
/// Consistent (F(q,q) = physical flux), conservative (F(l,r,n) = -F(r,l,-n)), rotation-invariant.
/// `n` is length-weighted; `T` is double or a dual number. Limits: ideal gas, positive states.
#pragma once
#include <array>
#include <string_view>

#include "solver/dual.h"
#include "solver/state.h"

namespace falcate::solver {

enum class FluxKind { slau2, hllc, roe };

struct FluxMethod {
  FluxKind kind;
  std::string_view name, description, citation;
};

inline constexpr std::array<FluxMethod, 3> flux_methods{{
    {FluxKind::slau2, "slau2", "simple low-dissipation AUSM, all speeds",
     "Kitamura & Shima, J. Comput. Phys. 245 (2013) 62-83"},
    {FluxKind::hllc, "hllc", "three-wave approximate Riemann solver",
     "Toro, Spruce & Speares, Shock Waves 4 (1994) 25-34"},
    {FluxKind::roe, "roe", "linearised Riemann solver with an entropy correction",
     "Roe, J. Comput. Phys. 43 (1981) 357-372; Harten, J. Comput. Phys. 49 (1983) 357-393"},
}};

namespace flux_detail {

template <class T>
T normal_velocity(const State<T>& q, const mesh::Point& unit) {
  return q[velocity_x] * unit.x() + q[velocity_y] * unit.y();
}

template <class T>
State<T> scaled(const State<T>& f, double length) {
  return {f[0] * length, f[1] * length, f[2] * length, f[3] * length};
}

/// Split pressure weights of the AUSM family, sign +1 (from the left) or -1 (from the right).
template <class T>
T pressure_weight(const T& mach, double sign) {
  if (value_of(mach) * sign >= 1.0) return T(1.0);
  if (value_of(mach) * sign <= -1.0) return T(0.0);
  const T shifted = mach + sign;
  return 0.25 * (2.0 - sign * mach) * shifted * shifted;
}

/// max(min(m, 1), 0)
template <class T>
T clipped_unit(const T& m) {
  return smaller(larger(m, T(0.0)), T(1.0));
}

/// Averages of Roe: weighted by the square roots of the densities, share 1/(1+root) to the left.
template <class T>
struct RoeAverage {
  T root, share, u, v, enthalpy, a_squared;
  RoeAverage(const State<T>& l, const State<T>& r, double gamma) {
    using std::sqrt;
    root = sqrt(r[density] / l[density]);
    share = 1.0 / (1.0 + root);
    u = (l[1] + root * r[1]) * share;
    v = (l[2] + root * r[2]) * share;
    enthalpy = (total_enthalpy(l, gamma) + root * total_enthalpy(r, gamma)) * share;
    a_squared = (gamma - 1.0) * (enthalpy - 0.5 * (u * u + v * v));
  }
};

}  // namespace flux_detail

/// SLAU2: mass flux with a velocity-weighted pressure term that fades at low Mach number.
template <class T>
State<T> slau2_flux(const State<T>& l, const State<T>& r, const mesh::Point& n, double gamma) {
  using namespace flux_detail;
  using std::abs;
  using std::sqrt;
  const double length = n.norm();
  const mesh::Point unit = n / length;
  const T wl = normal_velocity(l, unit), wr = normal_velocity(r, unit);
  const T a = 0.5 * (speed_of_sound(l, gamma) + speed_of_sound(r, gamma));
  const T ml = wl / a, mr = wr / a;
  const T speed = sqrt(0.5 * (l[1] * l[1] + l[2] * l[2] + r[1] * r[1] + r[2] * r[2]) + 1e-30);
  const T low = 1.0 - smaller(T(1.0), speed / a);
  const T chi = low * low;
  const T g = clipped_unit(-ml) * clipped_unit(mr);
  const T mean = (l[density] * abs(wl) + r[density] * abs(wr)) / (l[density] + r[density]);
  const T mean_l = (1.0 - g) * mean + g * abs(wl), mean_r = (1.0 - g) * mean + g * abs(wr);
  const T mass = 0.5 * (l[density] * (wl + mean_l) + r[density] * (wr - mean_r) -
                        chi / a * (r[pressure] - l[pressure]));
  const T bl = pressure_weight(ml, 1.0), br = pressure_weight(mr, -1.0);
  const T p = 0.5 * (l[pressure] + r[pressure] + (bl - br) * (l[pressure] - r[pressure])) +
              speed * (bl + br - 1.0) * 0.5 * (l[density] + r[density]) * a;
  const State<T>& up = value_of(mass) >= 0.0 ? l : r;
  return scaled<T>({mass, mass * up[1] + p * unit.x(), mass * up[2] + p * unit.y(),
                    mass * total_enthalpy(up, gamma)},
                   length);
}

/// HLLC with wave speeds after Einfeldt (Roe average against the outer states).
template <class T>
State<T> hllc_flux(const State<T>& l, const State<T>& r, const mesh::Point& n, double gamma) {
  using namespace flux_detail;
  using std::sqrt;
  const double length = n.norm();
  const mesh::Point unit = n / length;
  const T wl = normal_velocity(l, unit), wr = normal_velocity(r, unit);
  const T al = speed_of_sound(l, gamma), ar = speed_of_sound(r, gamma);
  const RoeAverage<T> average(l, r, gamma);
  const T w = (wl + average.root * wr) * average.share, a = sqrt(average.a_squared);
  const T sl = smaller(wl - al, w - a), sr = larger(wr + ar, w + a);
  const T ml = l[density] * (sl - wl), mr = r[density] * (sr - wr);
  const T sm = (r[pressure] - l[pressure] + ml * wl - mr * wr) / (ml - mr);
  if (value_of(sl) >= 0.0) return physical_flux(l, n, gamma);
  if (value_of(sr) <= 0.0) return physical_flux(r, n, gamma);
  const bool from_left = value_of(sm) >= 0.0;
  const State<T>& q = from_left ? l : r;
  const T& s = from_left ? sl : sr;
  const T& wk = from_left ? wl : wr;
  const T factor = q[density] * (s - wk) / (s - sm);
  const State<T> inner = conserved(q, gamma);
  const T jump = sm - wk;
  const State<T> star = {
      factor, factor * (q[1] + jump * unit.x()), factor * (q[2] + jump * unit.y()),
      factor * (inner[3] / q[density] + jump * (sm + q[pressure] / (q[density] * (s - wk))))};
  State<T> f = physical_flux(q, unit, gamma);
  for (std::size_t k = 0; k < 4; ++k) f[k] += s * (star[k] - inner[k]);
  return scaled(f, length);
}

/// Roe's flux; eigenvalues of the acoustic waves kept off zero (entropy correction).
template <class T>
State<T> roe_flux(const State<T>& l, const State<T>& r, const mesh::Point& n, double gamma) {
  using namespace flux_detail;
  using std::abs;
  using std::sqrt;
  const double length = n.norm();
  const mesh::Point unit = n / length;
  const RoeAverage<T> average(l, r, gamma);
  const T &u = average.u, &v = average.v, &h = average.enthalpy, &a2 = average.a_squared;
  const T rho = average.root * l[density], a = sqrt(a2);
  const T w = u * unit.x() + v * unit.y();
  const T dp = r[pressure] - l[pressure], drho = r[density] - l[density];
  const T du = r[1] - l[1], dv = r[2] - l[2];
  const T dw = du * unit.x() + dv * unit.y();
  const T threshold = 0.1 * a;
  const auto kept = [&](const T& lambda) {
    const T size = abs(lambda);
    return size < threshold ? 0.5 * (size * size / threshold + threshold) : size;
  };
  const T minus = kept(w - a) * (dp - rho * a * dw) / (2.0 * a2);
  const T plus = kept(w + a) * (dp + rho * a * dw) / (2.0 * a2);
  const T middle = abs(w);
  const T entropy = middle * (drho - dp / a2);
  const T su = middle * rho * (du - dw * unit.x()), sv = middle * rho * (dv - dw * unit.y());
  const State<T> fl = physical_flux(l, unit, gamma), fr = physical_flux(r, unit, gamma);
  const State<T> d = {
      minus + plus + entropy,
      minus * (u - a * unit.x()) + plus * (u + a * unit.x()) + entropy * u + su,
      minus * (v - a * unit.y()) + plus * (v + a * unit.y()) + entropy * v + sv,
      minus * (h - a * w) + plus * (h + a * w) + entropy * 0.5 * (u * u + v * v) + u * su + v * sv};
  State<T> f;
  for (std::size_t k = 0; k < 4; ++k) f[k] = 0.5 * (fl[k] + fr[k] - d[k]);
  return scaled(f, length);
}

template <class T>
State<T> numerical_flux(FluxKind kind, const State<T>& l, const State<T>& r, const mesh::Point& n,
                        double gamma) {
  switch (kind) {
    case FluxKind::hllc:
      return hllc_flux(l, r, n, gamma);
    case FluxKind::roe:
      return roe_flux(l, r, n, gamma);
    case FluxKind::slau2:
      break;
  }
  return slau2_flux(l, r, n, gamma);
}

}  // namespace falcate::solver
