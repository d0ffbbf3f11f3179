#include "cases/key_table.h"

#include <fmt/format.h>
#include <gtest/gtest.h>

#include <fstream>
#include <set>
#include <sstream>

#include "cases/case_file.h"
#include "cases/key_reference.h"
#include "tests/unit/cases/case_text.h"

namespace falcate::cases {
namespace {

TEST(KeyTable, NamesEachKeyOnceInAKnownTableWithHelp) {
  std::set<std::string> names, tables;
  for (const TableRow& row : table_table()) tables.insert(row.table);
  for (const KeyRow& row : key_table()) {
    SCOPED_TRACE(key_name(row));
    EXPECT_TRUE(names.insert(key_name(row)).second);
    EXPECT_EQ(tables.count(row.table), 1U);
    EXPECT_GT(std::string(row.help).size(), 10U);
    EXPECT_EQ(std::string(row.help).back(), '.');
    EXPECT_FALSE(row.need == Need::required && *row.default_text);
  }
}

bool has_range(const KeyRow& row) {
  return !std::holds_alternative<std::string Case::*>(row.target) &&
         !std::holds_alternative<bool Case::*>(row.target);
}

std::string value_for(const KeyRow& row, double number) {
  std::ostringstream text;
  text.precision(12);
  if (row.dimension == Dimension::none)
    text << number;
  else
    text << '"' << number << ' ' << row.unit << '"';
  if (std::holds_alternative<std::vector<double> Case::*>(row.target))
    return fmt::format("[{}]", text.str());
  return text.str();
}

/// The problems of a file with nothing but this key in it that are about this key.
std::string problems_of(const KeyRow& row, const std::string& value) {
  const ScratchFolder folder;
  const bool rig = row.applies == Applies::rig;
  std::string text = *row.table ? "" : std::string(row.key) + " = " + value + "\n";
  text += rig ? "[row]\n" : "[supply]\n";
  if (*row.table && std::string(row.table) != (rig ? "row" : "supply"))
    text += fmt::format("[{}]\n", row.table);
  if (*row.table) text += fmt::format("{} = {}\n", row.key, value);
  std::string found;
  try {
    read_case(folder.write("case.toml", text));
  } catch (const CaseError& error) {
    for (const std::string& problem : error.problems())
      if (problem.find(": " + key_name(row) + " = ") != std::string::npos) found += problem + "\n";
  }
  return found;
}

TEST(KeyTable, EveryRangeIsKeptAtBothEnds) {
  for (const KeyRow& row : key_table()) {
    if (!has_range(row)) continue;
    SCOPED_TRACE(key_name(row));
    const double span = row.maximum - row.minimum;
    const double beyond = std::holds_alternative<int Case::*>(row.target) ? 1.0 : 0.01 * span;
    const std::string refusal = "must lie within " + range_text(row);
    EXPECT_EQ(problems_of(row, value_for(row, row.minimum)).find(refusal), std::string::npos);
    EXPECT_EQ(problems_of(row, value_for(row, row.maximum)).find(refusal), std::string::npos);
    EXPECT_NE(problems_of(row, value_for(row, row.maximum + beyond)).find(refusal),
              std::string::npos);
    EXPECT_NE(problems_of(row, value_for(row, row.minimum - beyond)).find(refusal),
              std::string::npos);
  }
}

TEST(KeyTable, EveryKeyRefusesAValueOfAnotherKind) {
  for (const KeyRow& row : key_table()) {
    SCOPED_TRACE(key_name(row));
    EXPECT_NE(problems_of(row, "1979-05-27"), "");
  }
}

TEST(KeyReference, IsTheCommittedPage) {
  std::ifstream stream(FALCATE_SOURCE_DIR "/docs/case-file.md");
  std::ostringstream page;
  page << stream.rdbuf();
  EXPECT_EQ(page.str(), key_reference_markdown())
      << "write it anew: build/falcate keys --markdown > docs/case-file.md";
}

TEST(KeyReference, NamesEveryKeyOnceWithItsRange) {
  const std::string page = key_reference_markdown(), list = key_reference_text();
  for (const KeyRow& row : key_table()) {
    SCOPED_TRACE(key_name(row));
    EXPECT_NE(page.find("| `" + std::string(row.key) + "` |"), std::string::npos);
    EXPECT_NE(page.find(range_text(row)), std::string::npos);
    EXPECT_NE(list.find(row.help), std::string::npos);
  }
}

}  // namespace
}  // namespace falcate::cases
