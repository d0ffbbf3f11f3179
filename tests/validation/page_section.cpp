#include "tests/validation/page_section.h"

namespace falcate::validation {

std::string with_section(const std::string& page, const std::string& name,
                         const std::string& body) {
  const std::string begin = "<!-- begin " + name + " -->\n", end = "<!-- end " + name + " -->\n";
  const std::size_t from = page.find(begin);
  const std::size_t to = from == std::string::npos ? from : page.find(end, from);
  if (to == std::string::npos) return page + (page.empty() ? "" : "\n") + begin + body + end;
  return page.substr(0, from + begin.size()) + body + page.substr(to);
}

}  // namespace falcate::validation
