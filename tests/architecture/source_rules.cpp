#include "tests/architecture/source_rules.h"

#include <algorithm>
#include <map>
#include <regex>
#include <set>
#include <sstream>

namespace falcate::architecture {
namespace {

constexpr const char* kLayers = R"(^(mesh|solver|post|cases)/.*\.(h|cpp)$)";
constexpr const char* kSources = R"(\.(h|cpp)$)";
constexpr const char* kEverywhere = "";
constexpr const char* kNowhere = "^$";

// Words are put together from halves where the table would otherwise offend against itself.
std::vector<TextRule> make_text_rules() {
  return {
      {"Gmsh stays in the mesher",
       Part::includes,
       R"(^gmsh)",
       kSources,
       R"(^mesh/mesher_[^/]*\.(h|cpp)$)",
       {"mesh/outline.cpp", "#include <gmsh.h>\n"},
       {"mesh/mesher_main.cpp", "#include <gmsh.h>\n"}},
      {"VTK stays in sources of post",
       Part::includes,
       R"(^vtk\w+\.h$)",
       kSources,
       R"(^post/[^/]*\.cpp$|^tests/)",
       {"post/flow_file.h", "#include <vtkNew.h>\n"},
       {"post/flow_file.cpp", "#include <vtkNew.h>\n"}},
      {"no drawing classes of VTK",
       Part::includes,
       R"(^vtk(Render|Chart|Context|Plot|OpenGL|SMPTools))",
       kSources,
       kNowhere,
       {"post/picture.cpp", "#include <vtkRenderWindow.h>\n"},
       {"post/picture.cpp", "#include <vtkPolyData.h>\n"}},
      {"toml++ stays in sources of cases",
       Part::includes,
       R"(^toml(\+\+/|\.))",
       kSources,
       R"(^cases/[^/]*\.cpp$)",
       {"cases/case_file.h", "#include <toml++/toml.h>\n"},
       {"cases/case_file.cpp", "#include <toml++/toml.h>\n"}},
      {"CLI11 stays in sources of cases",
       Part::includes,
       R"(^CLI/)",
       kSources,
       R"(^cases/[^/]*\.cpp$)",
       {"post/report.cpp", "#include <CLI/CLI.hpp>\n"},
       {"cases/falcate_main.cpp", "#include <CLI/CLI.hpp>\n"}},
      {"UDUNITS stays in sources of cases",
       Part::includes,
       R"(udunits2)",
       kSources,
       R"(^cases/[^/]*\.cpp$)",
       {"cases/quantity.h", "#include <udunits2.h>\n"},
       {"cases/quantity.cpp", "#include <udunits2.h>\n"}},
      {"JSON stays in sources of post and cases",
       Part::includes,
       R"(^nlohmann/)",
       kSources,
       R"(^(post|cases)/[^/]*\.cpp$|^tests/)",
       {"post/results.h", "#include <nlohmann/json.hpp>\n"},
       {"post/results.cpp", "#include <nlohmann/json.hpp>\n"}},
      {"the solver knows no files and no terminal",
       Part::includes,
       R"(^(fstream|filesystem|iostream|cstdio|stdio\.h|unistd\.h)$)",
       R"(^solver/)",
       kNowhere,
       {"solver/residual.cpp", "#include <fstream>\n"},
       {"solver/residual.cpp", "#include <vector>\n"}},
      {"tests are included by tests alone",
       Part::includes,
       R"(^tests/)",
       kLayers,
       kNowhere,
       {"mesh/outline.cpp", "#include \"tests/unit/mesh/shapes.h\"\n"},
       {"mesh/outline.cpp", "// see tests/unit/mesh\n#include \"mesh/point.h\"\n"}},
      {"includes start at the root",
       Part::includes,
       R"(\.\./)",
       kSources,
       kNowhere,
       {"mesh/outline.cpp", "#include \"../mesh/point.h\"\n"},
       {"mesh/outline.cpp", "#include \"mesh/point.h\"\n"}},
      {"only the command line prints",
       Part::code,
       R"(std::(cout|cerr|clog)\b|(^|[^\w:])(std::)?(v?printf|puts|putchar|perror)\s*\()"
       R"(|fmt::print\s*\(\s*(R?"|fmt::|FMT)|\b(stdout|stderr)\b)",
       kLayers,
       R"(^cases/(falcate_main|terminal[^/]*|progress[^/]*)\.cpp$|^mesh/mesher_[^/]*\.cpp$)",
       {"post/report.cpp", "void f() { std::printf(\"%d\", 1); }\n"},
       {"post/report.cpp", "// printf(\nauto s = \"std::cout\"; std::snprintf(b, 3, \"\");\n"}},
      {"headers open no namespace for others",
       Part::code,
       R"(^using\s+namespace\b)",
       R"(\.h$)",
       kNowhere,
       {"mesh/point.h", "using namespace Eigen;\n"},
       {"mesh/point.h", "void f() {\n  using namespace detail;\n}\n"}},
      {"results do not hang on chance or the clock",
       Part::code,
       R"(\brandom_device\b|\bsystem_clock\b|\bs?rand\s*\(|\btime\s*\(\s*(NULL|nullptr|0)\s*\))",
       R"(^(mesh|solver|post)/)",
       kNowhere,
       {"mesh/smooth.cpp", "std::random_device seed;\n"},
       {"solver/steady.cpp", "auto start = std::chrono::steady_clock::now();\n"}},
      {"no test is left out",
       Part::all,
       R"(GTEST_)"
       R"(SKIP|DISABLED)"
       R"(_|(EXPECT|ASSERT)_TRUE\(\s*tr)"
       R"(ue\s*\))",
       kEverywhere,
       kNowhere,
       {"tests/unit/mesh/a_test.cpp", std::string("TEST(A, DISABLED") + "_b) {}\n"},
       {"tests/unit/mesh/a_test.cpp", "TEST(A, b) {}\n"}},
      {"no work is left for later",
       Part::all,
       R"(\b(TO)"
       R"(DO|FIX)"
       R"(ME|XX)"
       R"(X)\b|[Nn]ot )"
       R"(implemented)",
       kEverywhere,
       kNowhere,
       {"README.md", std::string("TO") + "DO: the rest\n"},
       {"README.md", "Todos los gases\n"}},
      {"the product alone is spoken of",
       Part::all,
       R"(tran)"
       R"(script|seed )"
       R"(document|/ro)"
       R"(ot/|\.lib)"
       R"(rary\b|(^|[^\w.])/wo)"
       R"(rk/|/tmp/)"
       R"(wt)",
       kEverywhere,
       kNowhere,
       {"docs/method.md", std::string("see /wo") + "rk/notes\n"},
       {"docs/method.md", "the shaft/work/heat balance\n"}},
  };
}

