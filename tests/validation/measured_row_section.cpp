#include <fmt/format.h>

#include <limits>
#include <utility>
#include <vector>

#include "post/gnuplot.h"
#include "post/whole_file.h"
#include "tests/validation/measured_row.h"
#include "tests/validation/page_sections.h"

namespace falcate::validation {
namespace {

constexpr int cells = 8000;

post::Curve curve(const std::vector<Tap>& points, const char* title, int colour, bool measured) {
  post::Curve c;
  c.title = title;
  c.colour = colour;
  if (measured) c.style = post::LineStyle::error_bars;
  const std::string* side = nullptr;
  for (const Tap& p : points) {
    if (side && *side != p.side && !measured) {  // a gap between the sides
      c.x.push_back(std::numeric_limits<double>::quiet_NaN());
      c.y.push_back(0.0);
    }
    side = &p.side;
    c.x.push_back(p.x);
    c.y.push_back(p.mach);
    if (measured) c.error.push_back(0.0);
  }
  return c;
}

/// File name of a condition's figure.
std::string figure_name(const MeasuredCondition& c) {
  return fmt::format("spleen-c1-re{}-m{}.svg", c.reynolds_thousands, c.mach_label);
}

std::string wall_figure(const MeasuredCondition& condition, const Measurement& measured,
                        const ComputedRow& computed) {
  post::LineFigure figure;
  figure.label = fmt::format(
      "Isentropic Mach number along the blade SPLEEN C1, label M2is {}, Re {},000: computed "
      "without "
      "friction, and measured",
      condition.mach_label, condition.reynolds_thousands);
  figure.x_title = "axial distance from the leading edge / axial chord";
  figure.y_title = "isentropic Mach number";
  figure.y_from_zero = true;
  figure.x_least = -0.05;
  figure.x_greatest = 1.05;
  figure.curves = {curve(computed.wall, "computed", 1, false),
                   curve(measured.taps, "measured taps", 2, true)};
  figure.marks = {{0.65, {}, "measured layer separates behind", false}};
  return post::line_figure(figure, "spleen");
}

/// One line of the table: a figure of every condition.
struct TableRow {
  const char* words;
  std::string (*text)(const Measurement&, const ComputedRow&);
};

std::string degrees(double value) { return fmt::format("{:.2f} deg", value); }
std::string mach(double value) { return fmt::format("{:.3f}", value); }
std::string per_cent(double share) { return fmt::format("{:.2f} %", 100.0 * share); }

const TableRow measured_rows[] = {
    {"exit pressure / inlet total pressure",
     [](const Measurement& m, const ComputedRow&) {
       return fmt::format("{:.4f}", m.exit_pressure);
     }},
    {"inlet angle, measured and set",
     [](const Measurement& m, const ComputedRow&) { return degrees(m.inlet_angle); }},
    {"exit angle, measured",
     [](const Measurement& m, const ComputedRow&) { return degrees(m.exit_angle); }},
    {"exit angle, computed",
     [](const Measurement&, const ComputedRow& r) { return degrees(r.exit_angle); }},
    {"inlet Mach number, measured",
     [](const Measurement& m, const ComputedRow&) { return mach(m.inlet_mach); }},
    {"inlet Mach number, computed",
     [](const Measurement&, const ComputedRow& r) { return mach(r.inlet_mach); }},
    {"total pressure lost, measured",
     [](const Measurement& m, const ComputedRow&) { return per_cent(1.0 - m.total_pressure); }},
    {"total pressure lost, computed",
     [](const Measurement&, const ComputedRow& r) { return per_cent(1.0 - r.total_pressure); }},
    {"wall Mach number ahead of 65 %: difference, rms",
     [](const Measurement& m, const ComputedRow& r) {
       return mach(wall_agreement(m, r, true).root_mean_square);
     }},
    {"the same, at the worst tap",
     [](const Measurement& m, const ComputedRow& r) {
       return mach(wall_agreement(m, r, true).worst);
     }},
    {"behind 65 % on the suction side, at the worst tap",
     [](const Measurement& m, const ComputedRow& r) {
       return mach(wall_agreement(m, r, false).worst);
     }},
    {"solution",
     [](const Measurement&, const ComputedRow& r) {
       return fmt::format(
           "{}, {} cells",
           r.summary.status == solver::SolutionStatus::steady ? "steady" : "averaged over time",
           r.cells);
     }},
};

const char* const measured_head =
    "## A measured turbine cascade: SPLEEN C1\n\n"
    "Compared: the exit angle half an axial chord behind the row (measured by a five-hole probe "
    "at\n"
    "mid-span, mean of the momentum over one pitch) and the isentropic Mach number along the "
    "blade\n"
    "(41 pressure taps at mid-span), with the same row computed without friction from its\n"
    "coordinates, at the measured inlet angle and the measured exit pressure. The labels of the "
    "data\n"
    "(M2is, Re) are nominal; the exit pressure, over the inlet total pressure, is the mean of the\n"
    "traverse.\n\n"
    "Source: Lavagnoli, Lopes, Simonassi, Torre: SPLEEN, high speed turbine cascade, test case\n"
    "database. Zenodo, doi 10.5281/zenodo.13712768, 2024, licence CC-BY. The files used lie in\n"
    "`tests/data`.\n\n";

const char* const measured_tail =
    "\nAngles are from the axial direction here, as in the data. \"Ahead of 65 %\" are the taps "
    "of\n"
    "the pressure side and those of the suction side up to 65 % of the axial chord; there the\n"
    "computed Mach number is up to 0.03 above the measured one, since the layers on the blade let\n"
    "less gas through the real row. Behind, the laminar layer of the experiment separates and "
    "holds\n"
    "the pressure low, which no computation without friction can show. Of the total pressure, the\n"
    "computed row loses what the wake behind the blunt trailing edge and the mesh take; the rest "
    "of\n"
    "the measured loss is friction.\n\n";

}  // namespace

std::string measured_row_section(const std::filesystem::path& folder) {
  std::vector<std::pair<Measurement, ComputedRow>> pairs;
  std::string figures, head = "| |", line = "|---|";
  for (const MeasuredCondition& condition : measured_conditions()) {
    const Measurement m = measurement(condition);
    pairs.emplace_back(m, computed_row(m, cells));
    const std::string name = figure_name(condition);
    post::write_whole_file((folder / "figures" / name).string(),
                           wall_figure(condition, m, pairs.back().second));
    head +=
        fmt::format(" M2is {}, Re {},000 |", condition.mach_label, condition.reynolds_thousands);
    line += "---|";
    figures += fmt::format("![Mach number along the blade, M2is {}, Re {},000](figures/{})\n\n",
                           condition.mach_label, condition.reynolds_thousands, name);
  }
  std::string table = head + "\n" + line + "\n";
  for (const TableRow& row : measured_rows) {
    table += fmt::format("| {} |", row.words);
    for (const auto& [m, r] : pairs) table += fmt::format(" {} |", row.text(m, r));
    table += "\n";
  }
  return measured_head + table + measured_tail + figures;
}

}  // namespace falcate::validation
