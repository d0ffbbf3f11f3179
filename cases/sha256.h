/// SHA-256 of a text as 64 hexadecimal digits (FIPS 180-4), by OpenSSL.
#pragma once
#include <string>

namespace falcate::cases {
std::string sha256(const std::string& text);
}