std::vector<std::string> lines_of(const std::string& text) {
  std::vector<std::string> lines;
  std::istringstream stream(text);
  for (std::string line; std::getline(stream, line);) lines.push_back(line);
  return lines;
}

/// Name of the file a line includes; empty where it includes none.
std::string included_name(const std::string& line) {
  static const std::regex include(R"(^\s*#\s*include\s*[<"]([^>"]+)[>"])");
  std::smatch match;
  return std::regex_search(line, match, include) ? match[1].str() : std::string();
}

std::vector<std::string> part_of(const SourceFile& file, Part part) {
  if (part == Part::all) return lines_of(file.text);
  auto lines = lines_of(without_comments(file.text, part == Part::includes));
  if (part == Part::includes) {
    std::transform(lines.begin(), lines.end(), lines.begin(), included_name);
  }
  return lines;
}

std::string place(const SourceFile& file, std::size_t line) {
  return file.path + ":" + std::to_string(line + 1) + ": ";
}

/// Height of a file's layer, -1 outside the layers.
int layer_of(const std::string& path) {
  static const std::vector<std::string> layers = {"mesh/", "solver/", "post/", "cases/"};
  for (std::size_t k = 0; k < layers.size(); ++k) {
    if (path.rfind(layers[k], 0) == 0) return static_cast<int>(k);
  }
  return -1;
}

/// A header may end by including the bodies of its templates, NAME_terms.h for NAME.h.
bool is_bodies_of(const std::string& name, const std::string& path) {
  return path.size() > 2 && name == path.substr(0, path.size() - 2) + "_terms.h";
}

/// Walks the includes in depth; a file met again on its own way closes a ring.
class RingSearch {
 public:
  explicit RingSearch(std::map<std::string, std::vector<std::string>> includes)
      : includes_(std::move(includes)) {}

  std::vector<std::string> run() {
    for (const auto& entry : includes_) visit(entry.first);
    return rings_;
  }

 private:
  void visit(const std::string& path) {
    const auto here = std::find(way_.begin(), way_.end(), path);
    if (here != way_.end()) {
      std::string ring;
      for (auto step = here; step != way_.end(); ++step) ring += *step + " -> ";
      rings_.push_back(ring + path);
      return;
    }
    const auto entry = includes_.find(path);
    if (entry == includes_.end() || !done_.insert(path).second) return;
    way_.push_back(path);
    for (const auto& next : entry->second) visit(next);
    way_.pop_back();
  }

  std::map<std::string, std::vector<std::string>> includes_;
  std::vector<std::string> way_, rings_;
  std::set<std::string> done_;
};

