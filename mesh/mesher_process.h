/// Runs `falcate-mesher`, which holds Gmsh, in a process of its own: errors in there can end or
/// hang a process in ways nothing can catch. Limits: memory, processor time and time by the clock.
/// Requests and answers pass through memory files that the child inherits; no file is left
/// anywhere. Loading Gmsh takes longer than a mesh, so one process serves several requests. Errors:
/// `MeshError` in plain words.
#pragma once
#include <array>
#include <memory>
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

/// File descriptors in the mesher process: request, answer, and a socket that carries one byte each
/// time either is ready.
constexpr int kRequestDescriptor = 3;
constexpr int kAnswerDescriptor = 4;
constexpr int kSignalDescriptor = 5;

/// A running mesher; ended with the object. The time limit is for all that it does together.
class MesherProcess {
 public:
  MesherProcess(const std::string& program, double time_limit_s);
  ~MesherProcess();
  MesherProcess(const MesherProcess&) = delete;
  MesherProcess& operator=(const MesherProcess&) = delete;

  /// After an error the process is gone, and every further call is the same error.
  MesherAnswer fill(const MesherRequest& request);

 private:
  struct State;
  std::unique_ptr<State> state_;
};

// The mesher's own end of the line.
bool await_request();  ///< false: no more will come
MesherRequest read_request();
void write_answer(const MesherAnswer& answer);

}  // namespace falcate::mesh
