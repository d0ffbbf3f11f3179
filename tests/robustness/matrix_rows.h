/// The matrix of operating points that the solver must answer: wheels over speed and rig rows over
/// Mach number, of both shapes. All data is invented; ranges: speed ratio 0 to 1, relative inlet
/// Mach number 0.1 to 2.6, blade angle 15 to 40 degrees, pitch over width 0.3 to 1.2.
#pragma once
#include <string>
#include <vector>

#include "cases/case.h"
#include "cases/operating_points.h"
#include "post/point_result.h"

namespace falcate::robustness {

/// One blade row on one set of meshes, with the points asked of it.
struct MatrixRow {
  std::string name;  ///< "wheel channel 15 deg, pitch 0.30 widths, jet Mach 1.5"
  cases::Case input;
  std::vector<cases::OperatingPoint> points;
  double blade_angle_deg = 0.0;
  double pitch_over_width = 0.0;
};

/// Every row, always in the same order.
std::vector<MatrixRow> matrix_rows(int cells);

struct Answer {
  std::string row, shape;
  double blade_angle_deg = 0.0, pitch_over_width = 0.0;
  double relative_mach = 0.0, flow_angle_deg = 0.0;
  bool wheel = false;
  post::PointResult result;
  double wall_seconds = 0.0;
};

/// Answers of the points first to last - 1 of a row, solved as a run of the program does: in
/// chains, each point from the one before it.
std::vector<Answer> solve_row(const MatrixRow& row);

/// Steady or averaged, with a finite error bar on every figure of the point.
bool answered(const Answer& answer);

/// Whether every figure has a finite error bar.
bool has_error_bars(const post::PointResult& result);

}  // namespace falcate::robustness
