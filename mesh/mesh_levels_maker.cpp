#include "mesh/mesh_levels_maker.h"

#include <fmt/format.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <optional>
#include <string>

#include "mesh/blade_shapes.h"
#include "mesh/curved_mesh.h"
#include "mesh/mesher_process.h"
#include "mesh/passage_boundary.h"
#include "mesh/program_directory.h"
#include "mesh/size_field.h"

namespace falcate::mesh {
namespace {

constexpr int kMostCells = 4'000'000;

/// Gmsh's algorithms in the order in which they are tried, see MesherRequest.
struct Method {
  int algorithm, recombination;
};
constexpr Method kMethods[] = {{9, 3}, {6, 3}, {6, 1}};

/// A mesh whose worst cell is at least this good is taken without trying further methods.
constexpr double kGoodQuality = 0.25;

struct Nested {
  std::vector<CurvedMesh> levels;  // coarse first
  double quality = -1.0;           // least scaled Jacobian on any level
  Point worst{0.0, 0.0};           // where
};

Nested nested(const CurvedMesh& coarse, const PassageBoundary& boundary, int levels) {
  Nested result;
  result.quality = 1.0;
  result.levels.push_back(coarse);
  while (static_cast<int>(result.levels.size()) < levels) {
    result.levels.push_back(split_in_four(result.levels.back(), boundary));
  }
  for (const auto& level : result.levels) {
    for (const auto& cell : level.cells) {
      const double quality = scaled_jacobian(level.nodes, cell);
      if (quality < result.quality) {
        result.quality = quality;
        result.worst = level.nodes[static_cast<std::size_t>(cell[0])];
      }
    }
  }
  return result;
}

void check_options(const BladeOutline& outline, double pitch, double gap,
                   const MeshOptions& options) {
  if (!(gap > 0.0)) {
    throw MeshError(
        fmt::format("neighbouring blades touch: at a pitch of {:.4g} mm there is no passage "
                    "between blades {:.4g} mm "
                    "wide; take fewer blades or a thinner shape",
                    1e3 * pitch, 1e3 * outline.width()));
  }
  if (options.levels < 1 || options.levels > 6) throw MeshError("the mesh levels must be 1 to 6");
  const int coarsest = options.cells >> (2 * (options.levels - 1));
  if (coarsest < 60 || options.cells > kMostCells) {
    throw MeshError(
        fmt::format("{} cells on {} levels: the coarsest level needs 60 cells or more, the "
                    "finest may have {} at most",
                    options.cells, options.levels, kMostCells));
  }
  if (!(options.upstream >= 0.2 && options.downstream >= 0.2)) {
    throw MeshError(
        "the inlet and outlet planes must lie 0.2 blade widths or more from the blades");
  }
}

class Maker {
 public:
  Maker(const BladeOutline& outline, double pitch, double inlet_angle, double exit_angle,
        const MeshOptions& options)
      : options_(options),
        closed_(outline),
        boundary_(passage_boundary(closed_, pitch, outline.width(), inlet_angle, exit_angle,
                                   options.upstream, options.downstream)),
        program_(mesher_beside_this_program()) {
    rules_.pitch = pitch;
    rules_.width = outline.width();
    rules_.inlet_x = boundary_.inlet_x;
    rules_.outlet_x = boundary_.outlet_x;
    rules_.gap = throat_width(outline, pitch);
    check_options(outline, pitch, rules_.gap, options);
    rules_.base = 0.1 * rules_.width;
    walls_ = wall_samples(closed_);
    fluid_ = fluid_mask(make_size_field(walls_, rules_), outline.polygon(100));
  }

  /// Tries one method after the other until the cells are good; keeps the best.
  MeshLevels make() {
    std::optional<Nested> best;
    std::string failure = "the mesher made no mesh";
    for (const auto& method : kMethods) {
      try {
        auto trial = sized_mesh(method);
        if (!best || trial.quality > best->quality) best = std::move(trial);
      } catch (const MeshError& error) {
        failure = error.what();
      }
      if (best && best->quality >= kGoodQuality) break;
    }
    if (!best) throw MeshError(failure);
    if (!(best->quality > 0.0)) {
      throw MeshError(
          fmt::format("the mesher folds cells near x = {:.4g} mm, y = {:.4g} mm; more cells or a "
                      "larger edge radius "
                      "may help",
                      1e3 * best->worst.x(), 1e3 * best->worst.y()));
    }
    return finished(*best);
  }

 private:
  /// Edge length at which the estimate gives `cells`.
  void choose_base(double cells) {
    double low = rules_.width / 2000.0, high = rules_.width;
    for (int pass = 0; pass < 14; ++pass) {
      rules_.base = std::sqrt(low * high);
      const double now = estimated_cells(make_size_field(walls_, rules_), fluid_);
      (now > cells ? low : high) = rules_.base;
    }
  }

  /// The count follows the estimate but for a factor near one, which the first mesh tells.
  Nested sized_mesh(const Method& method) {
    const double wanted = options_.cells / std::pow(4.0, options_.levels - 1);
    MesherProcess mesher(program_, options_.time_limit_s);
    std::optional<CurvedMesh> best;
    double best_miss = 1e300, factor = 1.0;
    for (int attempt = 0; attempt < 8 && best_miss > 0.12; ++attempt) {
      choose_base(wanted * factor);
      auto mesh = coarse_mesh(method, mesher);
      const double ratio = static_cast<double>(mesh.cells.size()) / wanted;
      if (std::abs(ratio - 1.0) < best_miss) {
        best_miss = std::abs(ratio - 1.0);
        best = std::move(mesh);
      }
      factor /= ratio;
    }
    smooth(*best, boundary_);
    return nested(*best, boundary_, options_.levels);
  }

  CurvedMesh coarse_mesh(const Method& method, MesherProcess& mesher) const {
    const auto size = make_size_field(walls_, rules_);
    const auto nodes = discretised(boundary_, size);
    MesherRequest request{method.algorithm, method.recombination, nodes.points, size};
    return curved_mesh(boundary_, nodes, mesher.fill(request), rules_.pitch);
  }

  MeshLevels finished(const Nested& nest) const {
    MeshLevels result;
    for (const auto& level : nest.levels) {
      result.levels.push_back(PassageMesh::build(raw_mesh(level, boundary_)));
    }
    result.parent.emplace_back();
    for (std::size_t k = 1; k < result.levels.size(); ++k) {
      const auto& coarse = result.levels[k - 1];
      std::vector<int> place(coarse.raw_index().size());
      for (int c = 0; c < coarse.cell_count(); ++c) {
        place[static_cast<std::size_t>(coarse.raw_index()[static_cast<std::size_t>(c)])] = c;
      }
      std::vector<int> parent;
      for (int raw : result.levels[k].raw_index())
        parent.push_back(place[static_cast<std::size_t>(raw / 4)]);
      result.parent.push_back(std::move(parent));
    }
    return result;
  }

  const MeshOptions& options_;
  ClosedOutline closed_;
  PassageBoundary boundary_;  // refers to closed_
  std::string program_;
  SizeRules rules_{};
  std::vector<WallSample> walls_;
  std::vector<char> fluid_;
};

}  // namespace

MeshLevels make_mesh_levels(const BladeOutline& outline, double pitch, double inlet_angle,
                            double exit_angle, const MeshOptions& options) {
  assert(pitch > 0.0);
  return Maker(outline, pitch, inlet_angle, exit_angle, options).make();
}

}  // namespace falcate::mesh
