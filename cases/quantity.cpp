#include "cases/quantity.h"

#include <fmt/format.h>
#include <udunits2.h>

#include <array>
#include <cassert>
#include <charconv>
#include <cmath>
#include <memory>
#include <mutex>
#include <optional>
#include <string_view>

namespace falcate::cases {
namespace {

struct DimensionRow {
  Dimension dimension;
  const char* name;
  const char* si_unit;
  const char* example;
};

constexpr std::array<DimensionRow, 11> dimension_rows{{
    {Dimension::none, "a number", "1", "0.95"},
    {Dimension::length, "a length", "m", "44 mm"},
    {Dimension::angle, "an angle", "rad", "20 deg"},
    {Dimension::pressure, "a pressure", "Pa", "6 bar(g)"},
    {Dimension::absolute_pressure, "an absolute pressure", "Pa", "1.013 bar(a)"},
    {Dimension::stress, "a stress", "Pa", "120 MPa"},
    {Dimension::temperature, "a temperature", "K", "20 degC"},
    {Dimension::rotational_speed, "a rotational speed", "rad/s", "60000 rpm"},
    {Dimension::gas_constant, "a specific gas constant", "J/(kg K)", "287.05 J/(kg K)"},
    {Dimension::viscosity, "a dynamic viscosity", "Pa s", "1.8e-5 Pa s"},
    {Dimension::density, "a density", "kg/m3", "2700 kg/m3"},
}};

const DimensionRow& row_of(Dimension dimension) {
  for (const DimensionRow& row : dimension_rows)
    if (row.dimension == dimension) return row;
  assert(false);
  return dimension_rows[0];
}

bool is_pressure(Dimension dimension) {
  return dimension == Dimension::pressure || dimension == Dimension::absolute_pressure;
}

using Unit = std::unique_ptr<ut_unit, decltype(&ut_free)>;

/// The unit database with the lock that UDUNITS-2, which is not thread-safe, needs.
class UnitSystem {
 public:
  static UnitSystem& instance() {
    static UnitSystem system;
    return system;
  }

  /// Factor and offset are applied by the library; nullopt where `from` is no such unit.
  std::optional<double> convert(double value, const std::string& from, const std::string& to) {
    const std::lock_guard<std::mutex> lock(mutex_);
    const Unit source = parse(from), target = parse(to);
    if (!source || !target) return std::nullopt;
    std::unique_ptr<cv_converter, decltype(&cv_free)> converter(
        ut_get_converter(source.get(), target.get()), &cv_free);
    if (!converter) return std::nullopt;
    return cv_convert_double(converter.get(), value);
  }

  bool known(const std::string& unit) {
    const std::lock_guard<std::mutex> lock(mutex_);
    return parse(unit) != nullptr;
  }

