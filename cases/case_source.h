/// Where each key of a case file stands and what was written there, for messages.
#pragma once
#include <map>
#include <string>

#include "cases/key_table.h"

namespace falcate::cases {

struct KeySource {
  int line = 0;            ///< 0: not in the file
  std::string value_text;  ///< as written
  bool usable = false;     ///< read without a problem, or a default
  bool given() const { return line > 0; }
};

class CaseSource {
 public:
  KeySource& operator[](const KeyRow& row) { return keys_[key_name(row)]; }
  const KeySource& at(const std::string& table, const std::string& key) const;
  bool given(const std::string& table, const std::string& key) const {
    return at(table, key).given();
  }
  bool usable(const std::string& table, const std::string& key) const {
    return at(table, key).usable;
  }
  /// Line of the key, of its table where it is not given, 0 where neither is.
  int line(const std::string& table, const std::string& key) const;
  void set_table_line(const std::string& table, int line) { table_lines_[table] = line; }
  int table_line(const std::string& table) const;

  /// "[nozzle] angle = "20 deg"", or "[nozzle] angle" where it is not given.
  std::string quote(const std::string& table, const std::string& key) const;

 private:
  std::map<std::string, KeySource> keys_;
  std::map<std::string, int> table_lines_;
};

}  // namespace falcate::cases
