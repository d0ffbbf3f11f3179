#include <fmt/format.h>

#include <cmath>
#include <limits>
#include <vector>

#include "post/gnuplot.h"
#include "post/whole_file.h"
#include "tests/validation/impulse_rows.h"
#include "tests/validation/page_sections.h"

namespace falcate::validation {
namespace {

const char* const head =
    "## Exact supersonic impulse rows\n\n"
    "Compared: two blade rows whose flow is known exactly, a uniform stream turned by 130 deg at\n"
    "Mach 2 (S1) and by 140 deg at Mach 2.5 (S3) through simple waves and a free vortex, without\n"
    "shock or loss, so that every difference is the error of the computation. Errors on three "
    "nested\n"
    "meshes each; the order is the slope over the three. The wall's Mach number leaves out 5 % of\n"
    "the width at either cusp.\n\n"
    "Source: own evaluation of the method of Boxer, Sterrett and Wlodarski, NACA RM L52B06, 1952, "
    "and\n"
    "Goldman and Scullin, NASA TN D-4421, 1968; coordinates and surface values lie in "
    "`tests/data`.\n\n"
    "| row | cells | exit angle, error | exit Mach, error | total pressure lost | entropy, rms "
    "error | "
    "wall Mach, rms error | worst, 0.03 widths from kinks | worst |\n"
    "|---|---|---|---|---|---|---|---|---|\n";

const char* const tail =
    "\nThe wall's Mach number is least exact where the wall's curvature jumps: the exact one has a "
    "kink\n"
    "there, and the computed one swings about it for some ten faces.\n\n"
    "![Mach number along the blade S1](figures/impulse-row-s1.svg)\n\n";

std::string line(const ImpulseRow& row, const SolvedPassage& passage, int level) {
  const auto f = passage.figures(level);
  const SurfaceError wall = surface_error(row, passage, level);
  return fmt::format(
      "| {:.2s} | {} | {:+.4f} deg | {:+.4f} % | {:.4f} % | {:.1e} | {:.2f} % | {:.2f} % | {:.2f} "
      "% "
      "|\n",
      row.name, passage.mesh(level).cell_count(), f.exit.angle_deg - (180.0 - row.inlet_deg),
      100.0 * (f.exit.mach / row.mach - 1.0),
      100.0 * (1.0 - f.exit.total_pressure_pa / impulse_total_pressure),
      passage.entropy_error(level), 100.0 * wall.root_mean_square, 100.0 * wall.between_kinks,
      100.0 * wall.worst);
}

std::string lines(const ImpulseRow& row, const SolvedPassage& passage) {
  std::string out;
  std::vector<double> entropy;
  for (int level = 0; level < passage.level_count(); ++level) {
    out += line(row, passage, level);
    entropy.push_back(passage.entropy_error(level));
  }
  return out + fmt::format("| {:.2s} | order | | | | {:.2f} | | | |\n", row.name,
                           observed_order(entropy));
}

std::string figure(const ImpulseRow& row, const SolvedPassage& passage) {
  post::LineFigure figure;
  figure.label = fmt::format("Mach number along the blade {:.2s}, exact and computed", row.name);
  figure.x_title = "axial distance from the leading edge / width";
  figure.y_title = "Mach number";
  post::Curve computed, exact;
  exact.title = "exact";
  exact.colour = 2;
  exact.dashed = true;
  computed.title = fmt::format("computed, {} cells", passage.mesh(passage.finest()).cell_count());
  const auto surface = passage.surface(passage.finest());
  for (const auto* wall : {&surface.suction, &surface.pressure}) {
    for (const auto& face : *wall) {
      computed.x.push_back(face.x / impulse_width);
      computed.y.push_back(face.isentropic_mach);
    }
    computed.x.push_back(std::numeric_limits<double>::quiet_NaN());
    computed.y.push_back(0.0);
  }
  for (const char* name : {"suction", "pressure"}) {
    const ExactSide side(row, name);
    for (std::size_t i = 0; i < side.x.size(); ++i) {
      exact.x.push_back(side.x[i]);
      exact.y.push_back(side.mach[i]);
    }
    exact.x.push_back(std::numeric_limits<double>::quiet_NaN());
    exact.y.push_back(0.0);
  }
  figure.curves = {computed, exact};
  return post::line_figure(figure, "impulse");
}

}  // namespace

std::string impulse_rows_section(const std::filesystem::path& folder) {
  std::string table;
  for (const ImpulseRow& row : impulse_rows()) {
    const SolvedPassage passage = solved(row);
    table += lines(row, passage);
    if (&row == &impulse_rows().front())
      post::write_whole_file((folder / "figures" / "impulse-row-s1.svg").string(),
                             figure(row, passage));
  }
  return head + table + tail;
}

}  // namespace falcate::validation
