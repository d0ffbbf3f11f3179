/// Line figures of the report, each one <svg> element; `id` is unique in the page.
/// Errors: `OutputError` where gnuplot is missing or a figure holds no finite number.
#pragma once
#include <string>
#include <vector>

#include "post/point_result.h"
#include "post/speed_line.h"

namespace falcate::post {

/// Along both sides of the blade, against x / blade width.
std::string surface_mach_figure(const PointResult& point, const std::string& id);
std::string surface_pressure_figure(const PointResult& point, const std::string& id);

/// Residual against step, logarithmic: the point `shown` in full, the others faint behind it.
std::string convergence_figure(const std::vector<PointResult>& points, std::size_t shown,
                               const std::string& id);
bool has_history(const PointResult& point);

/// Blade and wheel efficiency with error bars against speed; the best speed marked.
std::string efficiency_figure(const SpeedLine& line, const std::string& id);

/// Torque with error bars against speed; stall torque and runaway speed marked, dashed where they
/// are extrapolated.
std::string torque_figure(const SpeedLine& line, const std::string& id);

/// Unit that makes a largest torque readable: factor from N m, and its name.
struct TorqueUnit {
  double factor;
  const char* name;
};
TorqueUnit torque_unit(const SpeedLine& line);

}  // namespace falcate::post
