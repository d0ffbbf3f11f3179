/// Writes what people get from a run: results.json, results.csv, report.html, flow/, shapes/,
/// log.txt. The same points give the same bytes, times aside.
/// Errors: `post::OutputError`.
#pragma once
#include <vector>

#include "cases/blade_row.h"
#include "cases/case.h"
#include "cases/operating_points.h"
#include "cases/point_solver.h"
#include "cases/results_folder.h"
#include "mesh/passage_mesh.h"

namespace falcate::cases {

struct RunOutputs {
  const Case& input;
  const BladeRow& row;
  const mesh::PassageMesh& mesh;  ///< finest
  const std::vector<OperatingPoint>& points;
  const std::vector<SolvedPoint>& solved;
};

void write_outputs(const RunOutputs& run, const ResultsFolder& folder);
void write_report_only(const RunOutputs& run, const ResultsFolder& folder);

/// "point-03  30000 rpm  u/c1 0.210  blade efficiency 61.2 % +- 0.4 %  turning 118.3 deg ...".
std::string point_line(const post::PointResult& point);

}  // namespace falcate::cases
