#include "cases/case_checks.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <numbers>

#include "cases/blade_row.h"
#include "cases/operating_points.h"

namespace falcate::cases {
namespace {

constexpr double pi = std::numbers::pi;

double degrees(double radians) { return radians * 180.0 / pi; }

std::string millimetres(double metres) { return fmt::format("{:.4g} mm", metres * 1e3); }
std::string bars(double pascal) { return fmt::format("{:.4g} bar(a)", pascal / 1e5); }

/// The checks share the case, where its keys stand, and the list of problems.
class Checker {
 public:
  Checker(const Case& input, const CaseSource& source, CaseProblems& problems)
      : case_(input), source_(source), problems_(problems) {}

  void check() {
    check_gas();
    if (case_.kind == CaseKind::wheel) {
      check_pressures();
      check_nozzle();
      check_wheel();
      check_material();
      const bool speed_sound = check_speed_forms() && check_speed_values();
      check_shape_keys();
      if (speed_sound) check_blade();
    } else {
      check_stream();
      check_shape_keys();
      check_blade();
    }
  }

 private:
  bool usable(const char* table, std::initializer_list<const char*> keys) const {
    return std::all_of(keys.begin(), keys.end(),
                       [&](const char* key) { return source_.usable(table, key); });
  }

  void problem(const char* table, const char* key, const std::string& what) {
    problems_.add(source_.line(table, key), fmt::format("{}: {}", source_.quote(table, key), what));
  }

  void check_gas() {
    const bool ratio = source_.given("gas", "heat_capacity_ratio");
    const bool constant = source_.given("gas", "gas_constant");
    if (source_.given("gas", "name") && (ratio || constant))
      problem("gas", "name",
              "the gas has a name and constants of its own; keep the name, or heat_capacity_ratio "
              "and gas_constant");
    else if (ratio && !constant)
      problem("gas", "heat_capacity_ratio", "a gas of your own needs gas_constant as well");
    else if (constant && !ratio)
      problem("gas", "gas_constant", "a gas of your own needs heat_capacity_ratio as well");
  }

  void check_pressures() {
    if (!usable("supply", {"pressure"}) || !usable("exhaust", {"pressure"})) return;
    if (case_.exhaust_pressure < case_.supply_pressure * 0.99) return;
    problem("supply", "pressure",
            fmt::format("{} is not above the exhaust pressure of {}, so that no gas flows; raise "
                        "it or lower [exhaust] pressure",
                        bars(case_.supply_pressure), bars(case_.exhaust_pressure)));
  }

  void check_nozzle() {
    if (usable("nozzle", {"throat_diameter", "exit_diameter"}) &&
        case_.nozzle_exit_diameter < case_.throat_diameter)
      problem(
          "nozzle", "exit_diameter",
          fmt::format("the exit is narrower than the throat of {}; make it at least as wide, or "
                      "leave it out for a convergent nozzle",
                      millimetres(case_.throat_diameter)));
    if (!usable("nozzle", {"throat_diameter", "count", "angle"}) ||
        !usable("wheel", {"mean_diameter"}))
      return;
    const double arc =
        case_.nozzle_count * case_.nozzle_exit_diameter / std::sin(case_.nozzle_angle);
    if (arc > pi * case_.mean_diameter)
      problem(
          "nozzle", "count",
          fmt::format("{} nozzles take up {} of a circumference of {}; use fewer, smaller or "
                      "steeper ones",
                      case_.nozzle_count, millimetres(arc), millimetres(pi * case_.mean_diameter)));
  }

  void check_wheel() {
    if (!usable("wheel", {"mean_diameter", "blade_height"})) return;
    if (case_.blade_height > 0.5 * case_.mean_diameter) {
      problem("wheel", "blade_height",
              fmt::format("is more than half the mean diameter of {}; make the blades shorter or "
                          "the wheel larger",
                          millimetres(case_.mean_diameter)));
      return;
    }
    const double root = case_.mean_diameter - case_.blade_height;
    if (usable("wheel", {"bore_diameter"}) && case_.bore_diameter >= root)
      problem("wheel", "bore_diameter",
              fmt::format("the bore reaches the blade roots at {}; make it smaller",
                          millimetres(root)));
  }

  void check_material() {
    const bool density = source_.given("wheel", "density");
    const bool stress = source_.given("wheel", "allowable_stress");
    if (source_.given("wheel", "material") && (density || stress))
      problem("wheel", "material",
              "the material has a name and values of its own; keep the name, or density and "
              "allowable_stress");
    else if (density && !stress)
      problem("wheel", "density", "a material of your own needs allowable_stress as well");
    else if (stress && !density)
      problem("wheel", "allowable_stress", "a material of your own needs density as well");
  }

  std::vector<const char*> given_speed_forms() const {
    std::vector<const char*> forms;
    for (const char* key : {"speed", "speeds", "speed_ratios"})
      if (source_.given("wheel", key)) forms.push_back(key);
    return forms;
  }

  bool check_speed_forms() {
    const auto forms = given_speed_forms();
    if (forms.empty()) {
      if (source_.table_line("wheel"))
        problems_.add(source_.table_line("wheel"),
                      "[wheel] speed is missing: give speed = \"45000 rpm\", or a list as speeds "
                      "or speed_ratios");
      return false;
    }
    if (forms.size() == 1) return source_.usable("wheel", forms[0]);
    problem(
        "wheel", forms[1],
        fmt::format("{} is given as well; keep one of speed, speeds and speed_ratios", forms[0]));
    return false;
  }

