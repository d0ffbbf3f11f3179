/// Flow fields for viewers of scientific data: .vtu (VTK XML unstructured grid, compressed) and a
/// .pvd that lists the fields of several points. Flow quantities are relative to the blade.
///
/// Cell arrays: density_kg_m3, velocity_m_s (x, y, 0), pressure_pa, mach_number,
/// total_pressure_pa = p (1 + (g-1)/2 M^2)^(g/(g-1)), entropy_j_kg_k = cp ln(T/T01) - R ln(p/p01)
/// (zero in the inflow), cell_quality (scaled Jacobian: least sine of a corner, 1 best; triangles
/// scaled so that the equilateral one has 1; after Knupp, SIAM J. Sci. Comput. 23, 2001).
/// Field data: title, pitch_m, heat_capacity_ratio, gas_constant_j_kg_k. Lengths in metres.
/// A value that is not a finite number is kept as it is.
/// Errors: `OutputError` where a file cannot be written whole.
#pragma once
#include <string>
#include <vector>

#include "mesh/passage_mesh.h"
#include "solver/flow_solution.h"
#include "solver/gas.h"

namespace falcate::post {

struct FlowField {
  std::string title;
  const mesh::PassageMesh* mesh = nullptr;
  const std::vector<solver::Primitive>* cells = nullptr;
  solver::Gas gas;
  double inlet_total_pressure = 0.0;     ///< Pa, relative
  double inlet_total_temperature = 0.0;  ///< K, relative
  int passages = 1;                      ///< copies side by side, joined at the periodic lines
};
void write_flow_file(const FlowField& field, const std::string& path);

/// One field of a collection: `value` orders them (rotor speed, say); `file` is relative to the
/// .pvd.
struct CollectionEntry {
  double value = 0.0;
  std::string file;
};
void write_flow_collection(const std::vector<CollectionEntry>& entries, const std::string& path);

/// Least sine of a corner, 1 best, <= 0 folded; triangles scaled by 2/sqrt(3). One a cell.
std::vector<double> scaled_jacobians(const mesh::PassageMesh& mesh);

/// Derived cell values, one a cell; NaN in, NaN out.
std::vector<double> mach_numbers(const std::vector<solver::Primitive>& cells,
                                 double heat_capacity_ratio);

}  // namespace falcate::post
