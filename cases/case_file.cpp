#include "cases/case_file.h"

#include <fmt/format.h>
#include <toml++/toml.h>

#include <cmath>
#include <filesystem>
#include <fstream>
#include <set>
#include <sstream>

#include "cases/case_checks.h"
#include "cases/case_source.h"
#include "cases/key_table.h"
#include "cases/nearest_word.h"
#include "cases/quantity.h"
#include "cases/sha256.h"
#include "post/gas_properties.h"

namespace falcate::cases {
namespace {

int line_of(const toml::node& node) { return static_cast<int>(node.source().begin.line); }

std::string value_text(const toml::node& node) {
  if (const auto* text = node.as_string()) return fmt::format("\"{}\"", text->get());
  if (const auto* number = node.as_integer()) return fmt::format("{}", number->get());
  if (const auto* number = node.as_floating_point()) return fmt::format("{:g}", number->get());
  if (const auto* flag = node.as_boolean()) return flag->get() ? "true" : "false";
  if (const auto* list = node.as_array()) {
    std::vector<std::string> items;
    for (const toml::node& item : *list) items.push_back(value_text(item));
    return fmt::format("[{}]", fmt::join(items, ", "));
  }
  return node.is_table() ? "{...}" : "a date";
}

/// What is wrong with a value, without saying where.
class ValueError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

std::string with_remedy(const std::string& what, const KeyRow& row) {
  return *row.remedy ? fmt::format("{}; {}", what, row.remedy) : what;
}

void check_range(double value, const KeyRow& row) {
  const double shown = *row.unit ? from_si(value, row.unit, row.dimension) : value;
  const double slack = 1e-9 * std::max(std::abs(row.minimum), std::abs(row.maximum));
  if (shown < row.minimum - slack || shown > row.maximum + slack)
    throw ValueError(with_remedy(fmt::format("must lie within {}", range_text(row)), row));
}

double read_plain_number(const toml::node& node, const KeyRow& row) {
  const std::optional<double> value =
      node.is_number() ? node.value<double>() : std::optional<double>{};
  if (!value || !std::isfinite(*value))
    throw ValueError(fmt::format("must be a number within {}, without quotes", range_text(row)));
  check_range(*value, row);
  return *value;
}

double read_quantity(const toml::node& node, const KeyRow& row, double atmosphere) {
  const auto* text = node.as_string();
  if (!text)
    throw ValueError(
        fmt::format("must be text with a unit, such as \"{}\"", example_of(row.dimension)));
  Quantity quantity;
  try {
    quantity = parse_quantity(text->get(), row.dimension);
  } catch (const QuantityError& error) {
    throw ValueError(error.what());
  }
  if (quantity.datum == PressureDatum::gauge) quantity.value += atmosphere;
  check_range(quantity.value, row);
  return quantity.value;
}

double read_number(const toml::node& node, const KeyRow& row, double atmosphere) {
  return row.dimension == Dimension::none ? read_plain_number(node, row)
                                          : read_quantity(node, row, atmosphere);
}

int read_integer(const toml::node& node, const KeyRow& row) {
  const auto* value = node.as_integer();
  if (!value) throw ValueError(fmt::format("must be a whole number within {}", range_text(row)));
  check_range(static_cast<double>(value->get()), row);
  return static_cast<int>(value->get());
}

bool read_flag(const toml::node& node) {
  const auto* value = node.as_boolean();
  if (!value) throw ValueError("must be true or false, without quotes");
  return value->get();
}

std::string read_text(const toml::node& node, const KeyRow& row) {
  const auto* value = node.as_string();
  if (!value)
    throw ValueError(*row.choices
                         ? fmt::format("must be {}, in quotes", either_of(words(row.choices)))
                         : "must be text in quotes");
  if (!*row.choices) return value->get();
  const std::vector<std::string> choices = words(row.choices);
  for (const std::string& choice : choices)
    if (choice == value->get()) return choice;
  std::string what = fmt::format("must be {}", either_of(choices));
  if (const auto nearest = nearest_word(value->get(), choices))
    what += fmt::format("; did you mean \"{}\"?", *nearest);
  throw ValueError(what);
}

std::vector<double> read_list(const toml::node& node, const KeyRow& row, double atmosphere) {
  const auto* list = node.as_array();
  const std::string example =
      row.dimension == Dimension::none
          ? "[0.2, 0.4]"
          : fmt::format("[\"20000 rpm\", \"{}\"]", example_of(row.dimension));
  if (!list) throw ValueError(fmt::format("must be a list, such as {}", example));
  if (list->empty())
    throw ValueError(fmt::format("must not be empty; give a list such as {}", example));
  std::vector<double> values;
  for (const toml::node& item : *list) {
    try {
      values.push_back(read_number(item, row, atmosphere));
    } catch (const ValueError& error) {
      throw ValueError(fmt::format("{} {}", value_text(item), error.what()));
    }
  }
  return values;
}

/// Puts the value where the row says.
struct Store {
  const toml::node& node;
  const KeyRow& row;
  double atmosphere;
  Case& target;
  void operator()(std::string Case::*field) const { target.*field = read_text(node, row); }
  void operator()(double Case::*field) const { target.*field = read_number(node, row, atmosphere); }
  void operator()(int Case::*field) const { target.*field = read_integer(node, row); }
  void operator()(bool Case::*field) const { target.*field = read_flag(node); }
  void operator()(std::optional<double> Case::*field) const {
    target.*field = read_number(node, row, atmosphere);
  }
  void operator()(std::vector<double> Case::*field) const {
    target.*field = read_list(node, row, atmosphere);
  }
};

/// A default as a TOML value, so that it takes the same way as a given one.
toml::table default_value(const KeyRow& row) {
  const bool quoted =
      row.dimension != Dimension::none || std::holds_alternative<std::string Case::*>(row.target);
  const char* quote = quoted ? "\"" : "";
  return toml::parse(fmt::format("value = {0}{1}{0}", quote, row.default_text));
}

std::string read_all(const std::string& path, CaseProblems& problems) {
  std::error_code error;
  if (std::filesystem::is_directory(path, error)) {
    problems.add(0, "is a folder; name the case file in it");
    return {};
  }
  std::ifstream stream(path, std::ios::binary);
  std::ostringstream content;
  content << stream.rdbuf();
  if (!stream) problems.add(0, "cannot be read; check the name and the rights of the file");
  return content.str();
}

class Reader {
 public:
  explicit Reader(const std::string& path) : problems_(path) { case_.file = path; }