 private:
  UnitSystem() {
    ut_set_error_message_handler(ut_ignore);
    system_.reset(ut_read_xml(nullptr));
    if (!system_) throw QuantityError("the unit database of UDUNITS-2 cannot be read");
    add_name("deg", "degree");  // the database has the long names only
    add_name("rev", "revolution");
  }
  void add_name(const char* name, const char* unit) {
    ut_map_name_to_unit(name, UT_ASCII, parse(unit).get());
  }
  Unit parse(const std::string& unit) {
    return {ut_parse(system_.get(), unit.c_str(), UT_UTF8), &ut_free};
  }
  std::mutex mutex_;
  std::unique_ptr<ut_system, decltype(&ut_free_system)> system_{nullptr, &ut_free_system};
};

std::string trim(std::string_view text) {
  const auto first = text.find_first_not_of(" \t");
  if (first == std::string_view::npos) return {};
  return std::string(text.substr(first, text.find_last_not_of(" \t") - first + 1));
}

struct UnitWithDatum {
  std::string unit;
  PressureDatum datum = PressureDatum::none;
};

bool drop_suffix(std::string& unit, std::string_view suffix) {
  if (unit.size() <= suffix.size() || !std::string_view(unit).ends_with(suffix)) return false;
  unit = trim(std::string_view(unit).substr(0, unit.size() - suffix.size()));
  return true;
}

/// "bar(a)", "bar a", "bar abs", "bara" and their gauge fellows.
UnitWithDatum split_datum(const std::string& text) {
  UnitWithDatum result{text, PressureDatum::none};
  for (const char* suffix : {"(a)", "(abs)", "(absolute)", " a", " abs", " absolute"})
    if (drop_suffix(result.unit, suffix)) return {result.unit, PressureDatum::absolute};
  for (const char* suffix : {"(g)", "(gauge)", " g", " gauge"})
    if (drop_suffix(result.unit, suffix)) return {result.unit, PressureDatum::gauge};
  if (UnitSystem::instance().known(text)) return result;
  std::string bare = text;
  if (drop_suffix(bare, "a") && UnitSystem::instance().convert(1.0, bare, "Pa"))
    return {bare, PressureDatum::absolute};
  bare = text;
  if (drop_suffix(bare, "g") && UnitSystem::instance().convert(1.0, bare, "Pa"))
    return {bare, PressureDatum::gauge};
  return result;
}

struct NumberAndUnit {
  double number = 0.0;
  std::string number_text, unit;
};

NumberAndUnit split_number(const std::string& text, const DimensionRow& row) {
  const std::string body = trim(text);
  NumberAndUnit parts;
  const char* begin = body.c_str();
  const char* end = begin + body.size();
  const char* start = begin != end && *begin == '+' ? begin + 1 : begin;
  const auto [stop, error] = std::from_chars(start, end, parts.number);
  if (error == std::errc::result_out_of_range)
    throw QuantityError("the number is too large or too small");
  if (error != std::errc() || !std::isfinite(parts.number))
    throw QuantityError(fmt::format("must be a number and a unit, such as \"{}\"", row.example));
  if (stop != end && *stop == ',')
    throw QuantityError(
        "a number has a point before its decimals and no comma, such as \"6.5\" or \"60000\"");
  parts.number_text.assign(begin, stop);
  parts.unit = trim(std::string_view(stop, static_cast<std::size_t>(end - stop)));
  return parts;
}

/// UDUNITS-2 takes radians as a plain number, so that "Hz" would pass for rad/s and "%" for an
/// angle: ask for the angle by name.
bool names_an_angle(const std::string& unit) {
  for (const char* word : {"rpm", "rev", "rad", "deg", "°", "turn", "rps", "gon", "arc", "cycle"})
    if (unit.find(word) != std::string::npos) return true;
  return false;
}

[[noreturn]] void throw_wrong_unit(const std::string& unit, const DimensionRow& row) {
  std::string hint;
  if (row.dimension == Dimension::temperature && (unit == "C" || unit == "F"))
    hint = fmt::format("; write \"deg{}\" for degrees", unit);
  else
    hint = fmt::format(", such as \"{}\"", row.example);
  if (!UnitSystem::instance().known(unit))
    throw QuantityError(fmt::format("\"{}\" is no known unit; give {}{}", unit, row.name, hint));
  throw QuantityError(fmt::format("\"{}\" is not a unit of {}; give {}{}", unit,
                                  row.name + (row.name[1] == 'n' ? 3 : 2), row.name, hint));
}

void check_datum(const NumberAndUnit& parts, const UnitWithDatum& unit, Dimension dimension) {
  if (dimension == Dimension::pressure && unit.datum == PressureDatum::none)
    throw QuantityError(
        fmt::format("a pressure must say absolute or gauge: write \"{0} {1}(a)\" or \"{0} {1}(g)\"",
                    parts.number_text, unit.unit));
  if (dimension == Dimension::absolute_pressure && unit.datum == PressureDatum::gauge)
    throw QuantityError(
        fmt::format("must be absolute: write \"{} {}(a)\"", parts.number_text, unit.unit));
}

}  // namespace

Quantity parse_quantity(const std::string& text, Dimension dimension) {
  const DimensionRow& row = row_of(dimension);
  const NumberAndUnit parts = split_number(text, row);
  if (parts.unit.empty())
    throw QuantityError(
        fmt::format("the unit is missing; give {}, such as \"{}\"", row.name, row.example));
  const UnitWithDatum unit =
      is_pressure(dimension) ? split_datum(parts.unit) : UnitWithDatum{parts.unit, {}};
  const bool angular = dimension == Dimension::angle || dimension == Dimension::rotational_speed;
  const std::optional<double> value =
      UnitSystem::instance().convert(parts.number, unit.unit, row.si_unit);
  if (!value || (angular && !names_an_angle(unit.unit))) throw_wrong_unit(unit.unit, row);
  check_datum(parts, unit, dimension);
  return {*value, unit.datum};
}

double from_si(double value, const std::string& unit, Dimension dimension) {
  const std::string bare = is_pressure(dimension) ? split_datum(unit).unit : unit;
  const auto result = UnitSystem::instance().convert(value, row_of(dimension).si_unit, bare);
  assert(result);
  return *result;
}

const char* dimension_name(Dimension dimension) { return row_of(dimension).name; }
const char* example_of(Dimension dimension) { return row_of(dimension).example; }

}  // namespace falcate::cases
