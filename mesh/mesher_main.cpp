/// falcate-mesher: fills one passage with quadrilaterals by Gmsh; started by MesherProcess only.
///
/// Some of Gmsh's algorithms order by the addresses of objects. So that the same passage gives the
/// same mesh, all C++ memory comes from one arena in the order in which it is asked for and is
/// never handed back: this process lives for a few meshes.
#include <gmsh.h>
#include <sys/mman.h>

#include <cstddef>
#include <cstdlib>
#include <map>
#include <new>
#include <vector>

#include "mesh/mesher_process.h"

namespace {

constexpr std::size_t kArena = std::size_t{3} << 30;  // address space; memory is used as touched
constinit char* arena_next = nullptr;
constinit char* arena_end = nullptr;

void* take(std::size_t size, std::size_t alignment) {
  if (arena_next == nullptr) {
    void* start = mmap(nullptr, kArena, PROT_READ | PROT_WRITE,
                       MAP_PRIVATE | MAP_ANONYMOUS | MAP_NORESERVE, -1, 0);
    if (start == MAP_FAILED) std::abort();
    arena_next = static_cast<char*>(start);
    arena_end = arena_next + kArena;
  }
  const auto misfit = reinterpret_cast<std::size_t>(arena_next) % alignment;
  char* result = arena_next + (misfit == 0 ? 0 : alignment - misfit);
  if (size > static_cast<std::size_t>(arena_end - result)) throw std::bad_alloc();
  arena_next = result + size;
  return result;
}

constexpr std::size_t kAlignment = alignof(std::max_align_t);

}  // namespace

void* operator new(std::size_t size) { return take(size, kAlignment); }
void* operator new[](std::size_t size) { return take(size, kAlignment); }
void* operator new(std::size_t size, std::align_val_t a) { return take(size, std::size_t(a)); }
void* operator new[](std::size_t size, std::align_val_t a) { return take(size, std::size_t(a)); }
void operator delete(void*) noexcept {}
void operator delete[](void*) noexcept {}
void operator delete(void*, std::size_t) noexcept {}
void operator delete[](void*, std::size_t) noexcept {}
void operator delete(void*, std::align_val_t) noexcept {}
void operator delete[](void*, std::align_val_t) noexcept {}
void operator delete(void*, std::size_t, std::align_val_t) noexcept {}
void operator delete[](void*, std::size_t, std::align_val_t) noexcept {}

namespace falcate::mesh {
namespace {

void set_options(const MesherRequest& request) {
  gmsh::option::setNumber("General.Terminal", 0);
  gmsh::option::setNumber("General.NumThreads", 1);
  gmsh::option::setNumber("Mesh.Algorithm", request.algorithm);
  gmsh::option::setNumber("Mesh.RecombineAll", 1);
  gmsh::option::setNumber("Mesh.RecombinationAlgorithm", request.recombination);
  gmsh::option::setNumber("Mesh.MeshSizeExtendFromBoundary", 0);
  gmsh::option::setNumber("Mesh.MeshSizeFromPoints", 0);
}

/// The boundary as discrete curves: Gmsh must take its nodes as they are.
void add_boundary(const std::vector<std::vector<Point>>& curves) {
  const int n = static_cast<int>(curves.size());
  for (int c = 0; c < n; ++c) {
    const Point& p = curves[static_cast<std::size_t>(c)].front();
    const auto node = static_cast<std::size_t>(c + 1);
    gmsh::model::addDiscreteEntity(0, c + 1);
    gmsh::model::setCoordinates(c + 1, p.x(), p.y(), 0.0);
    gmsh::model::mesh::addNodes(0, c + 1, {node}, {p.x(), p.y(), 0.0});
    gmsh::model::mesh::addElementsByType(c + 1, 15, {}, {node});
  }
  auto next = static_cast<std::size_t>(n + 1);
  std::vector<int> loop;
  for (int c = 0; c < n; ++c) {
    const auto& curve = curves[static_cast<std::size_t>(c)];
    const int end = (c + 1) % n;
    gmsh::model::addDiscreteEntity(1, c + 1, {c + 1, end + 1});
    std::vector<std::size_t> tags, chain{static_cast<std::size_t>(c + 1)}, lines;
    std::vector<double> places;
    for (std::size_t i = 1; i + 1 < curve.size(); ++i) {
      tags.push_back(next);
      chain.push_back(next++);
      places.insert(places.end(), {curve[i].x(), curve[i].y(), 0.0});
    }
    chain.push_back(static_cast<std::size_t>(end + 1));
    for (std::size_t i = 0; i + 1 < chain.size(); ++i) {
      lines.insert(lines.end(), {chain[i], chain[i + 1]});
    }
    gmsh::model::mesh::addNodes(1, c + 1, tags, places);
    gmsh::model::mesh::addElementsByType(c + 1, 1, {}, lines);
    loop.push_back(c + 1);
  }
  gmsh::model::geo::addCurveLoop(loop, 1);
  gmsh::model::geo::addPlaneSurface({1}, 1);
  gmsh::model::geo::synchronize();
}

MesherAnswer collect() {
  MesherAnswer answer;
  std::vector<std::size_t> tags;
  std::vector<double> places, parameters;
  gmsh::model::mesh::getNodes(tags, places, parameters);
  std::map<std::size_t, int> index;
  const auto node_of = [&](std::size_t tag) { return index.at(tag); };
  for (std::size_t i = 0; i < tags.size(); ++i) {
    if (!index.emplace(tags[i], static_cast<int>(answer.nodes.size())).second) continue;
    answer.nodes.emplace_back(places[3 * i], places[3 * i + 1]);
  }
  for (const int type : {2, 3}) {  // triangles, quadrilaterals
    std::vector<std::size_t> elements, nodes;
    gmsh::model::mesh::getElementsByType(type, elements, nodes);
    const std::size_t corners = type == 2 ? 3 : 4;
    for (std::size_t e = 0; e < elements.size(); ++e) {
      std::array<int, 4> cell{-1, -1, -1, -1};
      for (std::size_t k = 0; k < corners; ++k) cell[k] = node_of(nodes[corners * e + k]);
      answer.cells.push_back(cell);
    }
  }
  return answer;
}

MesherAnswer fill(const MesherRequest& request) {
  gmsh::clear();
  set_options(request);
  gmsh::model::add("passage");
  add_boundary(request.curves);
  gmsh::model::mesh::setSizeCallback(
      [&request](int, int, double x, double y, double) { return request.size.at(x, y); });
  gmsh::model::mesh::generate(2);
  return collect();
}

}  // namespace
}  // namespace falcate::mesh

int main() {
  using namespace falcate::mesh;
  try {
    gmsh::initialize(0, nullptr, false);
    while (await_request()) write_answer(fill(read_request()));
  } catch (...) {
    std::_Exit(1);
  }
  std::_Exit(0);  // no tidying up: nothing outlives this process
}
