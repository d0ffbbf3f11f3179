/// The reference of case-file keys, made from the table of keys.
#pragma once
#include <string>

namespace falcate::cases {

std::string key_reference_markdown();  ///< docs/case-file.md
std::string key_reference_text();      ///< for a terminal

}  // namespace falcate::cases
