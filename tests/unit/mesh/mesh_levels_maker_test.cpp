#include "mesh/mesh_levels_maker.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <functional>
#include <iostream>
#include <map>
#include <numbers>
#include <numeric>
#include <set>
#include <string>

#include "mesh/blade_shapes.h"
#include "mesh/curved_mesh.h"
#include "mesh/mesher_process.h"

namespace falcate::mesh {
namespace {

constexpr double kDegree = std::numbers::pi / 180.0;
const std::string kData = FALCATE_SOURCE_DIR "/tests/data/";
std::size_t at(int i) { return static_cast<std::size_t>(i); }

struct Case {
  std::string name;
  std::function<BladeOutline()> outline;
  double pitch, inlet_deg, exit_deg;
};
std::ostream& operator<<(std::ostream& out, const Case& c) { return out << c.name; }

/// Pitches and angles of the exact cascades are those in the headers of their files.
const std::vector<Case> kCases{
    {"channel",
     [] {
       return channel_blade({0.7, 1.0, 25.0 * kDegree, 155.0 * kDegree, 0.0, 0.025});
     },
     0.7, 25.0, 155.0},
    {"sharp_channel",
     [] {
       return channel_blade({0.7, 1.0, 25.0 * kDegree, 155.0 * kDegree, 0.0, 0.0});
     },
     0.7, 25.0, 155.0},
    {"thin_edged_channel",
     [] {
       return channel_blade({0.6, 1.0, 30.0 * kDegree, 150.0 * kDegree, 0.0, 0.002});
     },
     0.6, 30.0, 150.0},
    {"cup",
     [] {
       return cup_blade({0.7, 1.0, 30.0 * kDegree, 150.0 * kDegree, 0.08, 0.0});
     },
     0.7, 30.0, 150.0},
    {"S1",
     [] { return coordinates_blade(kData + "exact_supersonic_impulse_S1_M2.0_b65.csv", 1.0); },
     0.3002776851, 25.0, 155.0},
    {"S3",
     [] { return coordinates_blade(kData + "exact_supersonic_impulse_S3_M2.5_b70.csv", 1.0); },
     0.2548557998, 20.0, 160.0},
    {"I1",
     [] { return coordinates_blade(kData + "exact_incompressible_cascade_I1_turn83.csv", 1.0); },
     0.7384864051, 50.0, 132.80286},
    {"I3",
     [] { return coordinates_blade(kData + "exact_incompressible_cascade_I3_turn31.csv", 1.0); },
     0.7507737395, 75.0, 105.518565},
};

MeshLevels make(const Case& c, const MeshOptions& options = {}) {
  return make_mesh_levels(c.outline(), c.pitch, c.inlet_deg * kDegree, c.exit_deg * kDegree,
                          options);
}

/// One mesh a case serves all tests that only look at it.
const MeshLevels& made(const Case& c) {
  static std::map<std::string, MeshLevels> store;
  const auto found = store.find(c.name);
  return found != store.end() ? found->second : store.emplace(c.name, make(c)).first->second;
}

/// Area of the blade by a polygon so fine that its error is below 1e-8 of the area.
double blade_area(const BladeOutline& outline) {
  std::vector<Point> polygon;
  constexpr int kPoints = 20000;
  for (int i = 0; i < kPoints; ++i) {
    polygon.push_back(outline.pressure().point(outline.pressure().length * i / kPoints));
  }
  for (int i = kPoints; i > 0; --i) {
    polygon.push_back(outline.suction().point(outline.suction().length * i / kPoints));
  }
  double area = 0.0;
  for (std::size_t i = 0; i < polygon.size(); ++i) {
    const Point &a = polygon[i], &b = polygon[(i + 1) % polygon.size()];
    area += 0.5 * (a.x() * b.y() - a.y() * b.x());
  }
  return area;
}

class EveryPassage : public ::testing::TestWithParam<Case> {};

TEST_P(EveryPassage, HasGoodCellsOfTheRightNumberAndArea) {
  const auto& levels = made(GetParam());
  ASSERT_EQ(levels.levels.size(), 3u);
  const double finest = levels.levels.back().cell_count();
  EXPECT_NEAR(finest / 8000.0, 1.0, 0.15);
  const auto outline = GetParam().outline();
  const double exact = 3.0 * outline.width() * GetParam().pitch - blade_area(outline);
  double bound = 1e-3;
  for (const auto& level : levels.levels) {
    std::vector<double> quality;
    for (const auto& cell : level.cells()) quality.push_back(scaled_jacobian(level.nodes(), cell));
    std::sort(quality.begin(), quality.end());
    std::cout << GetParam().name << ": " << quality.size() << " cells, scaled Jacobian least "
              << quality.front() << ", median " << quality[quality.size() / 2] << '\n';
    // 0.3: no corner sharper than 17 or blunter than 163 degrees; the gradient and the limiter of a
    // finite-volume scheme still see their neighbours in all directions (common practice: 0.2).
    EXPECT_GT(quality.front(), 0.3);
    EXPECT_GT(quality[quality.size() / 2], 0.9);
    const double area = std::accumulate(level.areas().begin(), level.areas().end(), 0.0);
    // The parabola through the three points of a wall face misses the curve by a term of fourth
    // order.
    EXPECT_NEAR(area / exact, 1.0, bound);
    bound /= 16.0;
  }
}

TEST_P(EveryPassage, LevelsAreNested) {
  const auto& levels = made(GetParam());
  EXPECT_TRUE(levels.parent.front().empty());
  for (std::size_t k = 1; k < levels.levels.size(); ++k) {
    const auto &coarse = levels.levels[k - 1], &fine = levels.levels[k];
    ASSERT_EQ(levels.parent[k].size(), fine.areas().size());
    std::vector<int> children(coarse.areas().size(), 0);
    std::vector<double> area(coarse.areas().size(), 0.0);
    for (int c = 0; c < fine.cell_count(); ++c) {
      ++children[at(levels.parent[k][at(c)])];
      area[at(levels.parent[k][at(c)])] += fine.areas()[at(c)];
    }
    std::vector<char> at_wall(coarse.areas().size(), 0);
    for (const auto& patch : coarse.patches()) {
      for (int f = patch.first_face; f < patch.first_face + patch.face_count; ++f) {
        if (is_wall(patch.kind)) at_wall[at(coarse.faces()[at(f)].left)] = 1;
      }
    }
    for (int c = 0; c < coarse.cell_count(); ++c) {
      EXPECT_EQ(children[at(c)], 4);
      // Inside exact; along the wall the finer edges follow the curve more closely.
      EXPECT_NEAR(area[at(c)] / coarse.areas()[at(c)], 1.0, at_wall[at(c)] ? 0.1 : 1e-11);
    }
  }
}

TEST_P(EveryPassage, IsPeriodicToTheLastBitAndLiesOnTheBlade) {
  const auto& levels = made(GetParam());
  const auto outline = GetParam().outline();
  const auto& mesh = levels.levels.back();
  std::set<std::pair<double, double>> lifted;
  for (const auto& node : mesh.nodes()) lifted.insert({node.x(), node.y() + GetParam().pitch});
  int shifted = 0;
  for (int f = 0; f < mesh.interior_face_count(); ++f) {
    const auto& face = mesh.faces()[at(f)];
    if (face.right_shift.y() == 0.0) continue;
    EXPECT_EQ(std::abs(face.right_shift.y()), GetParam().pitch);
    ++shifted;
    for (int n : face.nodes) {
      const Point& p = mesh.nodes()[at(n)];
      const double up = face.right_shift.y() > 0.0 ? 0.0 : GetParam().pitch;
      EXPECT_TRUE(lifted.contains({p.x(), p.y() + up}));
    }
  }
  EXPECT_GT(shifted, 50);
  // The densest comparison with the true curve that is still quick: every seventh wall face.
  for (const auto& patch : mesh.patches()) {
    for (int f = patch.first_face; f < patch.first_face + patch.face_count; f += 7) {
      const Point p = mesh.faces()[at(f)].midpoint;
      if (!is_wall(patch.kind)) {
        EXPECT_DOUBLE_EQ(p.x(), (patch.kind == PatchKind::inlet ? -1.0 : 2.0) * outline.width());
        continue;
      }
      const Point q =
          p - Point(0.0, patch.kind == PatchKind::pressure_wall ? GetParam().pitch : 0.0);
      double nearest = 1.0;
      for (const auto* side : {&outline.suction(), &outline.pressure()}) {
        double best = 0.0, gap = 1.0;
        for (int i = 0; i <= 300; ++i) {
          const double s = side->length * i / 300.0;
          if (const double d = (side->point(s) - q).norm(); d < gap) gap = d, best = s;
        }
        for (double h = side->length / 300.0; h > 1e-12; h *= 0.6) {
          for (double s : {best - h, best + h}) {
            s = std::clamp(s, 0.0, side->length);
            if (const double d = (side->point(s) - q).norm(); d < gap) gap = d, best = s;
          }
        }
        nearest = std::min(nearest, gap);
      }
      EXPECT_LT(nearest, 1e-9);
    }
  }
}

TEST_P(EveryPassage, IsTheSameOnEveryRun) {
  const auto& first = made(GetParam());
  const auto second = make(GetParam());
  for (std::size_t k = 0; k < first.levels.size(); ++k) {
    EXPECT_EQ(first.levels[k].nodes(), second.levels[k].nodes());
    EXPECT_EQ(first.levels[k].cells(), second.levels[k].cells());
    EXPECT_EQ(first.parent[k], second.parent[k]);
  }
}

INSTANTIATE_TEST_SUITE_P(MeshLevels, EveryPassage, ::testing::ValuesIn(kCases),
                         [](const auto& tested) { return tested.param.name; });

TEST(MeshLevels, ComeInOtherNumbersAndSizes) {
  for (const auto& [cells, levels] :
       {std::pair{500, 1}, {1200, 2}, {2000, 3}, {32000, 4}, {20000, 3}}) {
    MeshOptions options;
    options.cells = cells;
    options.levels = levels;
    const auto made = make(kCases[0], options);
    EXPECT_EQ(made.levels.size(), at(levels));
    EXPECT_NEAR(made.levels.back().cell_count() / static_cast<double>(cells), 1.0, 0.15) << cells;
  }
}

std::string mesh_error(const std::function<void()>& act) {
  try {
    act();
  } catch (const MeshError& error) {
    return error.what();
  }
  return "no error";
}

TEST(MeshLevels, SayWhatCannotBeMeshed) {
  const auto& channel = kCases[0];
  struct Fault {
    std::function<void(Case&, MeshOptions&)> spoil;
    std::string message;
  };
  const std::vector<Fault> faults{
      {[](Case& c, MeshOptions&) { c.pitch = 0.3; },
       "neighbouring blades touch: at a pitch of 300 mm there is no passage between blades 1000 mm "
       "wide; take fewer blades or a thinner shape"},
      {[](Case&, MeshOptions& o) { o.cells = 500; },
       "500 cells on 3 levels: the coarsest level needs 60 cells or more, the finest may have "
       "4000000 "
       "at most"},
      {[](Case&, MeshOptions& o) { o.cells = 5000000; },
       "5000000 cells on 3 levels: the coarsest level needs 60 cells or more, the finest may have "
       "4000000 at most"},
      {[](Case&, MeshOptions& o) { o.levels = 0; }, "the mesh levels must be 1 to 6"},
      {[](Case&, MeshOptions& o) { o.upstream = 0.1; },
       "the inlet and outlet planes must lie 0.2 blade widths or more from the blades"},
      {[](Case&, MeshOptions& o) { o.time_limit_s = 0.002; },
       "the mesher did not finish within 0.002 s and was stopped"},
  };
  for (const auto& fault : faults) {
    auto c = channel;
    MeshOptions options;
    fault.spoil(c, options);
    EXPECT_EQ(mesh_error([&] { make(c, options); }), fault.message);
  }
}

MesherRequest unit_square() {
  MesherRequest request;
  const std::vector<Point> corners{{0.0, 0.0}, {1.0, 0.0}, {1.0, 1.0}, {0.0, 1.0}, {0.0, 0.0}};
  for (std::size_t k = 0; k < 4; ++k) {
    request.curves.push_back({});
    for (int i = 0; i <= 4; ++i) {
      request.curves.back().push_back((1.0 - 0.25 * i) * corners[k] + 0.25 * i * corners[k + 1]);
    }
  }
  request.size = {0.0, 1.0, 0.5, 1.0, 2, 2, {0.25, 0.25, 0.25, 0.25}};
  return request;
}

TEST(MesherProcess, FillsASquareAgainAndAgain) {
  MesherProcess mesher(FALCATE_BINARY_DIR "/falcate-mesher", 60.0);
  for (int k = 0; k < 3; ++k) {
    const auto answer = mesher.fill(unit_square());
    EXPECT_NEAR(static_cast<double>(answer.cells.size()), 16.0, 4.0);
    for (const auto& cell : answer.cells) EXPECT_GT(scaled_jacobian(answer.nodes, cell), 0.5);
  }
}

TEST(MesherProcess, SaysHowItFails) {
  EXPECT_EQ(mesh_error([] { MesherProcess("/no/such/mesher", 1.0); }),
            "the mesher /no/such/mesher is missing; reinstall the program");
  const auto fill = [](const std::string& program, double limit) {
    return mesh_error([&] { MesherProcess(program, limit).fill(unit_square()); });
  };
  EXPECT_EQ(fill("/bin/false", 10.0), "the mesher broke down on this passage");
  const auto idle = std::filesystem::path(::testing::TempDir()) / "falcate-idle-mesher";
  const auto garbage = std::filesystem::path(::testing::TempDir()) / "falcate-garbage-mesher";
  std::ofstream(idle) << "#!/bin/sh\nexec sleep 30\n";
  std::ofstream(garbage) << "neither program nor script";
  for (const auto& file : {idle, garbage}) {
    std::filesystem::permissions(file, std::filesystem::perms::owner_all);
  }
  EXPECT_EQ(fill(idle.string(), 0.3), "the mesher did not finish within 0.3 s and was stopped");
  EXPECT_EQ(fill(garbage.string(), 10.0),
            "the mesher " + garbage.string() + " cannot be started; reinstall the program");
  std::filesystem::remove(idle);
  std::filesystem::remove(garbage);
}

}  // namespace
}  // namespace falcate::mesh
