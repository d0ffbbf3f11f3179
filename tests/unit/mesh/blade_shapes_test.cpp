#include "mesh/blade_shapes.h"

#include <gtest/gtest.h>

#include <Eigen/LU>
#include <algorithm>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <functional>
#include <numbers>
#include <string>

namespace falcate::mesh {
namespace {

constexpr double kDegree = std::numbers::pi / 180.0;
const std::string kData = FALCATE_SOURCE_DIR "/tests/data/";

ChannelParameters channel(double in = 25.0, double out = 155.0, double edge_radius = 0.15e-3) {
  return {.pitch = 4.2e-3,
          .width = 6e-3,
          .inlet_angle = in * kDegree,
          .exit_angle = out * kDegree,
          .edge_radius = edge_radius};
}

CupParameters cup() {
  return {.pitch = 4.2e-3,
          .width = 6e-3,
          .inlet_angle = 30.0 * kDegree,
          .exit_angle = 150.0 * kDegree,
          .wall_thickness = 0.6e-3};
}

Point unit(double angle) { return {std::sin(angle), std::cos(angle)}; }

/// Angle of the tangent from the plane of rotation, by central difference.
double tangent_angle(const BladeSide& side, double s) {
  const double h = 1e-5 * side.length;
  const Point d = side.point(s + h) - side.point(s - h);
  return std::atan2(d.x(), d.y());
}

Point circle_centre(const Point& a, const Point& b, const Point& c) {
  Eigen::Matrix2d m;
  m.row(0) = 2.0 * (b - a);
  m.row(1) = 2.0 * (c - a);
  return m.inverse() * Point(b.squaredNorm() - a.squaredNorm(), c.squaredNorm() - a.squaredNorm());
}

/// The longest piece of a side between its corners.
std::pair<double, double> longest_piece(const BladeSide& side, bool curved) {
  auto marks = side.corners;
  marks.insert(marks.begin(), 0.0);
  marks.push_back(side.length);
  std::pair<double, double> best{0.0, 0.0};
  for (std::size_t k = 0; k + 1 < marks.size(); ++k) {
    const bool bent = side.curvature(0.5 * (marks[k] + marks[k + 1])) > 0.0;
    if (bent == curved && marks[k + 1] - marks[k] > best.second - best.first) {
      best = {marks[k], marks[k + 1]};
    }
  }
  return best;
}

struct Arc {
  Point centre;
  double radius, from, to;
};

Arc bend_of(const BladeSide& side) {
  const auto [from, to] = longest_piece(side, true);
  const Point a = side.point(from), b = side.point(0.5 * (from + to)), c = side.point(to);
  const Point centre = circle_centre(a, b, c);
  return {centre, (a - centre).norm(), from, to};
}

/// Both sides joined at both ends, x from 0 to width, convex side on top.
void expect_sound(const BladeOutline& blade, double width) {
  const auto &top = blade.suction(), &low = blade.pressure();
  EXPECT_LT((top.point(0.0) - low.point(0.0)).norm(), 1e-12 * width);
  EXPECT_LT((top.point(top.length) - low.point(low.length)).norm(), 1e-12 * width);
  EXPECT_NEAR(blade.width(), width, 1e-12 * width);
  double least = 1.0, greatest = -1.0, area = 0.0;
  const auto polygon = blade.polygon(400);
  for (std::size_t i = 0; i < polygon.size(); ++i) {
    const Point &a = polygon[i], &b = polygon[(i + 1) % polygon.size()];
    least = std::min(least, a.x());
    greatest = std::max(greatest, a.x());
    area += 0.5 * (a.x() * b.y() - a.y() * b.x());
  }
  EXPECT_NEAR(least, 0.0, 1e-9 * width);
  EXPECT_NEAR(greatest, width, 1e-9 * width);
  EXPECT_GT(area, 0.0);
  for (const auto* side : {&top, &low}) {  // arc length is arc length
    for (int k = 1; k < 50; ++k) {
      const double s = side->length * k / 50.0, h = 1e-6 * side->length;
      EXPECT_NEAR((side->point(s + h) - side->point(s - h)).norm() / (2.0 * h), 1.0, 2e-3);
    }
  }
}

std::string shape_error(const std::function<void()>& make) {
  try {
    make();
  } catch (const ShapeError& error) {
    return error.what();
  }
  return "no error";
}

TEST(ChannelBlade, ArcsOfNeighboursAreConcentricAndThePassageKeepsItsWidth) {
  for (const auto& p : {channel(), channel(25.0, 155.0, 0.0), channel(40.0, 120.0),
                        channel(90.0, 160.0), channel(25.0, 150.0)}) {
    const auto blade = channel_blade(p);
    expect_sound(blade, p.width);
    const auto convex = bend_of(blade.suction()), concave = bend_of(blade.pressure());
    EXPECT_LT((concave.centre + Point(0.0, p.pitch) - convex.centre).norm(), 1e-10 * p.width);
    const double expected =
        p.pitch * std::min(std::sin(p.inlet_angle), std::sin(p.exit_angle)) - 2.0 * p.edge_radius;
    const auto& upper = blade.pressure();
    // The part of the bend where both arcs face each other, in polar angle.
    const auto polar = [](const BladeSide& side, const Arc& arc, double at) {
      const Point d = side.point(at) - arc.centre;
      return std::atan2(d.y(), d.x());
    };
    const double first = std::min(polar(blade.suction(), convex, convex.from),
                                  polar(blade.pressure(), concave, concave.from));
    const double last = std::max(polar(blade.suction(), convex, convex.to),
                                 polar(blade.pressure(), concave, concave.to));
    ASSERT_GT(first - last, 20.0 * kDegree);
    for (int k = 0; k <= 20; ++k) {
      const double angle = first + (last - first) * k / 20.0;
      const Point here = convex.centre + convex.radius * Point(std::cos(angle), std::sin(angle));
      double nearest = 1.0;
      const double step = upper.length / 4000.0;
      double best = 0.0;
      for (int i = 0; i <= 4000; ++i) {
        const double gap = (upper.point(i * step) + Point(0.0, p.pitch) - here).norm();
        if (gap < nearest) nearest = gap, best = i * step;
      }
      for (double h = step; h > 1e-9 * step; h *= 0.7) {
        for (double s : {best - h, best + h}) {
          if (s < 0.0 || s > upper.length) continue;
          const double gap = (upper.point(s) + Point(0.0, p.pitch) - here).norm();
          if (gap < nearest) nearest = gap, best = s;
        }
      }
      EXPECT_NEAR(nearest / expected, 1.0, 1e-12);
    }
  }
}

TEST(ChannelBlade, TangentsForeAndAftFollowTheAngles) {
  for (const auto& p : {channel(), channel(30.0, 140.0), channel(20.0, 160.0, 0.0)}) {
    const auto blade = channel_blade(p);
    const auto& top = blade.suction();
    const auto bend = bend_of(top);
    const double lead =
        p.edge_radius > 0.0 ? 0.5 * (top.corners.front() + bend.from) : 0.5 * bend.from;
    EXPECT_NEAR(tangent_angle(top, lead), p.inlet_angle, 1e-9);
    const double trail = top.length - (p.edge_radius > 0.0 ? top.length - top.corners.back() : 0.0);
    EXPECT_NEAR(tangent_angle(top, 0.5 * (bend.to + trail)), p.exit_angle, 1e-9);
    // No kinks: the tangent is the same on both sides of every joint.
    for (const auto* side : {&blade.suction(), &blade.pressure()}) {
      for (double s : side->corners) {
        const double h = 1e-7 * side->length;
        const Point before = (side->point(s) - side->point(s - h)).normalized();
        const Point after = (side->point(s + h) - side->point(s)).normalized();
        EXPECT_GT(before.dot(after), 1.0 - 1e-6);
      }
    }
  }
}

TEST(ChannelBlade, RoundedEdgesHaveTheirRadius) {
  const auto p = channel();
  const auto blade = channel_blade(p);
  for (const auto* side : {&blade.suction(), &blade.pressure()}) {
    EXPECT_NEAR(side->curvature(0.0) * p.edge_radius, 1.0, 1e-12);
    EXPECT_NEAR(side->curvature(side->length) * p.edge_radius, 1.0, 1e-12);
  }
  // The symmetric blade is its own mirror image.
  for (double share : {0.0, 0.1, 0.3, 0.5}) {
    const Point a = blade.suction().point(share * blade.suction().length);
    const Point b = blade.suction().point((1.0 - share) * blade.suction().length);
    EXPECT_NEAR(a.x(), p.width - b.x(), 1e-14);
    EXPECT_NEAR(a.y(), b.y(), 1e-14);
  }
}

TEST(ChannelBlade, SaysWhatCannotBe) {
  struct Fault {
    std::function<void(ChannelParameters&)> spoil;
    std::string message;
  };
  const std::vector<Fault> faults{
      {[](auto& p) { p.pitch = 0.0; }, "channel blade: the pitch must be above zero"},
      {[](auto& p) { p.width = -1.0; }, "channel blade: the width must be above zero"},
      {[](auto& p) { p.edge_radius = -1.0; },
       "channel blade: the edge radius must not be negative"},
      {[](auto& p) { p.inlet_angle = 2.0 * kDegree; },
       "channel blade: the inlet angle is 2 deg, it must be between 5 and 110 deg from the plane "
       "of "
       "rotation"},
      {[](auto& p) { p.exit_angle = 178.0 * kDegree; },
       "channel blade: the exit angle is 178 deg, it must be between 70 and 175 deg from the plane "
       "of "
       "rotation"},
      {[](auto& p) { p.inlet_angle = 75.0 * kDegree, p.exit_angle = 85.0 * kDegree; },
       "channel blade: it turns the flow by 10 deg only, from 75 to 85 deg; it must turn it by 20 "
       "deg "
       "or more"},
      {[](auto& p) { p.edge_radius = 1e-3; },
       "channel blade: neighbours touch: the pitch leaves 1.775 mm between them, the rounded edges "
       "are "
       "2 mm thick; take fewer blades, a smaller edge radius or a steeper angle"},
      {[](auto& p) { p.passage_width = 1.6e-3; },
       "channel blade: a passage 1.6 mm wide leaves no room for edges of 0.15 mm radius; at this "
       "pitch "
       "and angle it can be 1.475 mm at most"},
      {[](auto& p) { p.pitch = 9e-3; },
       "channel blade: the bend of a passage 3.504 mm wide does not fit a blade 6 mm wide: the "
       "convex "
       "side would need a radius of -0.5089 mm; take a wider blade or more blades"},
  };
  for (const auto& fault : faults) {
    auto p = channel();
    fault.spoil(p);
    EXPECT_EQ(shape_error([&] { channel_blade(p); }), fault.message);
  }
}

TEST(CupBlade, WallHasConstantThicknessAndTheRightAngles) {
  auto flat = cup();
  flat.edge_radius = 0.1e-3;
  auto steep = cup();
  steep.inlet_angle = 110.0 * kDegree;
  steep.exit_angle = 170.0 * kDegree;
  for (const auto& p : {cup(), flat, steep}) {
    const auto blade = cup_blade(p);
    expect_sound(blade, p.width);
    const auto convex = bend_of(blade.suction()), concave = bend_of(blade.pressure());
    EXPECT_LT((convex.centre - concave.centre).norm(), 1e-10 * p.width);
    EXPECT_NEAR((convex.radius - concave.radius) / p.wall_thickness, 1.0, 1e-10);
    for (const auto& [side, arc] :
         {std::pair{&blade.suction(), convex}, {&blade.pressure(), concave}}) {
      const Point first = (side->point(arc.from) - arc.centre).normalized();
      const Point last = (side->point(arc.to) - arc.centre).normalized();
      EXPECT_NEAR(first.dot(unit(p.inlet_angle)), 0.0, 1e-9);
      EXPECT_NEAR(last.dot(unit(p.exit_angle)), 0.0, 1e-9);
    }
    const double r = p.edge_radius > 0.0 ? p.edge_radius : 0.5 * p.wall_thickness;
    EXPECT_NEAR(blade.suction().curvature(0.0) * r, 1.0, 1e-12);
  }
}

TEST(CupBlade, SaysWhatCannotBe) {
  struct Fault {
    std::function<void(CupParameters&)> spoil;
    std::string message;
  };
  const std::vector<Fault> faults{
      {[](auto& p) { p.pitch = 0.0; }, "cup blade: the pitch must be above zero"},
      {[](auto& p) { p.width = 0.0; }, "cup blade: the width must be above zero"},
      {[](auto& p) { p.wall_thickness = 0.0; }, "cup blade: the wall thickness must be above zero"},
      {[](auto& p) { p.edge_radius = -1.0; }, "cup blade: the edge radius must not be negative"},
      {[](auto& p) { p.edge_radius = 0.4e-3; },
       "cup blade: the edge radius of 0.4 mm is more than half the wall thickness of 0.6 mm"},
      {[](auto& p) { p.exit_angle = p.inlet_angle; },
       "cup blade: angles of 30 deg in and 30 deg out: both must be between 5 and 175 deg and the "
       "turning 20 deg or more"},
      {[](auto& p) { p.wall_thickness = 8e-3; },
       "cup blade: a wall 8 mm thick cannot be bent into a cup 6 mm wide: take a thinner wall or a "
       "wider cup"},
      {[](auto& p) { p.pitch = 0.9e-3; },
       "cup blade: neighbours touch at a pitch of 0.9 mm: take fewer blades, a thinner wall or a "
       "steeper angle"},
  };
  for (const auto& fault : faults) {
    auto p = cup();
    fault.spoil(p);
    EXPECT_EQ(shape_error([&] { cup_blade(p); }), fault.message);
  }
}

TEST(ThroatWidth, IsThePassageOfAChannelBladeAndNegativeWhereBladesTouch) {
  const auto p = channel();
  const auto blade = channel_blade(p);
  EXPECT_NEAR(throat_width(blade, p.pitch), p.pitch * std::sin(p.inlet_angle) - 2.0 * p.edge_radius,
              1e-9 * p.width);
  EXPECT_LT(throat_width(blade, 0.5 * p.pitch), 0.0);
  EXPECT_GT(throat_width(blade, 2.0 * p.pitch), 2.0 * throat_width(blade, p.pitch));
}

struct Given {
  std::string file;
  int x, y;  // columns
};
const std::vector<Given> kGiven{{"exact_supersonic_impulse_S1_M2.0_b65.csv", 1, 2},
                                {"exact_supersonic_impulse_S3_M2.5_b70.csv", 1, 2},
                                {"exact_incompressible_cascade_I1_turn83.csv", 1, 2},
                                {"exact_incompressible_cascade_I3_turn31.csv", 1, 2},
                                {"vki_spleen_c1_geometry.csv", 2, 3}};

std::vector<Point> points_in(const Given& given) {
  std::ifstream in(kData + given.file);
  std::vector<Point> points;
  for (std::string line; std::getline(in, line);) {
    if (line.starts_with('#') || line.find("x_cax") != std::string::npos) continue;
    std::vector<std::string> cells;
    for (std::size_t from = 0; from < line.size();) {
      const auto comma = std::min(line.find(',', from), line.size());
      cells.push_back(line.substr(from, comma - from));
      from = comma + 1;
    }
    points.emplace_back(std::stod(cells.at(static_cast<std::size_t>(given.x))),
                        std::stod(cells.at(static_cast<std::size_t>(given.y))));
  }
  return points;
}

struct Foot {
  double s, gap;
};

Foot nearest_on(const BladeSide& side, const Point& p) {
  Foot best{0.0, 1e300};
  const double step = side.length / 500.0;
  const auto improve = [&](double s) {
    s = std::clamp(s, 0.0, side.length);
    if (const double gap = (side.point(s) - p).norm(); gap < best.gap) best = {s, gap};
  };
  for (int i = 0; i <= 500; ++i) improve(i * step);
  for (double h = step; h > 1e-16; h *= 0.6) improve(best.s - h), improve(best.s + h);
  return best;
}

/// Scale and left edge that carry the file's points onto the blade, by least squares on the
/// distance across the curve. The blade is scaled by the extent of its spline, which at a round
/// edge reaches a little beyond the outermost point.
struct Fit {
  double scale, left;
  Point carry(const Point& p) const { return {scale * (p.x() - left), scale * p.y()}; }
};

double largest_gap(const BladeOutline& blade, const std::vector<Point>& points, const Fit& fit,
                   Eigen::Matrix2d& matrix, Point& right) {
  double largest = 0.0;
  matrix.setZero(), right.setZero();
  for (std::size_t i = 0; i < points.size(); i += 7) {
    const Point p = fit.carry(points[i]);
    const auto top = nearest_on(blade.suction(), p), low = nearest_on(blade.pressure(), p);
    const auto& side = top.gap < low.gap ? blade.suction() : blade.pressure();
    const double s = top.gap < low.gap ? top.s : low.s;
    largest = std::max(largest, std::min(top.gap, low.gap));
    const double h = 1e-6 * side.length;
    const Point t = side.point(s + h) - side.point(s - h);
    const Point n = Point(-t.y(), t.x()).normalized();
    const Point row(n.dot(p) / fit.scale, -fit.scale * n.x());
    matrix += row * row.transpose();
    right -= row * n.dot(p - side.point(s));
  }
  return largest;
}

TEST(CoordinatesBlade, GoesThroughEveryGivenPoint) {
  for (const auto& given : kGiven) {
    const auto points = points_in(given);
    ASSERT_GT(points.size(), 400u) << given.file;
    const auto blade = coordinates_blade(kData + given.file, 1.0);
    expect_sound(blade, 1.0);
    double left = 1e300, right = -1e300;
    for (const auto& p : points) left = std::min(left, p.x()), right = std::max(right, p.x());
    Fit fit{1.0 / (right - left), left};
    Eigen::Matrix2d matrix;
    Point rest;
    double gap = 0.0;
    for (int pass = 0; pass < 4; ++pass) {
      gap = largest_gap(blade, points, fit, matrix, rest);
      if (gap < 1e-12) break;
      const Point step = matrix.inverse() * rest;
      fit = {fit.scale + step.x(), fit.left + step.y()};
    }
    EXPECT_LT(gap, 1e-12) << given.file;
    EXPECT_NEAR(fit.scale * (right - left), 1.0, 1e-4) << given.file;
  }
}

TEST(CoordinatesBlade, KeepsCuspsRoundAndBluntEdges) {
  const auto s1 = coordinates_blade(kData + kGiven[0].file, 1.0);
  EXPECT_LT(s1.suction().point(0.0).norm(), 1e-12);
  EXPECT_LT((s1.suction().point(s1.suction().length) - Point(1.0, 0.0)).norm(), 1e-12);
  // Wall angles of the file: 65 degrees from axial at the edges, hence 25 from the plane of
  // rotation.
  EXPECT_NEAR(tangent_angle(s1.suction(), 0.02), 25.0 * kDegree, 1e-6);
  EXPECT_NEAR(tangent_angle(s1.suction(), s1.suction().length - 0.02), 155.0 * kDegree, 1e-6);
  EXPECT_TRUE(s1.suction().corners.empty());

  const auto i1 = coordinates_blade(kData + kGiven[2].file, 1.0);
  EXPECT_LT((i1.suction().point(i1.suction().length) - Point(1.0, 0.0)).norm(), 1e-12);
  EXPECT_NEAR(tangent_angle(i1.suction(), 2e-5), 0.0, 2e-2);  // vertical at the round nose
  // 89 degrees of turning, its convex side on top, with the inlet at 37.3 degrees from axial.
  const auto spleen = coordinates_blade(kData + kGiven[4].file, 1.0);
  EXPECT_GT(spleen.suction().point(0.3).y(), spleen.pressure().point(0.3).y());
  EXPECT_LT(spleen.suction().point(spleen.suction().length).y(), 0.0);
}

class BladeFile : public ::testing::Test {
 protected:
  std::string write(const std::string& text) {
    const auto* info = ::testing::UnitTest::GetInstance()->current_test_info();
    path_ = (std::filesystem::path(::testing::TempDir()) / (std::string(info->name()) + ".csv"))
                .string();
    std::ofstream(path_) << text;
    return path_;
  }
  void TearDown() override { std::filesystem::remove(path_); }
  std::string path_;
};

TEST_F(BladeFile, TakesPlainColumnsEitherWayRoundAndABluntEdge) {
  // A quarter of a flat ring, cut off square at the right and drawn out to a point at the left.
  const std::vector<Point> top{{0, 0},   {0.5, 0.3}, {1, 0.5}, {1.5, 0.6},
                               {2, 0.6}, {2.5, 0.5}, {3, 0.3}};
  const std::vector<Point> low{{0.5, 0.2}, {1, 0.34}, {1.5, 0.4}, {2, 0.38}, {2.5, 0.28}, {3, 0.1}};
  std::string clockwise = "# blade\n", counter = "x_mm,remark,y_mm\n";
  for (const auto& p : top) clockwise += std::to_string(p.x()) + "," + std::to_string(p.y()) + "\n";
  for (auto p = low.rbegin(); p != low.rend(); ++p) {
    clockwise += std::to_string(p->x()) + "," + std::to_string(p->y()) + "\n";
  }
  for (const auto& p : low) {
    counter += std::to_string(p.x()) + ",a," + std::to_string(p.y()) + "\n";
  }
  for (auto p = top.rbegin(); p != top.rend(); ++p) {
    counter += std::to_string(p->x()) + ",b," + std::to_string(p->y()) + "\n";
  }
  counter += "0.5,a,0.2\n";
  for (const auto& text : {clockwise, counter}) {
    const auto blade = coordinates_blade(write(text), 6e-3);
    expect_sound(blade, 6e-3);
    EXPECT_LT((blade.suction().point(0.0) - Point(0.0, 0.0)).norm(), 1e-15);
    const Point end = blade.suction().point(blade.suction().length);  // middle of the cut
    EXPECT_LT((end - Point(6e-3, 0.4e-3)).norm(), 1e-14);
    EXPECT_FALSE(blade.suction().corners.empty());
  }
}

TEST_F(BladeFile, CoarselyGivenRoundEdgeStaysRound) {
  std::string text;  // a stadium bent up a little: half circles of five points
  for (int k = 0; k <= 4; ++k) {
    const double a = (90.0 + 45.0 * k) * kDegree;
    text += std::to_string(std::cos(a)) + "," + std::to_string(std::sin(a)) + "\n";
  }
  text += "4,-0.9\n";
  for (int k = 0; k <= 4; ++k) {
    const double a = (-90.0 + 45.0 * k) * kDegree;
    text += std::to_string(8.0 + std::cos(a)) + "," + std::to_string(std::sin(a)) + "\n";
  }
  text += "4,1.3\n";
  const auto blade = coordinates_blade(write(text), 10e-3);
  EXPECT_NEAR(blade.suction().curvature(0.0), 1.0 / 1e-3, 0.1 / 1e-3);
  EXPECT_NEAR(tangent_angle(blade.suction(), 1e-7), 0.0, 0.05);
}

TEST_F(BladeFile, SaysWhatIsWrongAndWhere) {
  const std::vector<std::pair<std::string, std::string>> faults{
      {"x,z\n0,0\n",
       ":1: the column names must include x and y (and side, if the sides are apart)"},
      {"# note\nx,y\n0,0\n1,oops\n", ":4: y is \"oops\", which is not a number"},
      {"x,y\n0,0\n1\n", ":3: the line has no y value"},
      {"0,0\n1,nan\n", ":2: y is \"nan\", which is not a number"},
      {"side,x,y\ntop,0,0\n", ":2: side is \"top\", it must be suction or pressure"},
      {"side,x,y\nsuction,0,0\nsuction,1,1\n", ": the pressure side has fewer than 2 points"},
      {"0,0\n1,1\n1,1\n0,0\n", ": the outline has 2 different points, it needs 4 or more"},
      {"", ": the outline has 0 different points, it needs 4 or more"},
      {"0,0\n1,0\n2,0\n3,0\n", ": the outline encloses no area"},
      {"0,0\n2,1\n4,0\n4,1\n2,0.2\n0,0.4\n", ":5: the outline crosses itself here and at line 1"},
      {"0,0\n1,-1\n3,0\n1,-0.5\n",
       ": the blade bulges to -y; its convex side must lie towards +y: change the sign of y"},
  };
  for (const auto& [text, message] : faults) {
    const auto file = write(text);
    EXPECT_EQ(shape_error([&] { coordinates_blade(file, 1.0); }), file + message);
  }
  EXPECT_EQ(shape_error([&] { coordinates_blade("no/such.csv", 1.0); }),
            "no/such.csv: the file cannot be opened");
  EXPECT_EQ(shape_error([&] { coordinates_blade(kData + kGiven[0].file, 0.0); }),
            "coordinates blade: the width must be above zero");
}

}  // namespace
}  // namespace falcate::mesh