  Case read(const std::string& outline_path) {
    case_.text = read_all(case_.file, problems_);
    problems_.raise();
    parse();
    find_kind();
    find_unknown_keys();
    case_.atmospheric_pressure = 101325.0;
    read_key(*find_key("site", "atmospheric_pressure"));  // gauge pressures need it
    for (const KeyRow& row : key_table())
      if (applies(row.applies) && row.target != KeyTarget(&Case::atmospheric_pressure))
        read_key(row);
    finish(outline_path);
    check_case(case_, source_, problems_);
    problems_.raise();
    return case_;
  }

 private:
  void parse() {
    try {
      root_ = toml::parse(case_.text, case_.file);
    } catch (const toml::parse_error& error) {
      problems_.add(static_cast<int>(error.source().begin.line),
                    fmt::format("is not TOML: {}", error.description()));
      problems_.raise();
    }
    for (const auto& [name, node] : root_)
      if (node.is_table()) source_.set_table_line(std::string(name.str()), line_of(node));
  }

  std::string first_table(Applies kind) const {
    for (const TableRow& row : table_table())
      if (row.applies == kind && root_.contains(row.table)) return row.table;
    return {};
  }

  void find_kind() {
    const std::string wheel = first_table(Applies::wheel), rig = first_table(Applies::rig);
    case_.kind = wheel.empty() && !rig.empty() ? CaseKind::rig : CaseKind::wheel;
    if (wheel.empty() && rig.empty()) {
      problems_.add(0,
                    "says neither what wheel nor what rig it is about; give [supply], [nozzle] and "
                    "[wheel] for a wheel, or [stream] and [row] for a blade row alone");
      problems_.raise();
    }
    if (!wheel.empty() && !rig.empty()) {
      for (const TableRow& row : table_table())
        if (row.applies == Applies::rig && root_.contains(row.table))
          problems_.add(source_.table_line(row.table),
                        fmt::format("[{}] belongs to a blade row alone and [{}] to a wheel; keep "
                                    "one of the two kinds",
                                    row.table, wheel));
    }
    for (const TableRow& row : table_table())
      if (row.required && applies(row.applies) && !root_.contains(row.table))
        problems_.add(
            0, fmt::format("[{}] is missing; add it with {}", row.table, required_keys(row.table)));
  }

  static std::string required_keys(const std::string& table) {
    std::vector<std::string> keys;
    for (const KeyRow& row : key_table())
      if (row.table == table && row.need == Need::required) keys.emplace_back(row.key);
    return fmt::format("{}", fmt::join(keys, ", "));
  }

  bool applies(Applies which) const {
    return which == Applies::any || (which == Applies::wheel) == (case_.kind == CaseKind::wheel);
  }

  void find_unknown_keys() {
    for (const auto& [name, node] : root_) {
      const std::string key(name.str());
      if (is_table_name(key))
        check_table(key, node);
      else if (node.is_table() || node.is_array_of_tables())
        unknown_table(key, line_of(node));
      else if (!find_key("", key))
        unknown_key("", key, node);
    }
  }

  static bool is_table_name(const std::string& name) {
    for (const TableRow& row : table_table())
      if (!name.empty() && row.table == name) return true;
    return false;
  }

