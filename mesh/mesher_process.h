/// Runs `falcate-mesher`, which holds Gmsh, in a process of its own: errors in there can end or
/// hang a process in ways nothing can catch. Limits: memory, processor time and time by the clock.
/// Request and answer pass through memory files that the child inherits; no file is left anywhere.
/// Errors: `MeshError` in plain words.
#pragma once
#include <array>
#include <string>
#include <vector>

#include "mesh/point.h"
#include "mesh/size_field.h"

namespace falcate::mesh {

/// What the mesher is to fill: closed, counter-clockwise; every curve ends where the next begins
/// and has an even number of edges.
struct MesherRequest {
  int algorithm = 9;      ///< Gmsh's number: 9 packing of parallelograms, 6 frontal Delaunay
  int recombination = 3;  ///< Gmsh's number: 3 full-quad blossom, 1 blossom
  std::vector<std::vector<Point>> curves;
  SizeField size;
};

struct MesherAnswer {
  std::vector<Point> nodes;
  std::vector<std::array<int, 4>> cells;  ///< a triangle ends with -1
};

/// File descriptors of request and answer in the mesher process.
constexpr int kRequestDescriptor = 3;
constexpr int kAnswerDescriptor = 4;

/// The mesher that belongs to the running program: in the same directory.
std::string mesher_beside_this_program();

MesherAnswer run_mesher(const std::string& program, const MesherRequest& request,
                        double time_limit_s);

// The mesher's own end of the line.
MesherRequest read_request(int descriptor);
void write_answer(int descriptor, const MesherAnswer& answer);

}  // namespace falcate::mesh
