/// Text made safe for HTML and SVG: markup characters become entities, control characters that
/// neither allows become spaces.
#pragma once
#include <string>
#include <string_view>

namespace falcate::post {

/// Safe between tags and inside quoted attributes.
std::string escape_html(std::string_view text);

}  // namespace falcate::post
