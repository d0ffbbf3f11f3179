/// Sections of a page that programs write: each stands between two marks of its own, so that one
/// can be written anew and the rest of the page stays as it is.
///   <!-- begin NAME -->  ...  <!-- end NAME -->
#pragma once
#include <string>

namespace falcate::validation {

/// The page with `body` between the marks of `name`; put at the end where the marks are missing.
std::string with_section(const std::string& page, const std::string& name, const std::string& body);

}  // namespace falcate::validation
