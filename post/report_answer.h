/// The report's answer in plain sentences, and the key numbers under it.
#pragma once
#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "post/report.h"

namespace falcate::post {

/// "45 000 rpm" for a wheel, else the point's own name.
std::string point_name(const PointResult& point);

bool stands(const PointResult& point);

/// Place in `points` of the one the answer rests on: the highest blade efficiency that stands for a
/// wheel, the first that stands for a rig; none where every point failed.
std::optional<std::size_t> key_point(const ReportInput& input);

/// Plain text, one or a few sentences.
std::string answer_sentence(const ReportInput& input);

/// The case's cautions that speak of one of these words (lower case).
std::vector<std::string> cautions_about(const ReportInput& input,
                                        const std::vector<std::string>& words);

/// A number that leads the report; `caution` is empty or stands right below it.
struct KeyNumber {
  std::string title, value, caution;
};
std::vector<KeyNumber> key_numbers(const ReportInput& input);

}  // namespace falcate::post
