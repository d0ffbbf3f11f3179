/// Reads the points of a blade outline from a CSV file.
///
/// Lines that start with '#' and empty lines are skipped. A first line of words names the columns:
/// `x` and `y` (also with a unit or remark after an underscore, as `x_mm`) and, if wanted, `side`
/// (suction or pressure); other columns are passed over. Without such a line the columns are x,y.
/// Points run once round the blade, either way, from anywhere; with sides, each side runs from
/// leading to trailing edge or back. Any length unit.
/// Errors: `ShapeError` with the file and the line at fault.
#pragma once
#include <string>
#include <vector>

#include "mesh/blade_outline.h"

namespace falcate::mesh {

struct OutlinePoint {
  Point point;
  int line;  ///< in the file, from 1
};

/// The closed loop, counter-clockwise, no point twice.
std::vector<OutlinePoint> read_outline(const std::string& csv_file);

}  // namespace falcate::mesh
