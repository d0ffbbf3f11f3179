/// The record of one point, from which a stopped run goes on: the whole PointResult with surface
/// distributions and convergence history, every bit of every number kept.
/// JSON (RFC 8259); a number that is not finite is the text "nan", "inf" or "-inf". SI units.
/// Errors: `OutputError` when a record cannot be written, read or understood.
#pragma once
#include <string>

#include "post/output_error.h"
#include "post/point_result.h"

namespace falcate::post {

void write_point_record(const PointResult& point, const std::string& path);
PointResult read_point_record(const std::string& path);

const char* status_words(solver::SolutionStatus status);  ///< steady, averaged, failed
/// Throws std::invalid_argument where the text is none of the words.
solver::SolutionStatus status_from_words(const std::string& words);

}  // namespace falcate::post
