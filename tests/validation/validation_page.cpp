// Solves again what docs/validation.md tells and writes its sections and figures:
//   validation_page [--out FOLDER] [--section NAME]      FOLDER: docs; NAME: all
// Sections of other programs in the page stay as they are.
#include <fmt/format.h>

#include <exception>
#include <filesystem>
#include <string>
#include <string_view>

#include "post/whole_file.h"
#include "tests/validation/page_section.h"
#include "tests/validation/page_sections.h"

namespace falcate::validation {
namespace {

struct Section {
  std::string_view name;
  std::string (*text)(const std::filesystem::path&);
};
constexpr Section sections[] = {{"measured-row", measured_row_section},
                                {"impulse-rows", impulse_rows_section},
                                {"exact-flows", exact_flows_section}};

/// False where no section has that name.
bool write_sections(const std::filesystem::path& folder, const std::string& wanted) {
  std::filesystem::create_directories(folder / "figures");
  const std::string file = (folder / "validation.md").string();
  bool found = false;
  for (const Section& section : sections) {
    if (!wanted.empty() && wanted != section.name) continue;
    found = true;
    const std::string text = section.text(folder);
    post::write_whole_file(
        file, with_section(post::read_whole_file(file), std::string(section.name), text));
    fmt::print("{}: {} written\n", file, section.name);
  }
  return found;
}

int refuse() {
  fmt::print(stderr, "validation_page [--out FOLDER] [--section NAME]\nsections:");
  for (const Section& section : sections) fmt::print(stderr, " {}", section.name);
  fmt::print(stderr, "\n");
  return 2;
}

int run(int argc, char** argv) {
  std::string folder = "docs", wanted;
  if (argc % 2 == 0) return refuse();
  for (int i = 1; i + 1 < argc; i += 2) {
    const std::string_view key = argv[i];
    if (key == "--out")
      folder = argv[i + 1];
    else if (key == "--section")
      wanted = argv[i + 1];
    else
      return refuse();
  }
  return write_sections(folder, wanted) ? 0 : refuse();
}

}  // namespace
}  // namespace falcate::validation

int main(int argc, char** argv) {
  try {
    return falcate::validation::run(argc, argv);
  } catch (const std::exception& error) {
    fmt::print(stderr, "{}\n", error.what());
    return 4;
  }
}
