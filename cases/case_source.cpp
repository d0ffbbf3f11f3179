#include "cases/case_source.h"

#include <fmt/format.h>

#include <cassert>

namespace falcate::cases {

const KeySource& CaseSource::at(const std::string& table, const std::string& key) const {
  static const KeySource absent;
  const KeyRow* row = find_key(table, key);
  assert(row);
  const auto found = keys_.find(key_name(*row));
  return found == keys_.end() ? absent : found->second;
}

int CaseSource::line(const std::string& table, const std::string& key) const {
  return given(table, key) ? at(table, key).line : table_line(table);
}

int CaseSource::table_line(const std::string& table) const {
  const auto found = table_lines_.find(table);
  return found == table_lines_.end() ? 0 : found->second;
}

std::string CaseSource::quote(const std::string& table, const std::string& key) const {
  const KeyRow* row = find_key(table, key);
  assert(row);
  if (!given(table, key)) return key_name(*row);
  return fmt::format("{} = {}", key_name(*row), at(table, key).value_text);
}

}  // namespace falcate::cases
