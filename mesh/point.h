/// A point or vector of the blade-to-blade plane: x axial, y the way the wheel turns, metres.
#pragma once
#include <Eigen/Core>

namespace falcate::mesh {
using Point = Eigen::Vector2d;
}
