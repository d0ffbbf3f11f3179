#include "post/flow_file.h"

#include <fmt/format.h>
#include <vtkCellData.h>
#include <vtkCellType.h>
#include <vtkDoubleArray.h>
#include <vtkErrorCode.h>
#include <vtkFieldData.h>
#include <vtkNew.h>
#include <vtkPoints.h>
#include <vtkStringArray.h>
#include <vtkUnstructuredGrid.h>
#include <vtkXMLUnstructuredGridWriter.h>

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <numbers>

#include "post/html.h"
#include "post/node_values.h"
#include "post/whole_file.h"
#include "solver/gas_dynamics.h"

namespace falcate::post {
namespace {

/// VTK node of each mesh node in each copy; the upper line of one copy is the lower of the next.
std::vector<std::vector<vtkIdType>> add_points(const FlowField& field, vtkUnstructuredGrid& grid) {
  const auto& nodes = field.mesh->nodes();
  const auto pairs = field.mesh->pitch() > 0.0 ? periodic_node_pairs(*field.mesh)
                                               : std::vector<std::array<int, 2>>{};
  vtkNew<vtkPoints> points;
  points->SetDataTypeToDouble();
  std::vector<std::vector<vtkIdType>> numbers;
  for (int copy = 0; copy < field.passages; ++copy) {
    std::vector<vtkIdType> number(nodes.size(), -1);
    if (copy > 0) {
      for (const auto& [upper, lower] : pairs) {
        number[static_cast<std::size_t>(lower)] = numbers.back()[static_cast<std::size_t>(upper)];
      }
    }
    for (std::size_t n = 0; n < nodes.size(); ++n) {
      if (number[n] >= 0) continue;
      number[n] =
          points->InsertNextPoint(nodes[n].x(), nodes[n].y() + copy * field.mesh->pitch(), 0.0);
    }
    numbers.push_back(std::move(number));
  }
  grid.SetPoints(points);
  return numbers;
}

void add_cells(const FlowField& field, vtkUnstructuredGrid& grid) {
  for (const auto& number : add_points(field, grid)) {
    for (const auto& cell : field.mesh->cells()) {
      const int corners = cell[3] < 0 ? 3 : 4;
      std::array<vtkIdType, 4> ids{};
      for (std::size_t i = 0; i < static_cast<std::size_t>(corners); ++i) {
        ids[i] = number[static_cast<std::size_t>(cell[i])];
      }
      grid.InsertNextCell(corners == 3 ? VTK_TRIANGLE : VTK_QUAD, corners, ids.data());
    }
  }
}

void add_array(const FlowField& field, vtkUnstructuredGrid& grid, const char* name,
               const std::vector<double>& values) {
  vtkNew<vtkDoubleArray> array;
  array->SetName(name);
  for (int copy = 0; copy < field.passages; ++copy) {
    for (const double value : values) array->InsertNextValue(value);
  }
  grid.GetCellData()->AddArray(array);
}

template <class Quantity>
void add_quantity(const FlowField& field, vtkUnstructuredGrid& grid, const char* name,
                  const Quantity& quantity) {
  std::vector<double> values;
  values.reserve(field.cells->size());
  for (const auto& state : *field.cells) values.push_back(quantity(state));
  add_array(field, grid, name, values);
}

void add_velocity(const FlowField& field, vtkUnstructuredGrid& grid) {
  vtkNew<vtkDoubleArray> array;
  array->SetName("velocity_m_s");
  array->SetNumberOfComponents(3);
  for (int copy = 0; copy < field.passages; ++copy) {
    for (const auto& state : *field.cells) array->InsertNextTuple3(state.u, state.v, 0.0);
  }
  grid.GetCellData()->AddArray(array);
  grid.GetCellData()->SetActiveVectors("velocity_m_s");
}

double mach_number(const solver::Primitive& state, double gamma) {
  return std::sqrt((state.u * state.u + state.v * state.v) * state.density /
                   (gamma * state.pressure));
}

void add_flow(const FlowField& field, vtkUnstructuredGrid& grid) {
  const double gamma = field.gas.heat_capacity_ratio, r = field.gas.gas_constant;
  const double cp = solver::heat_capacity(field.gas);
  add_quantity(field, grid, "density_kg_m3", [](const auto& s) { return s.density; });
  add_velocity(field, grid);
  add_quantity(field, grid, "pressure_pa", [](const auto& s) { return s.pressure; });
  add_quantity(field, grid, "mach_number", [&](const auto& s) { return mach_number(s, gamma); });
  add_quantity(field, grid, "total_pressure_pa", [&](const auto& s) {
    return s.pressure / solver::pressure_ratio(mach_number(s, gamma), gamma);
  });
  add_quantity(field, grid, "entropy_j_kg_k", [&](const auto& s) {
    const double temperature = s.pressure / (s.density * r);
    return cp * std::log(temperature / field.inlet_total_temperature) -
           r * std::log(s.pressure / field.inlet_total_pressure);
  });
}

void add_constants(const FlowField& field, vtkUnstructuredGrid& grid) {
  const auto add = [&](const char* name, double value) {
    vtkNew<vtkDoubleArray> array;
    array->SetName(name);
    array->InsertNextValue(value);
    grid.GetFieldData()->AddArray(array);
  };
  vtkNew<vtkStringArray> title;
  title->SetName("title");
  title->InsertNextValue(field.title);
  grid.GetFieldData()->AddArray(title);
  add("pitch_m", field.mesh->pitch());
  add("heat_capacity_ratio", field.gas.heat_capacity_ratio);
  add("gas_constant_j_kg_k", field.gas.gas_constant);
}

}  // namespace

std::vector<double> scaled_jacobians(const mesh::PassageMesh& mesh) {
  std::vector<double> quality;
  quality.reserve(mesh.cells().size());
  for (const auto& cell : mesh.cells()) {
    const std::size_t corners = cell[3] < 0 ? 3 : 4;
    const auto node = [&](std::size_t i) -> const mesh::Point& {
      return mesh.nodes()[static_cast<std::size_t>(cell[i % corners])];
    };
    double least = 1.0;
    for (std::size_t i = 0; i < corners; ++i) {
      const mesh::Point next = node(i + 1) - node(i), last = node(i + corners - 1) - node(i);
      const double sine = (next.x() * last.y() - next.y() * last.x()) / (next.norm() * last.norm());
      least = std::min(least, corners == 3 ? sine * 2.0 / std::numbers::sqrt3 : sine);
    }
    quality.push_back(least);
  }
  return quality;
}

std::vector<double> mach_numbers(const std::vector<solver::Primitive>& cells,
                                 double heat_capacity_ratio) {
  std::vector<double> mach;
  mach.reserve(cells.size());
  for (const auto& state : cells) mach.push_back(mach_number(state, heat_capacity_ratio));
  return mach;
}

void write_flow_file(const FlowField& field, const std::string& path) {
  assert(field.mesh && field.cells && field.passages >= 1);
  assert(field.cells->size() == field.mesh->cells().size());
  vtkNew<vtkUnstructuredGrid> grid;
  add_cells(field, *grid);
  add_flow(field, *grid);
  add_array(field, *grid, "cell_quality", scaled_jacobians(*field.mesh));
  add_constants(field, *grid);

  vtkNew<vtkXMLUnstructuredGridWriter> writer;
  writer->WriteToOutputStringOn();  // so that the file is written, checked and renamed in one place
  writer->SetInputData(grid);
  writer->SetDataModeToAppended();
  writer->EncodeAppendedDataOff();
  writer->SetCompressorTypeToZLib();
  const int written = writer->Write();
  const unsigned long error = writer->GetErrorCode();
  if (written != 1 || error != vtkErrorCode::NoError) {
    throw OutputError(
        fmt::format("{}: cannot write: {}", path, vtkErrorCode::GetStringFromErrorCode(error)));
  }
  write_whole_file(path, writer->GetOutputString());
}

void write_flow_collection(const std::vector<CollectionEntry>& entries, const std::string& path) {
  std::string text =
      "<?xml version=\"1.0\"?>\n<VTKFile type=\"Collection\" version=\"0.1\" "
      "byte_order=\"LittleEndian\">\n  <Collection>\n";
  for (const auto& entry : entries) {
    text += fmt::format("    <DataSet timestep=\"{}\" group=\"\" part=\"0\" file=\"{}\"/>\n",
                        entry.value, escape_html(entry.file));
  }
  write_whole_file(path, text + "  </Collection>\n</VTKFile>\n");
}

}  // namespace falcate::post
