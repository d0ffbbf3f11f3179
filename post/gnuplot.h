/// Line figures by gnuplot, run as a child process with its SVG terminal.
///
/// The figure is described here, and only numbers and quoted, newline-free text without markup
/// reach the script, which goes in through standard input: no shell sees any of it.
/// Errors: `OutputError` where gnuplot is missing or refuses the figure.
#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace falcate::post {

enum class LineStyle { line, line_with_points, error_bars };

struct Curve {
  std::string title;                ///< in the key; empty: not in the key
  std::vector<double> x, y, error;  ///< `error` half-widths for error_bars, else empty
  LineStyle style = LineStyle::line;
  int colour = 1;  ///< 1 accent, 2 second, 3 third, 4 faint
  bool dashed = false;
  bool second_axis = false;  ///< against the right axis
};

/// A marked place with words beside it; a missing coordinate makes a line across the figure.
struct Mark {
  std::optional<double> x, y;
  std::string words;
  bool words_high = false;  ///< beside a line across: near the top, else near the bottom
};

struct LineFigure {
  std::string label;  ///< read out in place of the picture
  std::string x_title, y_title, second_title;
  std::vector<Curve> curves;
  std::vector<Mark> marks;
  bool log_y = false, y_from_zero = false;
  std::optional<double> x_least, x_greatest;
  int width = 720, height = 400;  ///< px
};

/// One inline <svg> element; `id` is unique in the page (letters and digits).
std::string line_figure(const LineFigure& figure, const std::string& id,
                        const std::string& gnuplot_program = "gnuplot");

/// A gnuplot string literal that stands for exactly these words (control characters become spaces).
std::string gnuplot_quoted(std::string_view words);

}  // namespace falcate::post
