/// The one table of case-file keys: it drives parsing, ranges, defaults, messages and the key
/// reference. To add a key, add a field to `Case` and a row here; the tests walk every row.
/// Ranges are in the row's own unit, the one people see.
#pragma once
#include <optional>
#include <string>
#include <variant>
#include <vector>

#include "cases/case.h"
#include "cases/quantity.h"

namespace falcate::cases {

/// Which cases may have the key.
enum class Applies { any, wheel, rig };

/// Whether the key must be there. `special`: a check of the whole case decides.
enum class Need { required, optional, special };

/// Where the value goes; its type is also the kind of value the key takes.
using KeyTarget = std::variant<std::string Case::*, double Case::*, int Case::*, bool Case::*,
                               std::optional<double> Case::*, std::vector<double> Case::*>;

struct KeyRow {
  const char* table;  ///< "" for the top of the file
  const char* key;
  KeyTarget target;
  Dimension dimension;      ///< none: a plain number, true/false or text
  const char* unit;         ///< of the range, "" for a plain number
  double minimum, maximum;  ///< in `unit`, ends included
  Need need;
  const char* default_text;  ///< as one would write it in the file; "" for none
  Applies applies;
  const char* choices;  ///< words divided by spaces; "" for free text
  const char* help;     ///< one sentence for the reference
  const char* remedy;   ///< what to do when the value is out of range or missing
};

const std::vector<KeyRow>& key_table();

struct TableRow {
  const char* table;
  Applies applies;
  bool required;  ///< for the cases it applies to
  const char* help;
};
const std::vector<TableRow>& table_table();

const KeyRow* find_key(const std::string& table, const std::string& key);

/// "[nozzle] angle", or "title" at the top of the file.
std::string key_name(const KeyRow& row);

/// "5 deg to 80 deg", "1 to 200", "ringed or open".
std::string range_text(const KeyRow& row);

/// Words of a list divided by spaces.
std::vector<std::string> words(const std::string& list);

/// "a, b or c".
std::string either_of(const std::vector<std::string>& list);

}  // namespace falcate::cases
