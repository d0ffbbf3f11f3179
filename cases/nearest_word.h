/// The word of a list that was probably meant: least edit distance (insert, delete, replace, swap
/// of neighbours), capitals and -_ aside. Source: Damerau, Comm. ACM 7 (1964) 171.
#pragma once
#include <optional>
#include <string>
#include <vector>

namespace falcate::cases {

int edit_distance(const std::string& a, const std::string& b);

/// Nullopt where nothing on the list is near (more than a third of the letters differ).
std::optional<std::string> nearest_word(const std::string& word,
                                        const std::vector<std::string>& list);

}  // namespace falcate::cases
