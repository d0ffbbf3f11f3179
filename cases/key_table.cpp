#include "cases/key_table.h"

#include <fmt/format.h>

#include <sstream>

#include "post/gas_properties.h"
#include "post/safety.h"

namespace falcate::cases {
namespace {

using D = Dimension;

/// Names of the rows of another table, divided by spaces.
template <class Row>
std::string names_of(const std::vector<Row>& rows) {
  std::vector<std::string> names;
  for (const Row& row : rows) names.emplace_back(row.name);
  return fmt::format("{}", fmt::join(names, " "));
}

std::vector<KeyRow> make_key_table() {
  static const std::string gases = names_of(post::named_gases());
  static const std::string materials = names_of(post::materials());
  // clang-format off
  return {
    {"", "title", &Case::title, D::none, "", 0, 0, Need::optional, "", Applies::any, "",
     "Heading of results and report; the name of the file without it.", ""},

    {"gas", "name", &Case::gas_name, D::none, "", 0, 0, Need::optional, "air", Applies::any, gases.c_str(),
     "The working gas, a perfect gas with constant heat capacities; or give its constants below.", ""},
    {"gas", "heat_capacity_ratio", &Case::heat_capacity_ratio, D::none, "", 1.01, 1.67, Need::special, "", Applies::any, "",
     "Ratio of heat capacities of a gas of your own; in place of a name.", "it is 1.4 for air, 1.667 for argon"},
    {"gas", "gas_constant", &Case::gas_constant, D::gas_constant, "J/(kg K)", 20, 5000, Need::special, "", Applies::any, "",
     "Specific gas constant of a gas of your own; in place of a name.", "it is 8314.46 J/(kmol K) over the molar mass"},
    {"gas", "viscosity", &Case::viscosity, D::viscosity, "Pa s", 1e-6, 1e-3, Need::special, "", Applies::any, "",
     "Dynamic viscosity, for the Reynolds number; that of the named gas without it.", "it is 1.8e-5 Pa s for air"},

    {"supply", "pressure", &Case::supply_pressure, D::pressure, "bar(a)", 0.01, 1000, Need::required, "", Applies::wheel, "",
     "Pressure of the gas at rest upstream of the nozzles.", "give the pressure just before the nozzles while gas flows"},
    {"supply", "temperature", &Case::supply_temperature, D::temperature, "degC", -200, 1500, Need::optional, "20 degC", Applies::wheel, "",
     "Temperature of the gas at rest upstream of the nozzles.", "give it as degC or K"},

    {"exhaust", "pressure", &Case::exhaust_pressure, D::pressure, "bar(a)", 0.001, 500, Need::optional, "0 bar(g)", Applies::wheel, "",
     "Pressure of the room the wheel runs in: the jet ends at it and the blades let out into it.", "the open air is 0 bar(g)"},

    {"site", "atmospheric_pressure", &Case::atmospheric_pressure, D::absolute_pressure, "bar(a)", 0.1, 1.2, Need::optional, "1.01325 bar(a)", Applies::any, "",
     "Pressure of the open air, to which gauge pressures are added.", "it is about 1.013 bar(a) at sea level, 0.9 bar(a) at 1000 m"},

    {"nozzle", "throat_diameter", &Case::throat_diameter, D::length, "mm", 0.05, 100, Need::required, "", Applies::wheel, "",
     "Least bore of one nozzle.", "measure the narrowest bore"},
    {"nozzle", "exit_diameter", &Case::nozzle_exit_diameter, D::length, "mm", 0.05, 200, Need::special, "", Applies::wheel, "",
     "Bore at the nozzle's exit: equal to the throat for a convergent nozzle, larger for a convergent-divergent one; the throat without it.", "leave it out for a convergent nozzle"},
    {"nozzle", "count", &Case::nozzle_count, D::none, "", 1, 100, Need::optional, "1", Applies::wheel, "",
     "Number of equal nozzles.", "give a whole number"},
    {"nozzle", "angle", &Case::nozzle_angle, D::angle, "deg", 5, 60, Need::optional, "20 deg", Applies::wheel, "",
     "Angle between the jet and the plane of rotation.", "measure it from the plane of rotation: 12 to 25 deg is common practice"},
    {"nozzle", "velocity_coefficient", &Case::velocity_coefficient, D::none, "", 0.5, 1, Need::optional, "0.95", Applies::wheel, "",
     "Jet velocity over the spouting velocity.", "0.92 to 0.97 is common practice"},
    {"nozzle", "discharge_coefficient", &Case::discharge_coefficient, D::none, "", 0.3, 1, Need::optional, "0.90", Applies::wheel, "",
     "Nozzle flow over the flow of an ideal nozzle of the same throat.", "0.85 to 0.98 is common practice"},

    {"wheel", "mean_diameter", &Case::mean_diameter, D::length, "mm", 2, 2000, Need::required, "", Applies::wheel, "",
     "Diameter at mid-height of the blades.", "measure across the wheel at half the blade height"},
    {"wheel", "blade_count", &Case::blade_count, D::none, "", 3, 500, Need::required, "", Applies::wheel, "",
     "Number of blades round the wheel.", "give a whole number"},
    {"wheel", "blade_height", &Case::blade_height, D::length, "mm", 0.1, 300, Need::required, "", Applies::wheel, "",
     "Radial height of the blades.", "a little more than the nozzle's exit bore is common practice"},
    {"wheel", "blade_width", &Case::blade_width, D::length, "mm", 0.2, 300, Need::required, "", Applies::wheel, "",
     "Axial width of the blade row.", "1 to 2 times the pitch is common practice"},
    {"wheel", "rim", &Case::rim, D::none, "", 0, 0, Need::optional, "ringed", Applies::wheel, "ringed open",
     "Whether a ring closes the passages at the tips.", ""},
    {"wheel", "speed", &Case::speed, D::rotational_speed, "rpm", 0, 500000, Need::special, "", Applies::wheel, "",
     "One running speed.", "give one of speed, speeds and speed_ratios"},
    {"wheel", "speeds", &Case::speeds, D::rotational_speed, "rpm", 0, 500000, Need::special, "", Applies::wheel, "",
     "A list of running speeds, each a point.", "give one of speed, speeds and speed_ratios"},
    {"wheel", "speed_ratios", &Case::speed_ratios, D::none, "", 0, 0.99, Need::special, "", Applies::wheel, "",
     "A list of blade speeds over jet velocity (u/c1), each a point.", "the best lies near half the cosine of the nozzle angle"},
    {"wheel", "material", &Case::material, D::none, "", 0, 0, Need::optional, "", Applies::wheel, materials.c_str(),
     "What the wheel is made of, for the stress check; or give density and allowable_stress.", ""},
    {"wheel", "density", &Case::density, D::density, "kg/m3", 500, 20000, Need::special, "", Applies::wheel, "",
     "Density of the wheel, in place of a material.", "it is about 2800 kg/m3 for aluminium"},
    {"wheel", "allowable_stress", &Case::allowable_stress, D::stress, "MPa", 1, 1500, Need::special, "", Applies::wheel, "",
     "Stress the wheel may carry, all safety taken off, in place of a material.", "it is a fraction of the yield strength: see your material standard"},
    {"wheel", "ring_thickness", &Case::ring_thickness, D::length, "mm", 0, 50, Need::optional, "0.5 mm", Applies::wheel, "",
     "Radial thickness of the ring at the tips, for the stress check; an open rim has none.", "a ring is about as thick as a blade"},
    {"wheel", "bore_diameter", &Case::bore_diameter, D::length, "mm", 0, 1900, Need::optional, "0 mm", Applies::wheel, "",
     "Bore of the wheel for its shaft, for the stress check; 0 for a wheel of one piece with its shaft.", "it is less than the diameter at the blade roots"},

    {"stream", "total_pressure", &Case::stream_total_pressure, D::pressure, "bar(a)", 0.001, 1000, Need::required, "", Applies::rig, "",
     "Total pressure of the stream into the row.", "give the pressure of the stream brought to rest"},
    {"stream", "total_temperature", &Case::stream_total_temperature, D::temperature, "degC", -200, 1500, Need::optional, "20 degC", Applies::rig, "",
     "Total temperature of the stream into the row.", "give it as degC or K"},
    {"stream", "angle", &Case::stream_angle, D::angle, "deg", 8, 172, Need::required, "", Applies::rig, "",
     "Direction of the stream, from the tangential direction.", "90 deg is axial; an impulse row takes it in at 15 to 40 deg"},
    {"stream", "exit_pressure", &Case::stream_exit_pressure, D::pressure, "bar(a)", 0.0001, 1000, Need::required, "", Applies::rig, "",
     "Static pressure behind the row, mixed out.", "it lies below the total pressure"},
    {"stream", "mach", &Case::stream_mach, D::none, "", 0.02, 5, Need::optional, "", Applies::rig, "",
     "Mach number of the stream: gives the whole inlet state, where the stream is supersonic.", "leave it out for a subsonic stream"},

    {"row", "pitch", &Case::row_pitch, D::length, "mm", 0.1, 2000, Need::required, "", Applies::rig, "",
     "Distance from blade to blade.", "give it at the height that is computed"},
    {"row", "width", &Case::row_width, D::length, "mm", 0.1, 2000, Need::required, "", Applies::rig, "",
     "Axial width of the row.", "give the axial chord"},

    {"blade", "shape", &Case::shape, D::none, "", 0, 0, Need::required, "", Applies::any, "channel cup coordinates",
     "channel: concentric arcs, passage of constant width; cup: thin-walled bucket; coordinates: any outline from a file.", ""},
    {"blade", "inlet_angle", &Case::inlet_angle, D::angle, "deg", 8, 150, Need::special, "", Applies::any, "",
     "Direction of the blade at its inlet; that of the relative flow at the design speed without it. Channel and cup.", "an impulse blade has 15 to 45 deg"},
    {"blade", "exit_angle", &Case::exit_angle, D::angle, "deg", 30, 172, Need::special, "", Applies::any, "",
     "Direction of the blade at its exit; 180 deg less the inlet angle without it. Channel and cup.", "an impulse blade has 135 to 165 deg"},
    {"blade", "passage_width", &Case::passage_width, D::length, "mm", 0.02, 500, Need::special, "", Applies::any, "",
     "Width of the passage between two channel blades; what the pitch leaves beside the edges without it. Channel.", "it is below pitch times the sine of the inlet angle"},
    {"blade", "edge_radius", &Case::edge_radius, D::length, "mm", 0, 20, Need::special, "", Applies::any, "",
     "Radius of the leading and trailing edge, 0 for sharp ones; 1 % of the blade width (channel) or half the wall (cup) without it.", "a printed edge is no thinner than one line of the printer"},
    {"blade", "wall_thickness", &Case::wall_thickness, D::length, "mm", 0.02, 50, Need::special, "", Applies::any, "",
     "Thickness of the wall of a cup; 6 % of the blade width without it. Cup.", "a printed wall is 0.4 mm or more"},
    {"blade", "file", &Case::outline_file, D::none, "", 0, 0, Need::special, "", Applies::any, "",
     "Outline of the blade: columns x,y (or side,x,y) in a CSV file beside the case file, any unit of length, scaled to the width. Coordinates.", ""},

    {"flow", "cells", &Case::cells, D::none, "", 1000, 500000, Need::optional, "8000", Applies::any, "",
     "Cells of the finest of three nested meshes, about.", "8000 is right for most work"},
    {"flow", "friction", &Case::friction, D::none, "", 0, 0, Need::optional, "false", Applies::any, "",
     "Friction on blades and end walls. This version computes without it and says so in the results if it is asked for.", ""},
    {"flow", "passages", &Case::passages, D::none, "", 1, 12, Need::optional, "3", Applies::any, "",
     "Passages drawn side by side in the flow files.", "the flow is the same in each"},
    {"flow", "upstream", &Case::upstream, D::none, "", 0.3, 5, Need::optional, "1.0", Applies::any, "",
     "Distance of the inlet plane from the leading edges, in blade widths.", "1 is right for most work"},
    {"flow", "downstream", &Case::downstream, D::none, "", 0.3, 5, Need::optional, "1.0", Applies::any, "",
     "Distance of the exit plane from the trailing edges, in blade widths.", "1 is right for most work"},
    {"flow", "max_steps", &Case::max_steps, D::none, "", 5, 100000, Need::optional, "150", Applies::any, "",
     "Most solver steps on one mesh.", "more where a point has not converged"},
    {"flow", "averaging_steps", &Case::averaging_steps, D::none, "", 0, 100000, Need::optional, "160", Applies::any, "",
     "Time steps averaged where the flow does not settle; 0: such a point fails.", "more where the error bars are wide"},
    {"flow", "residual_drop", &Case::residual_drop, D::none, "", 1e-13, 1e-3, Need::optional, "1e-10", Applies::any, "",
     "Fall of the residual at which a flow counts as steady.", "1e-10 is right for most work"},
  };
  // clang-format on
}

std::string number_text(double value) { return fmt::format("{:g}", value); }

}  // namespace

const std::vector<KeyRow>& key_table() {
  static const std::vector<KeyRow> rows = make_key_table();
  return rows;
}

const std::vector<TableRow>& table_table() {
  static const std::vector<TableRow> rows{
      {"", Applies::any, false, "At the top of the file, before the first table."},
      {"gas", Applies::any, false, "The working gas."},
      {"supply", Applies::wheel, true, "The gas at rest upstream of the nozzles."},
      {"exhaust", Applies::wheel, false, "Where the gas goes."},
      {"site", Applies::any, false, "Where the machine stands."},
      {"nozzle", Applies::wheel, true, "The nozzles: all alike, all at one angle."},
      {"wheel", Applies::wheel, true,
       "The wheel and its speed: one of speed, speeds and speed_ratios."},
      {"stream", Applies::rig, true, "The stream into a blade row alone, as on a test rig."},
      {"row", Applies::rig, true, "The blade row on a test rig."},
      {"blade", Applies::any, true, "The shape of the blades."},
      {"flow", Applies::any, false, "How the flow is computed."},
  };
  return rows;
}

const KeyRow* find_key(const std::string& table, const std::string& key) {
  for (const KeyRow& row : key_table())
    if (row.table == table && row.key == key) return &row;
  return nullptr;
}

std::string key_name(const KeyRow& row) {
  return *row.table ? fmt::format("[{}] {}", row.table, row.key) : row.key;
}

std::string range_text(const KeyRow& row) {
  if (*row.choices) return either_of(words(row.choices));
  if (std::holds_alternative<bool Case::*>(row.target)) return "true or false";
  if (std::holds_alternative<std::string Case::*>(row.target)) return "text";
  const std::string unit = *row.unit ? fmt::format(" {}", row.unit) : "";
  return fmt::format("{}{} to {}{}", number_text(row.minimum), unit, number_text(row.maximum),
                     unit);
}

std::vector<std::string> words(const std::string& list) {
  std::istringstream stream(list);
  std::vector<std::string> result;
  for (std::string word; stream >> word;) result.push_back(word);
  return result;
}

std::string either_of(const std::vector<std::string>& list) {
  std::string text;
  for (std::size_t i = 0; i < list.size(); ++i) {
    if (i > 0) text += i + 1 == list.size() ? " or " : ", ";
    text += list[i];
  }
  return text;
}

}  // namespace falcate::cases
