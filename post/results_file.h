/// results.json and results.csv: every figure of every point with its numerical error.
/// SI units with the unit in the key; key order fixed; a number that is not finite is null (empty
/// in the table). The figures come from figure_rows(). Files appear whole (post/whole_file.h).
/// Errors: `OutputError` when a file cannot be written, read or understood.
#pragma once
#include <string>
#include <vector>

#include "post/output_error.h"
#include "post/point_record.h"
#include "post/point_result.h"

namespace falcate::post {

struct Results {
  std::string title, version, case_sha256;
  std::vector<PointResult> points;
};

void write_results_json(const Results& results, const std::string& path);
/// One line a point; the columns are group_key, errors as group_key_error.
void write_results_csv(const Results& results, const std::string& path);
/// Everything results.json holds; surface distributions and convergence history
/// are in the records (post/point_record.h).
Results read_results_json(const std::string& path);

}  // namespace falcate::post
