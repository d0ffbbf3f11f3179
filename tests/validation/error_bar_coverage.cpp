// Solves the flows with exact answers and tells how the error bars hold:
//   error_bar_coverage [--out FILE] [--list FILE]
// --out: page whose section on error bars is written anew (docs/validation.md); --list: every
// figure, comma-separated. Without either, the section goes to the terminal.
#include <fmt/format.h>

#include <algorithm>
#include <exception>
#include <string>
#include <thread>

#include "post/whole_file.h"
#include "tests/validation/coverage.h"
#include "tests/validation/page_section.h"

namespace falcate::validation {
namespace {

struct Request {
  std::string page, list;
  bool sound = true;
};

Request read_request(int argc, char** argv) {
  Request request;
  request.sound = argc % 2 == 1;
  for (int i = 1; i + 1 < argc; i += 2) {
    const std::string key = argv[i];
    if (key == "--out")
      request.page = argv[i + 1];
    else if (key == "--list")
      request.list = argv[i + 1];
    else
      request.sound = false;
  }
  return request;
}

void write_coverage(const Request& request) {
  // Read first: a page that is not there must not cost the minutes of the solutions.
  const std::string page = request.page.empty() ? "" : post::read_whole_file(request.page);
  const int workers = std::clamp(static_cast<int>(std::thread::hardware_concurrency()), 1, 2);
  const auto solved = solve_cases(exact_cases(), workers);
  const std::string section = coverage_section(solved);
  if (!request.list.empty()) post::write_whole_file(request.list, coverage_list(solved));
  if (!request.page.empty())
    post::write_whole_file(request.page, with_section(page, "error-bars", section + "\n"));
  if (request.page.empty() && request.list.empty()) fmt::print("{}", section);
}

}  // namespace
}  // namespace falcate::validation

int main(int argc, char** argv) {
  const auto request = falcate::validation::read_request(argc, argv);
  if (!request.sound) {
    fmt::print(stderr, "error_bar_coverage [--out FILE] [--list FILE]\n");
    return 2;
  }
  try {
    falcate::validation::write_coverage(request);
  } catch (const std::exception& error) {
    fmt::print(stderr, "{}\n", error.what());
    return 4;
  }
  return 0;
}
