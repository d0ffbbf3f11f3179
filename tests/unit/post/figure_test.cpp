// Figures of invented data; hostile words must stay words.
#include <gtest/gtest.h>

#include <cstdlib>
#include <limits>
#include <regex>
#include <set>

#include "post/figure_cascade.h"
#include "post/figure_curves.h"
#include "post/figure_triangle.h"
#include "post/flow_file.h"
#include "post/gnuplot.h"
#include "post/output_error.h"
#include "post/svg.h"
#include "tests/unit/post/invented_report.h"

namespace falcate::post {
namespace {

const std::string hostile =
    "</svg><script>alert('x')</script> & \"q\" `touch x` $(id) @m \\ %s\nquit\nset output 'x'";

void expect_harmless(const std::string& svg) {
  EXPECT_EQ(svg.find("<script"), std::string::npos);
  EXPECT_EQ(svg.find("</svg>"), svg.rfind("</svg>"));
  EXPECT_NE(svg.find("&lt;script&gt;"), std::string::npos);
}

LineFigure two_points(const std::string& words) {
  LineFigure figure;
  figure.label = figure.x_title = figure.y_title = words;
  Curve curve;
  curve.title = words;
  curve.x = {0.0, 1.0};
  curve.y = {1.0, 2.0};
  figure.curves = {curve};
  figure.marks = {{0.5, {}, words}};
  return figure;
}

TEST(LineFigure, HostileWordsStayWords) {
  const std::string svg = line_figure(two_points(hostile), "hostile");
  expect_harmless(svg);
  EXPECT_NE(svg.find("`touch x` $(id) @m \\ %s quit set output"), std::string::npos);
}

TEST(LineFigure, QuotedWordsAreOneLiteral) {
  EXPECT_EQ(gnuplot_quoted("it's\nso"), "'it''s so'");
  EXPECT_EQ(gnuplot_quoted(""), "''");
}

TEST(LineFigure, TakesThePagesColoursAndItsOwnNames) {
  const std::string svg = line_figure(two_points("plain"), "mine");
  EXPECT_NE(svg.find("var(--accent,"), std::string::npos);
  EXPECT_EQ(svg.find("'gp"), std::string::npos);
  EXPECT_EQ(svg.find("'#gp"), std::string::npos);
  EXPECT_NE(svg.find("id='minegp"), std::string::npos);
}

TEST(LineFigure, MissingGnuplotSaysWhatToInstall) {
  try {
    line_figure(two_points("plain"), "x", "no-such-gnuplot");
    FAIL() << "no error";
  } catch (const OutputError& error) {
    EXPECT_STREQ(error.what(),
                 "cannot start 'no-such-gnuplot', which draws the line figures of the report: No "
                 "such file or directory; install it (Debian: apt-get install gnuplot-nox)");
  }
}

TEST(LineFigure, ProgramThatDrawsNothingIsAnError) {
  try {
    line_figure(two_points("plain"), "x", "true");
    FAIL() << "no error";
  } catch (const OutputError& error) {
    EXPECT_STREQ(error.what(), "'true' could not draw a figure: ");
  }
}

TEST(LineFigure, NothingFiniteIsAnError) {
  LineFigure figure = two_points("plain");
  figure.curves[0].y = {std::numeric_limits<double>::quiet_NaN(), std::nan("")};
  try {
    line_figure(figure, "x");
    FAIL() << "no error";
  } catch (const OutputError& error) {
    EXPECT_STREQ(error.what(), "nothing to draw: no curve holds a finite number");
  }
}

class CascadePicture : public testing::Test {
 protected:
  mesh::PassageMesh mesh_ = invented::passage(36);  // 7776 cells, the size of a finest mesh
  CascadeView view_{&mesh_, invented::blade(), 3, true, 470.0, "pic", hostile};
  std::vector<double> mach_ = mach_numbers(invented::flow(mesh_, 1.2), 1.4);
};

TEST_F(CascadePicture, IsSmallHarmlessAndFull) {
  const std::string svg = field_picture(view_, mach_, {"Mach number " + hostile, 1.2, hostile});
  expect_harmless(svg);
  EXPECT_LT(svg.size(), 150000u);
  EXPECT_EQ(svg.find("nan"), std::string::npos);
  // The window is three pitches and the blade high, the passage rises over two more: with fewer
  // copies than this a corner would stay white.
  const std::regex copies("href=\"#picb0\"");
  EXPECT_GE(std::distance(std::sregex_iterator(svg.begin(), svg.end(), copies), {}), 5);
}

TEST_F(CascadePicture, ValueThatIsNoNumberIsRefused) {
  mach_[11] = std::nan("");
  EXPECT_THROW(field_picture(view_, mach_, {"Mach number", 1.0, ""}), OutputError);
}

TEST_F(CascadePicture, UniformFieldGetsOneBand) {
  const std::string svg =
      field_picture(view_, std::vector<double>(mach_.size(), 0.5), {"Mach number", {}, ""});
  EXPECT_NE(svg.find(">0.5</text>"), std::string::npos);
  EXPECT_EQ(svg.find("picb1\""), std::string::npos);
}

TEST_F(CascadePicture, MeshIsDrawnSmall) {
  EXPECT_LT(mesh_picture(view_).size(), 400000u);
  EXPECT_LT(edge_mesh_picture(view_).size(), 200000u);
}

/// Ends of the arrow shafts of one colour, in drawing order.
std::vector<std::array<double, 4>> arrows(const std::string& svg, std::string_view colour) {
  const std::regex head("<path d=\"M([-0-9.]+) ([-0-9.]+)L[^\"]*\" fill=\"none\" stroke=\"" +
                        std::regex_replace(std::string(colour), std::regex("[()]"), "\\$&") +
                        "\" stroke-width=\"2.2\"/><path d=\"M([-0-9.]+) ([-0-9.]+)");
  std::vector<std::array<double, 4>> out;
  for (std::sregex_iterator it(svg.begin(), svg.end(), head), end; it != end; ++it) {
    out.push_back(
        {std::stod((*it)[1]), std::stod((*it)[2]), std::stod((*it)[3]), std::stod((*it)[4])});
  }
  return out;
}

TEST(TriangleFigure, ArrowsAreToScaleAndClose) {
  const auto inlet = inlet_triangle(400.0, 20.0, 150.0);
  const std::string svg = triangle_figure(inlet, StreamState{150.0, 0.8, 250.0, 0, 0, 0}, hostile);
  expect_harmless(svg);
  const auto c = arrows(svg, svg::accent), w = arrows(svg, svg::second), u = arrows(svg, svg::ink);
  ASSERT_EQ(c.size(), 2u);
  ASSERT_EQ(w.size(), 2u);
  ASSERT_EQ(u.size(), 2u);
  const auto length = [](const auto& a) { return std::hypot(a[2] - a[0], a[3] - a[1]); };
  const double scale = length(u[0]) / 150.0;
  EXPECT_NEAR(length(c[0]), 400.0 * scale, 0.2);
  EXPECT_NEAR(length(w[0]), inlet.relative_velocity * scale, 0.2);
  EXPECT_NEAR(length(w[1]), 250.0 * scale, 0.2);
  // c2 by the law of cosines: u^2 + w2^2 + 2 u w2 cos(beta2).
  EXPECT_NEAR(length(c[1]),
              scale * std::sqrt(150.0 * 150.0 + 250.0 * 250.0 +
                                2.0 * 150.0 * 250.0 * std::cos(150.0 * 3.14159265358979 / 180.0)),
              0.2);
  for (std::size_t k = 0; k < 2; ++k) {
    EXPECT_NEAR(c[k][2], w[k][2], 1e-9);
    EXPECT_NEAR(c[k][3], w[k][3], 1e-9);
    EXPECT_NEAR(u[k][2], w[k][0], 1e-9);
  }
}

TEST(TriangleFigure, WheelAtRestIsDrawn) {
  const std::string svg = triangle_figure(inlet_triangle(400.0, 20.0, 0.0), {}, "at rest");
  EXPECT_EQ(svg.find("nan"), std::string::npos);
  EXPECT_EQ(arrows(svg, svg::accent).size(), 1u);
}

TEST_F(CascadePicture, LineIsExplainedOnlyWhereThereIsOne) {
  const auto words = [&](double level) {
    return field_picture(view_, mach_, {"Mach number", level, "the line"}).find("the line</text>");
  };
  EXPECT_NE(words(1.2), std::string::npos);
  EXPECT_EQ(words(9.0), std::string::npos);
}

TEST(Curves, SpeedFiguresMarkWhatTheyAreMadeFor) {
  const auto report = invented::report(2, 6);
  const std::string efficiency = efficiency_figure(*report.input.speed_line, "e");
  EXPECT_EQ(efficiency.find("color='white'/>"), std::string::npos);
  EXPECT_NE(efficiency.find("highest computed 23\u202f000 rpm"), std::string::npos);
  const std::string torque = torque_figure(*report.input.speed_line, "t");
  EXPECT_NE(torque.find("runaway 168\u202f000 rpm"), std::string::npos);
  EXPECT_NE(torque.find("stall 60.7 mN m"), std::string::npos);
}

}  // namespace
}  // namespace falcate::post
