// The file is read back by VTK's own reader; the flow is invented and uniform, so that every
// derived value has a closed form (isentropic relations, NACA Report 1135).
#include "post/flow_file.h"

#include <gtest/gtest.h>
#include <vtkCellData.h>
#include <vtkDataArray.h>
#include <vtkFieldData.h>
#include <vtkNew.h>
#include <vtkStringArray.h>
#include <vtkUnstructuredGrid.h>
#include <vtkXMLUnstructuredGridReader.h>

#include <cmath>
#include <filesystem>
#include <limits>
#include <numbers>

#include "mesh/structured.h"
#include "post/output_error.h"
#include "post/whole_file.h"

namespace falcate::post {
namespace {

namespace fs = std::filesystem;
using mesh::PassageMesh;
using mesh::PatchKind;
using mesh::Point;

fs::path fresh_folder(const std::string& name) {
  const fs::path folder = fs::path(testing::TempDir()) / ("falcate_flow_file_" + name);
  fs::remove_all(folder);
  fs::create_directories(folder);
  return folder;
}

/// A periodic strip of parallelograms that lean by `lean` radians; pitch 2.
PassageMesh strip(double lean) {
  const auto map = [=](double xi, double eta) {
    return Point(3.0 * xi, 2.0 * eta + 3.0 * xi * std::tan(lean));
  };
  return PassageMesh::build(mesh::structured(
      6, 4, mesh::CellKind::quads, map,
      {PatchKind::wall, PatchKind::outlet, PatchKind::wall, PatchKind::inlet}, 2.0));
}

/// Mach 2 at 300 K and 1 bar total: T = 300/1.8, p = p0/1.8^3.5; cell k gets its own direction.
std::vector<solver::Primitive> mach_two(std::size_t cells) {
  std::vector<solver::Primitive> states;
  for (std::size_t k = 0; k < cells; ++k) {
    solver::Primitive s;
    const double temperature = 300.0 / 1.8, angle = 0.05 * static_cast<double>(k);
    s.pressure = 1e5 / std::pow(1.8, 3.5);
    s.density = s.pressure / (287.05 * temperature);
    const double speed = 2.0 * std::sqrt(1.4 * 287.05 * temperature);
    s.u = speed * std::cos(angle);
    s.v = speed * std::sin(angle);
    states.push_back(s);
  }
  return states;
}

vtkNew<vtkXMLUnstructuredGridReader> read(const fs::path& path) {
  vtkNew<vtkXMLUnstructuredGridReader> reader;
  reader->SetFileName(path.c_str());
  reader->Update();
  return reader;
}

TEST(FlowFile, ReadsBackWithEveryQuantity) {
  const PassageMesh mesh = strip(0.4);
  const auto cells = mach_two(mesh.cells().size());
  const fs::path path = fresh_folder("quantities") / "point.vtu";
  write_flow_file({"a <title> & more", &mesh, &cells, {}, 1e5, 300.0, 1}, path.string());
  const auto reader = read(path);
  vtkUnstructuredGrid* grid = reader->GetOutput();
  ASSERT_EQ(grid->GetNumberOfCells(), mesh.cell_count());
  ASSERT_EQ(grid->GetNumberOfPoints(), static_cast<vtkIdType>(mesh.nodes().size()));
  const auto value = [&](const char* name, vtkIdType cell, int part = 0) {
    return grid->GetCellData()->GetArray(name)->GetComponent(cell, part);
  };
  for (int c = 0; c < mesh.cell_count(); ++c) {
    const auto& s = cells[static_cast<std::size_t>(c)];
    EXPECT_EQ(value("density_kg_m3", c), s.density);
    EXPECT_EQ(value("velocity_m_s", c, 0), s.u);
    EXPECT_EQ(value("velocity_m_s", c, 1), s.v);
    EXPECT_EQ(value("velocity_m_s", c, 2), 0.0);
    EXPECT_EQ(value("pressure_pa", c), s.pressure);
    EXPECT_NEAR(value("mach_number", c), 2.0, 1e-12);
    EXPECT_NEAR(value("total_pressure_pa", c), 1e5, 1e-6);
    EXPECT_NEAR(value("entropy_j_kg_k", c), 0.0, 1e-9);
    EXPECT_NEAR(value("cell_quality", c), std::cos(0.4), 1e-12);  // least sine of the corners
  }
  EXPECT_EQ(
      vtkStringArray::SafeDownCast(grid->GetFieldData()->GetAbstractArray("title"))->GetValue(0),
      "a <title> & more");
  EXPECT_EQ(grid->GetFieldData()->GetArray("pitch_m")->GetTuple1(0), 2.0);
  EXPECT_EQ(grid->GetFieldData()->GetArray("heat_capacity_ratio")->GetTuple1(0), 1.4);
  EXPECT_EQ(grid->GetFieldData()->GetArray("gas_constant_j_kg_k")->GetTuple1(0), 287.05);
}

TEST(FlowFile, PassagesStandAPitchApartAndShareTheirPeriodicLine) {
  const PassageMesh mesh = strip(0.2);
  const auto cells = mach_two(mesh.cells().size());
  const fs::path path = fresh_folder("passages") / "point.vtu";
  write_flow_file({"", &mesh, &cells, {}, 1e5, 300.0, 3}, path.string());
  const auto reader = read(path);
  vtkUnstructuredGrid* grid = reader->GetOutput();
  ASSERT_EQ(grid->GetNumberOfCells(), 3 * 24);
  EXPECT_EQ(grid->GetNumberOfPoints(), 7 * (3 * 4 + 1));  // 7 stations, shared lines counted once
  double bounds[6];
  for (vtkIdType c = 0; c < 24; ++c) {
    for (int copy = 0; copy < 3; ++copy) {
      grid->GetCellBounds(c + 24 * copy, bounds);
      const Point& centroid = mesh.centroids()[static_cast<std::size_t>(c)];
      EXPECT_NEAR(0.5 * (bounds[0] + bounds[1]), centroid.x(), 1e-12);
      EXPECT_NEAR(0.5 * (bounds[2] + bounds[3]), centroid.y() + 2.0 * copy, 1e-12);
      EXPECT_EQ(grid->GetCellData()->GetArray("velocity_m_s")->GetComponent(c + 24 * copy, 1),
                cells[static_cast<std::size_t>(c)].v);
    }
  }
}

TEST(FlowFile, EntropyOfAShockedFlowIsThatOfItsTotalPressure) {
  const PassageMesh mesh = strip(0.0);
  auto cells = mach_two(mesh.cells().size());
  for (auto& s : cells) s.pressure *= 0.7, s.density *= 0.7;  // same T and M at 0.7 p0
  const fs::path path = fresh_folder("entropy") / "point.vtu";
  write_flow_file({"", &mesh, &cells, {}, 1e5, 300.0, 1}, path.string());
  const auto reader = read(path);
  EXPECT_NEAR(reader->GetOutput()->GetCellData()->GetArray("entropy_j_kg_k")->GetTuple1(5),
              -287.05 * std::log(0.7), 1e-9);
}

TEST(FlowFile, ValueThatIsNoNumberIsKept) {
  const PassageMesh mesh = strip(0.0);
  auto cells = mach_two(mesh.cells().size());
  cells[7].pressure = std::numeric_limits<double>::quiet_NaN();
  const fs::path path = fresh_folder("nan") / "point.vtu";
  write_flow_file({"", &mesh, &cells, {}, 1e5, 300.0, 1}, path.string());
  const auto reader = read(path);
  auto* data = reader->GetOutput()->GetCellData();
  EXPECT_TRUE(std::isnan(data->GetArray("pressure_pa")->GetTuple1(7)));
  EXPECT_TRUE(std::isnan(data->GetArray("mach_number")->GetTuple1(7)));
  EXPECT_NEAR(data->GetArray("mach_number")->GetTuple1(8), 2.0, 1e-12);
}

TEST(FlowFile, FolderThatIsMissingIsAnErrorAndLeavesNothing) {
  const PassageMesh mesh = strip(0.0);
  const auto cells = mach_two(mesh.cells().size());
  const fs::path folder = fresh_folder("missing") / "none";
  try {
    write_flow_file({"", &mesh, &cells, {}, 1e5, 300.0, 1}, (folder / "point.vtu").string());
    FAIL() << "no error";
  } catch (const OutputError& error) {
    EXPECT_EQ(std::string(error.what()),
              (folder / "point.vtu").string() + ": cannot write: No such file or directory");
  }
  EXPECT_FALSE(fs::exists(folder));
}

TEST(FlowFile, CollectionListsItsFilesInOrder) {
  const fs::path path = fresh_folder("collection") / "flow.pvd";
  write_flow_collection({{10000.0, "flow/a.vtu"}, {20000.5, "flow/b&c.vtu"}}, path.string());
  EXPECT_EQ(read_whole_file(path.string()),
            "<?xml version=\"1.0\"?>\n<VTKFile type=\"Collection\" version=\"0.1\" "
            "byte_order=\"LittleEndian\">\n  <Collection>\n"
            "    <DataSet timestep=\"10000\" group=\"\" part=\"0\" file=\"flow/a.vtu\"/>\n"
            "    <DataSet timestep=\"20000.5\" group=\"\" part=\"0\" file=\"flow/b&amp;c.vtu\"/>\n"
            "  </Collection>\n</VTKFile>\n");
}

TEST(ScaledJacobian, EquilateralTriangleIsBest) {
  mesh::RawMesh raw;
  raw.nodes = {{0.0, 0.0}, {1.0, 0.0}, {0.5, 0.5 * std::numbers::sqrt3}};
  raw.cells = {{0, 1, 2, -1}};
  for (int i = 0; i < 3; ++i) {
    const int j = (i + 1) % 3;
    raw.boundary.push_back(
        {i, j, PatchKind::wall,
         0.5 * (raw.nodes[static_cast<std::size_t>(i)] + raw.nodes[static_cast<std::size_t>(j)])});
  }
  EXPECT_NEAR(scaled_jacobians(PassageMesh::build(raw))[0], 1.0, 1e-12);
}

}  // namespace
}  // namespace falcate::post
