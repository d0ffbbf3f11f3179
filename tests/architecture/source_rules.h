/// What every source file of the repository must keep to, as tables, and the search for offences.
///
/// A text rule is one row: a pattern, the files it looks at, the files where it is allowed, and one
/// invented offence and one invented harmless text that show the row can fail and can pass.
#pragma once
#include <string>
#include <vector>

namespace falcate::architecture {

struct SourceFile {
  std::string path;  ///< from the root of the repository, with '/'
  std::string text;
};

/// What of a file a pattern is looked for in, line by line.
enum class Part {
  includes,  ///< the names of included files
  code,      ///< without comments and without the insides of strings
  all
};

struct TextRule {
  const char* name;
  Part part;
  const char* pattern;  ///< regular expression, found anywhere
  const char* files;    ///< regular expression of the paths looked at
  const char* allowed;  ///< regular expression of the paths among them where it may stand
  SourceFile offence;
  SourceFile harmless;
};
const std::vector<TextRule>& text_rules();

/// One line an offence: "path:line: what".
std::vector<std::string> offences(const TextRule& rule, const std::vector<SourceFile>& files);

/// Includes that run against cases -> post -> solver -> mesh.
std::vector<std::string> wrong_way_includes(const std::vector<SourceFile>& files);

/// Rings of files that include one another, "a.h -> b.h -> a.h".
std::vector<std::string> include_rings(const std::vector<SourceFile>& files);

/// Headers of the layers whose first line is not a `///` description or that lack `#pragma once`.
std::vector<std::string> undescribed_headers(const std::vector<SourceFile>& files);

/// Names at the top level that do not belong there, and names that are missing. Dot-files and the
/// folders of builds and results are free.
std::vector<std::string> misplaced_at_top(const std::vector<std::string>& names);

/// The text with comments blanked, and the insides of strings too unless they are kept.
std::string without_comments(const std::string& text, bool keep_strings);

}  // namespace falcate::architecture