  void check_table(const std::string& name, const toml::node& node) {
    const toml::table* table = node.as_table();
    if (!table) {
      problems_.add(line_of(node), fmt::format("{} must be a table, written once as [{}] with its "
                                               "keys below it",
                                               name, name));
      broken_tables_.insert(name);
      return;
    }
    for (const auto& [key, value] : *table)
      if (!find_key(name, std::string(key.str()))) unknown_key(name, std::string(key.str()), value);
  }

  void unknown_table(const std::string& name, int line) {
    std::vector<std::string> names;
    for (const TableRow& row : table_table())
      if (*row.table) names.emplace_back(row.table);
    const auto nearest = nearest_word(name, names);
    problems_.add(
        line, nearest ? fmt::format("[{}] is no known table; did you mean [{}]?", name, *nearest)
                      : fmt::format("[{}] is no known table; known are [{}]", name,
                                    fmt::join(names, "], [")));
  }

  void unknown_key(const std::string& table, const std::string& key, const toml::node& node) {
    const std::string name = table.empty() ? key : fmt::format("[{}] {}", table, key);
    std::vector<std::string> here, elsewhere;
    for (const KeyRow& row : key_table()) {
      if (row.table == table) here.emplace_back(row.key);
      if (row.key == key) elsewhere.push_back(key_name(row));
    }
    std::string advice;
    if (!elsewhere.empty())
      advice = fmt::format("did you mean {}?", either_of(elsewhere));
    else if (const auto nearest = nearest_word(key, here))
      advice = fmt::format("did you mean {}?", *nearest);
    else
      advice = fmt::format("known here are {}", fmt::join(here, ", "));
    problems_.add(line_of(node),
                  fmt::format("{} = {}: no known key; {}", name, value_text(node), advice));
  }

  const toml::node* find_node(const KeyRow& row) const {
    if (!*row.table) return root_.get(row.key);
    const toml::node* table = root_.get(row.table);
    return table && table->is_table() ? table->as_table()->get(row.key) : nullptr;
  }

  void read_key(const KeyRow& row) {
    KeySource& source = source_[row];
    if (const toml::node* node = find_node(row)) {
      source.line = line_of(*node);
      source.value_text = value_text(*node);
      source.usable = store(*node, row);
    } else if (*row.default_text) {
      const toml::table value = default_value(row);
      source.usable = store(*value.get("value"), row);
    } else if (row.need == Need::required) {
      report_missing(row);
    }
  }

  bool store(const toml::node& node, const KeyRow& row) {
    try {
      std::visit(Store{node, row, case_.atmospheric_pressure, case_}, row.target);
      return true;
    } catch (const ValueError& error) {
      problems_.add(line_of(node),
                    fmt::format("{} = {}: {}", key_name(row), value_text(node), error.what()));
      return false;
    }
  }

  void report_missing(const KeyRow& row) {
    if (!source_.table_line(row.table) || broken_tables_.count(row.table)) return;  // said already
    const std::string example =
        *row.choices ? range_text(row)
                     : fmt::format("{} within {}", dimension_name(row.dimension), range_text(row));
    problems_.add(source_.table_line(row.table),
                  with_remedy(fmt::format("{} is missing: give {}", key_name(row), example), row));
  }

  void finish(const std::string& outline_path) {
    if (!source_.given("", "title"))
      case_.title = std::filesystem::path(case_.file).stem().string();
    finish_gas();
    if (!source_.given("nozzle", "exit_diameter"))
      case_.nozzle_exit_diameter = case_.throat_diameter;
    std::string digest_text = case_.text;
    if (!case_.outline_file.empty()) {
      const auto folder = std::filesystem::path(case_.file).parent_path();
      case_.outline_path =
          outline_path.empty() ? (folder / case_.outline_file).string() : outline_path;
      std::ifstream stream(case_.outline_path, std::ios::binary);
      std::ostringstream content;
      content << stream.rdbuf();
      digest_text += content.str();
    }
    case_.sha256 = sha256(digest_text);
  }

  void finish_gas() {
    if (source_.given("gas", "heat_capacity_ratio") || source_.given("gas", "gas_constant")) {
      if (!source_.given("gas", "name")) case_.gas_name.clear();
      if (case_.heat_capacity_ratio) case_.gas.heat_capacity_ratio = *case_.heat_capacity_ratio;
      if (case_.gas_constant) case_.gas.gas_constant = *case_.gas_constant;
    } else if (const post::NamedGas* gas = post::find_gas(case_.gas_name)) {
      case_.gas = gas->gas;
    }
  }

  Case case_;
  CaseProblems problems_;
  CaseSource source_;
  toml::table root_;
  std::set<std::string> broken_tables_;
};

}  // namespace

Case read_case(const std::string& path, const std::string& outline_path) {
  return Reader(path).read(outline_path);
}

}  // namespace falcate::cases
