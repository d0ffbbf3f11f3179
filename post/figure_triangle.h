/// Velocity triangles before and behind the blades, drawn to scale, as one <svg> element.
/// The plane of rotation runs to the right the way the wheel turns, the axial way downwards.
/// Symbols: u blade speed, c absolute, w relative velocity; alpha of c, beta of w, from the plane
/// of rotation.
#pragma once
#include <optional>
#include <string>

#include "post/point_result.h"
#include "post/velocity_triangle.h"

namespace falcate::post {

/// Without `exit` only the triangle before the blades is drawn. `label` is read out in place of
/// the picture.
std::string triangle_figure(const VelocityTriangle& inlet, const std::optional<StreamState>& exit,
                            const std::string& label);

}  // namespace falcate::post
