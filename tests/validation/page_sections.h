/// Sections of docs/validation.md, made anew from solutions; figures go to `folder`/figures.
#pragma once
#include <filesystem>
#include <string>

namespace falcate::validation {

std::string measured_row_section(const std::filesystem::path& folder);
std::string impulse_rows_section(const std::filesystem::path& folder);
std::string exact_flows_section(const std::filesystem::path& folder);

}  // namespace falcate::validation
