#include "post/gnuplot.h"

#include <fmt/format.h>
#include <spawn.h>
#include <sys/wait.h>
#include <unistd.h>

#include <cassert>
#include <cerrno>
#include <cmath>
#include <cstddef>
#include <cstdio>
#include <cstring>
#include <memory>
#include <regex>

#include "post/html.h"
#include "post/output_error.h"
#include "post/svg.h"

extern char** environ;

namespace falcate::post {
namespace {

using Scratch = std::unique_ptr<std::FILE, int (*)(std::FILE*)>;

/// A file without a name, gone once closed.
Scratch scratch_file() {
  Scratch file(std::tmpfile(), &std::fclose);
  if (!file) {
    throw OutputError(
        fmt::format("no room for a temporary file to draw a figure: {}", std::strerror(errno)));
  }
  return file;
}

std::string content(std::FILE* file) {
  std::rewind(file);
  std::string text;
  char block[65536];
  for (std::size_t n = 0; (n = std::fread(block, 1, sizeof block, file)) > 0;)
    text.append(block, n);
  return text;
}

/// Starts `program` with the three files as standard input, output and error; its exit status.
int run_with_files(const std::string& program, std::FILE* in, std::FILE* out, std::FILE* err) {
  posix_spawn_file_actions_t actions;
  posix_spawn_file_actions_init(&actions);
  posix_spawn_file_actions_adddup2(&actions, fileno(in), 0);
  posix_spawn_file_actions_adddup2(&actions, fileno(out), 1);
  posix_spawn_file_actions_adddup2(&actions, fileno(err), 2);
  std::string name = program;
  char* arguments[] = {name.data(), nullptr};
  pid_t child = 0;
  const int error = posix_spawnp(&child, program.c_str(), &actions, nullptr, arguments, environ);
  posix_spawn_file_actions_destroy(&actions);
  if (error != 0) {
    throw OutputError(
        fmt::format("cannot start '{}', which draws the line figures of the report: {}; install it "
                    "(Debian: apt-get install gnuplot-nox)",
                    program, std::strerror(error)));
  }
  int status = 0;
  while (waitpid(child, &status, 0) < 0 && errno == EINTR) {
  }
  return status;
}

std::string run_gnuplot(const std::string& program, const std::string& script) {
  const Scratch in = scratch_file(), out = scratch_file(), err = scratch_file();
  const bool written = std::fwrite(script.data(), 1, script.size(), in.get()) == script.size();
  if (!written || std::fflush(in.get()) != 0) {
    throw OutputError(
        fmt::format("no room for a temporary file to draw a figure: {}", std::strerror(errno)));
  }
  std::rewind(in.get());
  const int status = run_with_files(program, in.get(), out.get(), err.get());
  std::string svg = content(out.get());
  if (status != 0 || svg.find("</svg>") == std::string::npos) {
    throw OutputError(fmt::format("'{}' could not draw a figure: {}", program, content(err.get())));
  }
  return svg;
}

/// Stand-ins for the page's colours, since gnuplot knows fixed ones only: grey levels 1 to 5.
std::string colour(int number) {
  assert(number >= 1 && number <= 5);
  return fmt::format("rgb '#{0:02x}{0:02x}{0:02x}'", number);
}
constexpr int faint_colour = 4, ink_colour = 5;

std::string with_page_colours(std::string svg) {
  const std::string_view colours[] = {svg::accent, svg::second, svg::third, svg::faint, svg::ink};
  int number = 0;
  for (const auto c : colours) {
    ++number;
    const std::regex stand_in(fmt::format("rgb\\( *{0}, *{0}, *{0}\\)", number));
    svg = std::regex_replace(svg, stand_in, std::string(c));
  }
  return svg;
}

std::string replaced(std::string text, std::string_view from, std::string_view to) {
  for (std::size_t at = 0; (at = text.find(from, at)) != std::string::npos; at += to.size()) {
    text.replace(at, from.size(), to);
  }
  return text;
}

/// An element to stand in a page beside others: own head, own names, the page's colours and fonts.
std::string inline_element(const std::string& gnuplot_svg, const LineFigure& figure,
                           const std::string& id) {
  static constexpr std::string_view canvas = "<g id=\"gnuplot_canvas\">";
  const std::size_t start = gnuplot_svg.find(canvas);
  std::string body = gnuplot_svg.substr(start == std::string::npos ? 0 : start + canvas.size());
  body = "<g>" + body.substr(0, body.rfind("</svg>"));
  static const std::regex filters("<filter[\\s\\S]*?</filter>");
  static const std::regex empty_groups("<g fill=\"none\"[^>]*>\\s*</g>\\s*");
  static const std::regex fonts("font-family=\"[^\"]*\"");
  // White discs cleared round the points would hide short error bars, and shine on a dark page.
  static const std::regex discs("<use [^>]*color='white'/>");
  body = std::regex_replace(body, discs, "");
  body = std::regex_replace(body, filters, "");
  body = std::regex_replace(body, empty_groups, "");
  body = std::regex_replace(body, fonts, "");
  body = replaced(body, "id='gp", "id='" + id + "gp");
  body = replaced(body, "'#gp", "'#" + id + "gp");
  const std::string label = escape_html(figure.label);
  return fmt::format(
             "<svg xmlns=\"http://www.w3.org/2000/svg\" "
             "xmlns:xlink=\"http://www.w3.org/1999/xlink\" "
             "viewBox=\"0 0 {0} {1}\" width=\"{0}\" height=\"{1}\" role=\"img\" aria-label=\"{2}\" "
             "font-family=\"system-ui,sans-serif\"><title>{2}</title>\n",
             figure.width, figure.height, label) +
         with_page_colours(body) + "</svg>\n";
}

std::string data_block(const Curve& curve, std::size_t number) {
  assert(curve.x.size() == curve.y.size());
  std::string text = fmt::format("$curve{} << END_OF_DATA\n", number);
  for (std::size_t i = 0; i < curve.x.size(); ++i) {
    const double error = i < curve.error.size() ? curve.error[i] : 0.0;
    if (!std::isfinite(curve.x[i]) || !std::isfinite(curve.y[i])) {
      text += "\n";  // a gap in the line
    } else {
      text += fmt::format("{:.6g} {:.6g} {:.6g}\n", curve.x[i], curve.y[i],
                          std::isfinite(error) ? error : 0.0);
    }
  }
  return text + "END_OF_DATA\n";
}

bool drawable(const Curve& curve) {
  for (std::size_t i = 0; i < curve.x.size(); ++i) {
    if (std::isfinite(curve.x[i]) && std::isfinite(curve.y[i])) return true;
  }
  return false;
}

std::string plot_clause(const Curve& curve, std::size_t number) {
  static const char* const styles[] = {"lines", "linespoints", "yerrorbars"};
  const auto title =
      curve.title.empty() ? std::string("notitle") : "title " + gnuplot_quoted(curve.title);
  return fmt::format("$curve{} using {} with {} lc {} lw 2 pt 7 ps 0.45{}{} {}", number,
                     curve.style == LineStyle::error_bars ? "1:2:3" : "1:2",
                     styles[static_cast<int>(curve.style)], colour(curve.colour),
                     curve.dashed ? " dt 2" : "", curve.second_axis ? " axes x1y2" : "", title);
}

std::string mark_commands(const Mark& mark) {
  std::string out;
  const std::string style = fmt::format("nohead back lc {} lw 1 dt 3", colour(faint_colour));
  if (mark.x)
    out += fmt::format("set arrow from {0:.6g},graph 0 to {0:.6g},graph 1 {1}\n", *mark.x, style);
  if (mark.y)
    out += fmt::format("set arrow from graph 0,first {0:.6g} to graph 1,first {0:.6g} {1}\n",
                       *mark.y, style);
  if (mark.words.empty()) return out;
  const std::string place = mark.x ? fmt::format("{:.6g}, graph {} right offset -0.6,0", *mark.x,
                                                 mark.words_high ? 0.94 : 0.06)
                            : mark.y
                                ? fmt::format("graph 0.01, first {:.6g} left offset 0,0.6", *mark.y)
                                : std::string("graph 0.5, graph 0.5 center");
  return out + fmt::format("set label {} at {} tc {} front\n", gnuplot_quoted(mark.words), place,
                           colour(ink_colour));
}

std::string axes_commands(const LineFigure& figure) {
  const std::string ink = colour(ink_colour);
  std::string out = fmt::format(
      "set border 3 lc {0}\nset tics nomirror textcolor {0} scale 0.6\n"
      "set grid lc {1} lw 0.5 dt 3\nset key textcolor {0} samplen 2 spacing 1.25 outside top "
      "center "
      "horizontal\nset xlabel {2} tc {0}\nset ylabel {3} tc {0}\nset xrange [{4}:{5}]\n",
      ink, colour(faint_colour), gnuplot_quoted(figure.x_title), gnuplot_quoted(figure.y_title),
      figure.x_least ? fmt::format("{:.6g}", *figure.x_least) : "*",
      figure.x_greatest ? fmt::format("{:.6g}", *figure.x_greatest) : "*");
  if (figure.log_y) out += "set logscale y\nset format y '%.0e'\n";
  if (figure.y_from_zero) out += "set yrange [*<0:*]\nset y2range [*<0:*]\n";
  if (!figure.second_title.empty()) {
    out += fmt::format("set border 11\nset y2tics textcolor {0}\nset y2label {1} tc {0}\n", ink,
                       gnuplot_quoted(figure.second_title));
  }
  return out;
}

std::string script_of(const LineFigure& figure, const std::string& id) {
  std::string script =
      fmt::format("set terminal svg size {},{} noenhanced font 'Helvetica,14' name {}\n",
                  figure.width, figure.height, gnuplot_quoted(id));
  script += axes_commands(figure);
  for (const Mark& mark : figure.marks) script += mark_commands(mark);
  std::string plot;
  for (std::size_t i = 0; i < figure.curves.size(); ++i) {
    if (!drawable(figure.curves[i])) continue;
    script += data_block(figure.curves[i], i);
    plot += (plot.empty() ? "plot " : ", ") + plot_clause(figure.curves[i], i);
  }
  if (plot.empty()) throw OutputError("nothing to draw: no curve holds a finite number");
  return script + plot + "\n";
}

}  // namespace

std::string gnuplot_quoted(std::string_view words) {
  std::string out = "'";
  for (const char c : words) {
    const auto code = static_cast<unsigned char>(c);
    if (c == '\'')
      out += "''";
    else if (code < 0x20 || code == 0x7f)
      out += ' ';
    else
      out += c;
  }
  return out + "'";
}

std::string line_figure(const LineFigure& figure, const std::string& id,
                        const std::string& gnuplot_program) {
  return inline_element(run_gnuplot(gnuplot_program, script_of(figure, id)), figure, id);
}

}  // namespace falcate::post
