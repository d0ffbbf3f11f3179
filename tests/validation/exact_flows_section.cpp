#include <fmt/format.h>

#include "tests/validation/page_sections.h"
#include "tests/verification/exact_flow.h"

namespace falcate::validation {
namespace {

const char* const head =
    "## Exact flows: the order of the errors\n\n"
    "Compared: entropy and pressure in the cells with exact solutions of the equations of motion, "
    "root\n"
    "of the area mean of the squared difference, on three meshes with the spacing halved from one "
    "to\n"
    "the next; curved walls lie on the true curves. Density and speed of sound at rest are 1. The "
    "order\n"
    "is the slope over the three meshes; 2 is that of the scheme. Stirred: the inner nodes are "
    "moved\n"
    "at random by 15 % of the spacing, and half as far on each finer mesh.\n\n"
    "| flow | meshes | entropy, rms error on the finest | order | pressure, rms error on the "
    "finest | "
    "order |\n"
    "|---|---|---|---|---|---|\n";

const char* const tail =
    "\nOn triangles the discrete equations of Ringleb's flow through Mach 1 have more than one\n"
    "solution; the solver has also ended at one of order 1.7 in the pressure, off in the "
    "supersonic\n"
    "part along the convex wall. Passages are meshed by quadrilaterals.\n\n"
    "Shocks, expansions and the start of a supersonic passage have no order to tell of. The tests "
    "in\n"
    "`tests/verification` and `tests/validation` hold them to exact figures:\n\n"
    "- the oblique shock of a wedge, and with every flux a shock reflected at a wall: angles,\n"
    "  pressures and Mach numbers within 1 %;\n"
    "- standing normal shocks along the mesh, disturbed at random, must stay straight: SLAU2 (the\n"
    "  default) to Mach 4, HLLC to Mach 2, Roe's flux to Mach 1.5; beyond, they bend them;\n"
    "- the bow shock of a cylinder at Mach 2.5 stays smooth within a hundredth of the radius, and "
    "the\n"
    "  pressure at the front is exact within 1 % (Roe's flux: 3 %, its shock trembles);\n"
    "- the states of a normal shock in the wrong order must spread into a fan: SLAU2 and HLLC "
    "from\n"
    "  Mach 2, Roe's flux from Mach 1.5; from Mach 2 it keeps most of the jump;\n"
    "- a passage that starts at Mach 2 from the cold start: the flow it swallows within 0.1 %, "
    "simple\n"
    "  waves along its walls within 1 %.\n\n";

std::string plain(std::string name) {
  for (char& c : name)
    if (c == '_') c = ' ';
  return name;
}

}  // namespace

std::string exact_flows_section(const std::filesystem::path&) {
  std::string table, sources = "Sources:";
  for (const auto& flow : verification::exact_flows()) {
    if (sources.find(flow.source) == std::string::npos) sources += fmt::format(" {};", flow.source);
    for (const auto& meshes : verification::order_cases) {
      const auto study = verification::order_study(flow, meshes);
      table += fmt::format("| {} | {} | {:.1e} | {:.2f} | {:.1e} | {:.2f} |\n", flow.words,
                           plain(meshes.name), study.errors.back().entropy, study.entropy_order,
                           study.errors.back().pressure, study.pressure_order);
    }
  }
  sources.back() = '.';
  return head + table + "\n" + sources + "\n" + tail;
}

}  // namespace falcate::validation
