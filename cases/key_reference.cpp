#include "cases/key_reference.h"

#include <fmt/format.h>

#include "cases/key_table.h"

namespace falcate::cases {
namespace {

const char* case_words(Applies applies) {
  switch (applies) {
    case Applies::wheel:
      return "wheel cases";
    case Applies::rig:
      return "rig cases (a blade row alone)";
    case Applies::any:
      break;
  }
  return "all cases";
}

std::string kind_words(const KeyRow& row) {
  if (std::holds_alternative<std::vector<double> Case::*>(row.target))
    return row.dimension == Dimension::none ? "list of numbers" : "list of quantities";
  if (std::holds_alternative<bool Case::*>(row.target)) return "true or false";
  if (std::holds_alternative<int Case::*>(row.target)) return "whole number";
  if (std::holds_alternative<std::string Case::*>(row.target)) return "text";
  if (row.dimension == Dimension::none) return "number";
  return fmt::format("{}, as \"{}\"", dimension_name(row.dimension), example_of(row.dimension));
}

std::string default_words(const KeyRow& row) {
  if (row.need == Need::required) return "must be given";
  return *row.default_text ? row.default_text : "none";
}

std::string table_title(const TableRow& row) {
  return *row.table ? fmt::format("[{}]", row.table) : "Top of the file";
}

const char* introduction =
    R"(# The case file

<!-- Made by `falcate keys --markdown` from the table of keys; change the table, not this page. -->

A case file is TOML. A wheel case has `[supply]`, `[nozzle]` and `[wheel]`; a rig case, a blade row
alone, has `[stream]` and `[row]` in their place. Both have `[blade]`.

- A quantity is text with its unit: `"44 mm"`, `"60000 rpm"`, `"20 degC"`, `"20 deg"`. Any unit of the
  right kind will do; the units are those of UDUNITS-2.
- A pressure says whether it is absolute or gauge: `bar(a)`, `bara`, `psia`, `kPa(a)` or `bar(g)`, `barg`,
  `psig`, `kPa(g)`. Gauge is above `[site] atmospheric_pressure`.
- Angles are measured from the plane of rotation: 0 along the way the wheel turns, 90 deg axial.
- `falcate check CASE` reads a case file, says everything that is wrong with it, and prints what follows
  from it without solving.
)";

}  // namespace

std::string key_reference_markdown() {
  std::string text = introduction;
  for (const TableRow& table : table_table()) {
    text += fmt::format("\n## {}\n\n{} For {}{}.\n\n", table_title(table), table.help,
                        case_words(table.applies), table.required ? "; must be given" : "");
    text += "| Key | Value | Range | Default | Meaning |\n|---|---|---|---|---|\n";
    for (const KeyRow& row : key_table())
      if (std::string(row.table) == table.table)
        text += fmt::format("| `{}` | {} | {} | {} | {} |\n", row.key, kind_words(row),
                            range_text(row), default_words(row), row.help);
  }
  return text;
}

std::string key_reference_text() {
  std::string text;
  for (const TableRow& table : table_table()) {
    text += fmt::format("{}{}  ({})\n", text.empty() ? "" : "\n", table_title(table),
                        case_words(table.applies));
    for (const KeyRow& row : key_table())
      if (std::string(row.table) == table.table)
        text += fmt::format("  {:<22} {}; {}; default {}\n{:25}{}\n", row.key, kind_words(row),
                            range_text(row), default_words(row), "", row.help);
  }
  return text;
}

}  // namespace falcate::cases
