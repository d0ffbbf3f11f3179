/// report.html: one self-contained file a person reads in five minutes.
/// Errors: `OutputError` when the file cannot be written whole.
#pragma once
#include <array>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "mesh/passage_mesh.h"
#include "post/point_result.h"
#include "post/speed_line.h"
#include "post/velocity_triangle.h"

namespace falcate::post {

/// A flow field to be drawn: borrowed, must outlive the call.
struct PictureField {
  std::string point_id;
  const mesh::PassageMesh* mesh = nullptr;
  const std::vector<solver::Primitive>* cells = nullptr;
};

struct ReportInput {
  std::string title, version;
  std::string case_text;                                     ///< the case file as given
  std::vector<std::pair<std::string, std::string>> derived;  ///< label, value: as `check` prints
  std::vector<std::string> cautions;
  double heat_capacity_ratio = 1.4, gas_constant = 287.05;
  double pitch = 0.0;                       ///< m
  std::vector<mesh::Point> blade;           ///< closed polygon
  std::vector<VelocityTriangle> triangles;  ///< one a point; empty for a rig
  std::vector<PointResult> points;
  std::optional<SpeedLine> speed_line;
  std::vector<PictureField> pictures;  ///< first: the point shown large
};

void write_report(const ReportInput& input, const std::string& path);

}  // namespace falcate::post