/// Where the comment or literal that starts at `begin` ends; `begin` itself where none starts.
std::size_t end_of_token(const std::string& text, std::size_t begin) {
  const auto until = [&](const std::string& mark, std::size_t from, bool with_mark) {
    const std::size_t found = text.find(mark, from);
    return found == std::string::npos ? text.size() : found + (with_mark ? mark.size() : 0);
  };
  if (text.compare(begin, 2, "//") == 0) return until("\n", begin, false);
  if (text.compare(begin, 2, "/*") == 0) return until("*/", begin + 2, true);
  if (text.compare(begin, 2, "R\"") == 0) {
    const std::size_t open = text.find('(', begin);
    if (open == std::string::npos) return text.size();
    return until(")" + text.substr(begin + 2, open - begin - 2) + "\"", open, true);
  }
  const char quote = text[begin];
  const bool digit_separator =
      quote == '\'' && begin > 0 && std::isalnum(static_cast<unsigned char>(text[begin - 1])) != 0;
  if ((quote != '"' && quote != '\'') || digit_separator) return begin;
  std::size_t end = begin + 1;
  while (end < text.size() && text[end] != quote && text[end] != '\n') {
    end += text[end] == '\\' ? 2 : 1;
  }
  return std::min(end + 1, text.size());
}

}  // namespace

const std::vector<TextRule>& text_rules() {
  static const std::vector<TextRule> rules = make_text_rules();
  return rules;
}

std::vector<std::string> offences(const TextRule& rule, const std::vector<SourceFile>& files) {
  const std::regex pattern(rule.pattern), looked_at(rule.files), allowed(rule.allowed);
  std::vector<std::string> found;
  for (const auto& file : files) {
    if (!std::regex_search(file.path, looked_at) || std::regex_search(file.path, allowed)) continue;
    const auto lines = part_of(file, rule.part);
    for (std::size_t k = 0; k < lines.size(); ++k) {
      if (std::regex_search(lines[k], pattern)) found.push_back(place(file, k) + lines[k]);
    }
  }
  return found;
}

std::vector<std::string> wrong_way_includes(const std::vector<SourceFile>& files) {
  std::vector<std::string> found;
  for (const auto& file : files) {
    if (layer_of(file.path) < 0) continue;
    const auto names = part_of(file, Part::includes);
    for (std::size_t k = 0; k < names.size(); ++k) {
      if (layer_of(names[k]) > layer_of(file.path)) found.push_back(place(file, k) + names[k]);
    }
  }
  return found;
}

std::vector<std::string> include_rings(const std::vector<SourceFile>& files) {
  std::map<std::string, std::vector<std::string>> includes;
  for (const auto& file : files) {
    for (const auto& name : part_of(file, Part::includes)) {
      if (!is_bodies_of(name, file.path)) includes[file.path].push_back(name);
    }
  }
  return RingSearch(std::move(includes)).run();
}

std::vector<std::string> undescribed_headers(const std::vector<SourceFile>& files) {
  std::vector<std::string> found;
  for (const auto& file : files) {
    const bool header = file.path.size() > 2 && file.path.substr(file.path.size() - 2) == ".h";
    if (!header || layer_of(file.path) < 0) continue;
    if (file.text.rfind("/// ", 0) != 0) found.push_back(file.path + ": begins without ///");
    if (file.text.find("\n#pragma once\n") == std::string::npos) {
      found.push_back(file.path + ": #pragma once is missing");
    }
  }
  return found;
}

std::vector<std::string> misplaced_at_top(const std::vector<std::string>& names) {
  const std::set<std::string> wanted = {"CMakeLists.txt", "README.md", "DEVELOPERS.md", "LICENSE",
                                        "solver",         "mesh",      "post",          "cases",
                                        "tests",          "docs"};
  static const std::regex free(R"(^(\.|build|results))");
  std::vector<std::string> found;
  const std::set<std::string> given(names.begin(), names.end());
  for (const auto& name : given) {
    if (wanted.count(name) == 0 && !std::regex_search(name, free)) {
      found.push_back(name + ": does not belong at the top level");
    }
  }
  for (const auto& name : wanted) {
    if (given.count(name) == 0) found.push_back(name + ": is missing at the top level");
  }
  return found;
}

std::string without_comments(const std::string& text, bool keep_strings) {
  std::string result = text;
  for (std::size_t begin = 0; begin < text.size();) {
    const std::size_t end = end_of_token(text, begin);
    if (end == begin) {
      ++begin;
      continue;
    }
    const bool comment = text[begin] == '/';
    if (comment || !keep_strings) {
      // The quotes stay, so that a call with a string can be told from one with a name.
      const std::size_t from = comment ? begin : text.find_first_of("\"'", begin) + 1;
      const std::size_t to = comment ? end : end - 1;
      for (std::size_t k = from; k < to; ++k) {
        if (text[k] != '\n') result[k] = ' ';
      }
    }
    begin = end;
  }
  return result;
}

}  // namespace falcate::architecture
