#include "post/html.h"

namespace falcate::post {

std::string escape_html(std::string_view text) {
  std::string out;
  out.reserve(text.size());
  for (const char c : text) {
    switch (c) {
      case '&':
        out += "&amp;";
        break;
      case '<':
        out += "&lt;";
        break;
      case '>':
        out += "&gt;";
        break;
      case '"':
        out += "&quot;";
        break;
      case '\'':
        out += "&#39;";
        break;
      default: {
        const auto code = static_cast<unsigned char>(c);
        const bool control = (code < 0x20 && c != '\n' && c != '\t') || code == 0x7f;
        out += control ? ' ' : c;
      }
    }
  }
  return out;
}

}  // namespace falcate::post
