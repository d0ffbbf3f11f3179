#include "cases/nearest_word.h"

#include <algorithm>
#include <cctype>

namespace falcate::cases {
namespace {

std::string plain(const std::string& word) {
  std::string result;
  for (const char c : word)
    if (c != '-' && c != '_')
      result += static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
  return result;
}

}  // namespace

int edit_distance(const std::string& a, const std::string& b) {
  const std::size_t m = a.size(), n = b.size();
  std::vector<std::vector<int>> d(m + 1, std::vector<int>(n + 1, 0));
  for (std::size_t i = 0; i <= m; ++i) d[i][0] = static_cast<int>(i);
  for (std::size_t j = 0; j <= n; ++j) d[0][j] = static_cast<int>(j);
  for (std::size_t i = 1; i <= m; ++i)
    for (std::size_t j = 1; j <= n; ++j) {
      const int change = a[i - 1] == b[j - 1] ? 0 : 1;
      d[i][j] = std::min({d[i - 1][j] + 1, d[i][j - 1] + 1, d[i - 1][j - 1] + change});
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
        d[i][j] = std::min(d[i][j], d[i - 2][j - 2] + 1);
    }
  return d[m][n];
}

std::optional<std::string> nearest_word(const std::string& word,
                                        const std::vector<std::string>& list) {
  std::optional<std::string> nearest;
  int least = std::max(1, static_cast<int>(word.size()) / 3) + 1;
  for (const std::string& candidate : list) {
    const bool cut_short = word.size() > 2 && plain(candidate).starts_with(plain(word));
    const int distance = cut_short ? 1 : edit_distance(plain(word), plain(candidate));
    if (distance < least) {
      least = distance;
      nearest = candidate;
    }
  }
  return nearest;
}

}  // namespace falcate::cases
