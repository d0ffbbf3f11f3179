/// Strength of the spinning wheel and the cautions that belong to each number.
///   thin ring: sigma = rho U^2;  uniform disc with a bore a, outer radius b:
///   sigma = rho w^2/4 ((3+nu) b^2 + (1-nu) a^2);  without a bore: (3+nu)/8 rho w^2 b^2
/// SI units. Source: Timoshenko & Goodier, Theory of Elasticity (rotating discs).
/// Limits: uniform thickness, no blade load, no fatigue, no flaws: typical values, not a
/// certificate.
#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace falcate::post {

struct Material {
  const char* name;   ///< as in a case file
  const char* title;  ///< for people
  double density;     ///< kg/m3
  double poisson_ratio;
  double allowable_stress;  ///< Pa, working limit with its safety in it
  double strength;  ///< Pa, yield (metals) or tensile strength (plastics), typical low value
  double highest_temperature;  ///< K, in service
  const char* source;          ///< "typical, from memory" where no data sheet stands behind it
};
const std::vector<Material>& materials();
const Material* find_material(std::string_view name);  ///< null where no material has that name

double ring_stress(double density, double rim_speed);  ///< Pa
double disc_stress(const Material& material, double outer_radius, double bore_radius,
                   double angular_speed);  ///< Pa, largest hoop stress

enum class Verdict { sound, caution, refuse };
const char* verdict_words(Verdict verdict);

struct SafetyRow {
  std::string quantity, value;  ///< plain words; number with unit
  Verdict verdict = Verdict::sound;
  std::string caution;  ///< plain words; empty where there is none
};

struct SafetyInput {
  const Material* material = nullptr;  ///< null: stress is given as sigma/rho only and says so
  double outer_radius = 0.0;           ///< m, outside of the ring or blade tips
  double bore_radius = 0.0;            ///< m, 0: no bore
  bool ringed = true;
  std::optional<double> running_speed_rpm;
  std::optional<double> runaway_speed_rpm;  ///< largest speed the jet can drive the free wheel to
  bool runaway_is_bound = false;  ///< from u = c1 cos(alpha1) or extrapolated, not computed
  double supply_pressure = 0.0;   ///< Pa, absolute
  double atmospheric_pressure = 101325.0;
  double supply_temperature = 0.0;  ///< K
  double jet_temperature = 0.0;     ///< K, static
  double jet_velocity = 0.0;        ///< m/s
};
/// Rows in a fixed order, each caution beside the number it concerns.
std::vector<SafetyRow> safety_rows(const SafetyInput& input);

/// Speed at which the larger of ring and disc stress reaches the allowable stress, rpm.
double largest_speed_rpm(const Material& material, double outer_radius, double bore_radius,
                         bool ringed);
/// Free-running speed no impulse wheel can exceed: u = c1 cos(alpha1), rpm.
double runaway_bound_rpm(double jet_velocity, double jet_angle_deg, double mean_radius);

}  // namespace falcate::post