  bool check_speed_values() {
    if (!triangle_usable()) return false;
    const char* key = given_speed_forms()[0];
    const auto points = operating_points(case_);
    const double limit = std::cos(case_.nozzle_angle);
    bool sound = true;
    for (std::size_t i = 0; i < points.size(); ++i) {
      if (points[i].speed_ratio >= limit) {
        problem("wheel", key,
                fmt::format("at {:.0f} rpm the blades run away from the jet (u/c1 = {:.3f}); stay "
                            "below {:.0f} rpm (u/c1 = {:.3f})",
                            rpm(points[i].speed), points[i].speed_ratio,
                            rpm(points[i].speed / points[i].speed_ratio * limit), limit));
        return false;
      }
      if (i > 0 && points[i].speed <= points[i - 1].speed * (1.0 + 1e-9)) {
        problem(
            "wheel", key,
            fmt::format("{:.0f} rpm is given twice; give each speed once", rpm(points[i].speed)));
        sound = false;
      }
    }
    return sound;
  }

  static double rpm(double speed) { return speed * 30.0 / pi; }

  bool triangle_usable() const {
    return usable("supply", {"pressure", "temperature"}) && usable("exhaust", {"pressure"}) &&
           usable("nozzle", {"throat_diameter", "count", "angle", "velocity_coefficient",
                             "discharge_coefficient"}) &&
           usable("wheel", {"mean_diameter"}) &&
           case_.exhaust_pressure < case_.supply_pressure * 0.99 &&
           case_.nozzle_exit_diameter >= case_.throat_diameter && gas_usable();
  }

  bool gas_usable() const {
    return case_.gas.heat_capacity_ratio > 1.0 && case_.gas.gas_constant > 0.0;
  }

  void check_stream() {
    if (!usable("stream", {"total_pressure", "exit_pressure"})) return;
    if (case_.stream_exit_pressure < case_.stream_total_pressure) return;
    problem("stream", "exit_pressure",
            fmt::format("{} is not below the total pressure of {}, so that no gas flows; lower it",
                        bars(case_.stream_exit_pressure), bars(case_.stream_total_pressure)));
  }

  void check_shape_keys() {
    if (!usable("blade", {"shape"})) return;
    struct ShapeKey {
      const char* key;
      const char* shapes;
    };
    for (const ShapeKey& row :
         {ShapeKey{"inlet_angle", "channel cup"}, ShapeKey{"exit_angle", "channel cup"},
          ShapeKey{"passage_width", "channel"}, ShapeKey{"edge_radius", "channel cup"},
          ShapeKey{"wall_thickness", "cup"}, ShapeKey{"file", "coordinates"}}) {
      const auto shapes = words(row.shapes);
      const bool fits = std::find(shapes.begin(), shapes.end(), case_.shape) != shapes.end();
      if (source_.given("blade", row.key) && !fits)
        problem("blade", row.key,
                fmt::format("has no meaning for shape = \"{}\", only for {}; leave it out",
                            case_.shape, either_of(shapes)));
    }
    if (case_.shape != "coordinates") return;
    if (!source_.given("blade", "file"))
      problem("blade", "shape", "needs file, the CSV file with the outline");
    else if (usable("blade", {"file"}) && !std::filesystem::is_regular_file(case_.outline_path))
      problem("blade", "file",
              "there is no such file; the name counts from the folder of the case file");
  }

  bool row_usable() const {
    const bool sizes =
        case_.kind == CaseKind::rig
            ? usable("row", {"pitch", "width"}) && usable("stream", {"angle"})
            : usable("wheel", {"mean_diameter", "blade_count", "blade_height", "blade_width"});
    return sizes && blade_keys_usable();
  }

  bool blade_keys_usable() const {
    if (!usable("blade", {"shape"})) return false;
    for (const char* key :
         {"inlet_angle", "exit_angle", "passage_width", "edge_radius", "wall_thickness", "file"})
      if (source_.given("blade", key) && !source_.usable("blade", key)) return false;
    return case_.shape != "coordinates" || std::filesystem::is_regular_file(case_.outline_path);
  }

  void check_blade() {
    if (!row_usable() || !check_angles() || !check_passage()) return;
    try {
      const BladeRow row = make_blade_row(case_);
      if (row.throat > 0.0) return;
      problem(
          "blade", "shape",
          fmt::format("the blades touch each other at a pitch of {}; use fewer or thinner blades",
                      millimetres(row.pitch)));
    } catch (const mesh::ShapeError& error) {
      problem("blade", "shape", error.what());
    }
  }

  bool check_angles() {
    if (case_.shape == "coordinates") return true;
    const double inlet = blade_inlet_angle(case_), exit = blade_exit_angle(case_);
    if (exit - inlet > 10.0 * pi / 180.0) return true;
    const char* key = source_.given("blade", "exit_angle")    ? "exit_angle"
                      : source_.given("blade", "inlet_angle") ? "inlet_angle"
                                                              : "shape";
    problem("blade", key,
            fmt::format("the blade turns the flow from {:.1f} deg to {:.1f} deg, less than 10 deg; "
                        "give an exit angle further above the inlet angle",
                        degrees(inlet), degrees(exit)));
    return false;
  }

  bool check_passage() {
    if (!case_.passage_width) return true;
    const double room = row_pitch(case_) * std::sin(blade_inlet_angle(case_));
    if (*case_.passage_width < room) return true;
    problem("blade", "passage_width",
            fmt::format("leaves no room for a blade; stay below the pitch times the sine of the "
                        "inlet angle, {}",
                        millimetres(room)));
    return false;
  }

  const Case& case_;
  const CaseSource& source_;
  CaseProblems& problems_;
};

}  // namespace

void check_case(const Case& input, const CaseSource& source, CaseProblems& problems) {
  Checker(input, source, problems).check();
}

}  // namespace falcate::cases
