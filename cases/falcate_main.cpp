/// The command line. Exit status: 0 all well, 2 bad case file or arguments, 3 some points failed,
/// 4 anything else.
#include <fmt/format.h>
#include <unistd.h>

#include <CLI/CLI.hpp>
#include <algorithm>
#include <exception>
#include <filesystem>
#include <iostream>
#include <new>
#include <set>
#include <string>
#include <thread>
#include <vector>

#include "cases/case_file.h"
#include "cases/console_progress.h"
#include "cases/derived_state.h"
#include "cases/key_reference.h"
#include "cases/results_folder.h"
#include "cases/runner.h"

namespace {

using namespace falcate::cases;

constexpr int all_well = 0, bad_input = 2, points_failed = 3, other_trouble = 4;

struct Arguments {
  std::vector<std::string> case_files;
  std::string out, folder;
  int threads = 0;
  bool quiet = false, markdown = false;
};

void say_error(const std::string& text) { std::cerr << text << std::endl; }

/// Every case that can be read; says what is wrong with the others.
std::vector<Case> read_cases(const std::vector<std::string>& files, bool& sound) {
  std::vector<Case> cases;
  for (const std::string& file : files) {
    try {
      cases.push_back(read_case(file));
    } catch (const CaseError& error) {
      sound = false;
      say_error(error.what());
    }
  }
  return cases;
}

int check(const Arguments& arguments) {
  bool sound = true;
  bool first = true;
  for (const Case& input : read_cases(arguments.case_files, sound)) {
    const DerivedState state = derived_state(input, make_blade_row(input), operating_points(input));
    std::cout << (first ? "" : "\n\n") << derived_text(input, state);
    first = false;
  }
  return sound ? all_well : bad_input;
}

std::string folder_of(const Case& input, const Arguments& arguments) {
  const std::string name = std::filesystem::path(input.file).stem().string();
  if (arguments.out.empty()) return "results-" + name;
  if (arguments.case_files.size() == 1) return arguments.out;
  return (std::filesystem::path(arguments.out) / name).string();
}

int run_one(const Case& input, const Arguments& arguments) {
  const ProgressStyle style = arguments.quiet           ? ProgressStyle::quiet
                              : ::isatty(STDOUT_FILENO) ? ProgressStyle::live
                                                        : ProgressStyle::plain;
  ConsoleProgress progress(std::cout, style);
  const std::string folder = folder_of(input, arguments);
  if (!arguments.quiet) std::cout << input.title << std::endl;
  const int threads = arguments.threads > 0
                          ? arguments.threads
                          : static_cast<int>(std::max(1U, std::thread::hardware_concurrency()));
  const RunSummary summary = run_case(input, folder, threads, progress);
  if (summary.failed > 0)
    say_error(fmt::format("{} of {} points failed; the reasons are in {}/log.txt", summary.failed,
                          summary.points, folder));
  if (!arguments.quiet)
    std::cout << "Report: " << (std::filesystem::path(folder) / "report.html").string()
              << std::endl;
  return summary.failed > 0 ? points_failed : all_well;
}

/// Runs `work` and turns what it throws into words and an exit status.
template <class Work>
int guarded(Work work) {
  try {
    return work();
  } catch (const CaseError& error) {
    say_error(error.what());
    return bad_input;
  } catch (const FolderError& error) {
    say_error(error.what());
    return bad_input;
  } catch (const std::bad_alloc&) {
    say_error("falcate: not enough memory; ask for fewer cells");
  } catch (const std::exception& error) {
    say_error(fmt::format("falcate: {}", error.what()));
  } catch (...) {
    say_error("falcate: stopped for an unknown reason");
  }
  return other_trouble;
}

int run(const Arguments& arguments) {
  bool sound = true;
  const std::vector<Case> cases = read_cases(arguments.case_files, sound);
  std::set<std::string> folders;
  for (const Case& input : cases)
    if (!folders.insert(folder_of(input, arguments)).second) {
      say_error(
          fmt::format("{}: another case has the same name; run them one by one, each with "
                      "its own --out",
                      input.file));
      sound = false;
    }
  if (!sound) return bad_input;
  int worst = all_well;
  for (const Case& input : cases)
    worst = std::max(worst, guarded([&] { return run_one(input, arguments); }));
  return worst;
}

int report(const Arguments& arguments) {
  const int points = rewrite_report(arguments.folder);
  std::cout << fmt::format("Report of {} point{}: {}\n", points, points == 1 ? "" : "s",
                           (std::filesystem::path(arguments.folder) / "report.html").string());
  return all_well;
}

int keys(const Arguments& arguments) {
  std::cout << (arguments.markdown ? key_reference_markdown() : key_reference_text());
  return all_well;
}

int command_line(int argc, char** argv) {
  CLI::App app("Computes the flow through the blades of small gas-driven impulse wheels.",
               "falcate");
  app.set_version_flag("--version", std::string("falcate ") + FALCATE_VERSION);
  app.require_subcommand(1);
  Arguments arguments;
  auto* check_command =
      app.add_subcommand("check", "Read case files and print what follows, without solving");
  check_command->add_option("CASE", arguments.case_files, "Case files")->required();
  auto* run_command = app.add_subcommand("run", "Do all that the case files ask for");
  run_command->add_option("CASE", arguments.case_files, "Case files")->required();
  run_command->add_option("--out", arguments.out, "Folder of the results (results-CASE)");
  run_command->add_option("--threads", arguments.threads, "Threads (all of the machine)")
      ->check(CLI::Range(1, 1024));
  run_command->add_flag("--quiet", arguments.quiet, "Say nothing but errors");
  auto* report_command = app.add_subcommand("report", "Write the report of a run anew");
  report_command->add_option("DIR", arguments.folder, "Folder of the results")->required();
  auto* keys_command = app.add_subcommand("keys", "List the keys of a case file");
  keys_command->add_flag("--markdown", arguments.markdown, "As the page docs/case-file.md");
  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& error) {
    return app.exit(error) == 0 ? all_well : bad_input;
  }
  if (*check_command) return check(arguments);
  if (*run_command) return run(arguments);
  if (*report_command) return report(arguments);
  return keys(arguments);
}

}  // namespace

int main(int argc, char** argv) {
  return guarded([&] { return command_line(argc, argv); });
}
