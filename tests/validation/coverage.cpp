#include "tests/validation/coverage.h"

#include <fmt/format.h>
#include <omp.h>

#include <algorithm>
#include <atomic>
#include <cmath>
#include <cstddef>
#include <exception>
#include <mutex>
#include <thread>

#include "post/error_bar.h"

namespace falcate::validation {

namespace {

/// One condition of one case.
struct Job {
  std::size_t of_case;
  int condition;
};

class Crew {
 public:
  explicit Crew(const std::vector<ExactCase>& cases) {
    for (std::size_t i = 0; i < cases.size(); ++i) {
      solved_.push_back({&cases[i], std::vector<Condition>(at(cases[i].conditions))});
      for (int k = 0; k < cases[i].conditions; ++k) jobs_.push_back({i, k});
    }
  }
  std::vector<SolvedCase> solve(int workers) {
    {
      std::vector<std::jthread> crew;
      for (int i = 0; i < workers; ++i) crew.emplace_back([this] { work(); });
    }
    if (failure_) std::rethrow_exception(failure_);
    return std::move(solved_);
  }

 private:
  static std::size_t at(int i) { return static_cast<std::size_t>(i); }
  void work() {
    omp_set_num_threads(1);
    for (std::size_t j = next_++; j < jobs_.size(); j = next_++) try {
        SolvedCase& solved = solved_[jobs_[j].of_case];
        solved.conditions[at(jobs_[j].condition)] = solved.exact->solve(jobs_[j].condition);
      } catch (...) {
        const std::lock_guard lock(guard_);
        failure_ = std::current_exception();
        next_ = jobs_.size();
      }
  }

  std::vector<Job> jobs_;
  std::vector<SolvedCase> solved_;
  std::atomic<std::size_t> next_ = 0;
  std::mutex guard_;
  std::exception_ptr failure_;
};

}  // namespace

std::vector<SolvedCase> solve_cases(const std::vector<ExactCase>& cases, int workers) {
  return Crew(cases).solve(workers);
}

double half_width(const Finding& finding) {
  return post::error_bar(finding.found).half_width + finding.spread;
}

double true_error(const Finding& finding) { return std::abs(finding.found.back() - finding.exact); }

double Coverage::median() const {
  const std::size_t n = widths.size();
  return 0.5 * (widths[(n - 1) / 2] + widths[n / 2]);
}

Coverage coverage(const std::vector<const Finding*>& findings) {
  Coverage c;
  for (const Finding* finding : findings) {
    const double bar = half_width(*finding), error = true_error(*finding);
    ++c.figures;
    if (error <= bar) ++c.inside;
    c.widths.push_back(bar / error);
  }
  std::sort(c.widths.begin(), c.widths.end());
  return c;
}

namespace {

using Findings = std::vector<const Finding*>;

std::string line(const std::string& words, const Findings& findings) {
  const Coverage c = coverage(findings);
  return fmt::format("| {} | {} | {:.1f} % | {:.2f} | {:.2f} |\n", words, c.figures,
                     100.0 * c.share(), c.median(), c.worst());
}

const char* const head =
    "| figures | exact value within the bar | bar / true error, median | true error / bar, worst "
    "|\n|---|---|---|---|---|\n";

const char* const intro =
    "## Error bars\n\n"
    "Do the error bars hold? Flows with exact answers, each under ten conditions (size of the "
    "mesh,\n"
    "kind of cells, distance of the planes, Mach number, gas, scale), are solved on three nested\n"
    "meshes as every operating point is; the bars come from the same function. An error bar holds\n"
    "where the exact value lies within it, and is worth having where it is not much wider than "
    "the\n"
    "true error.\n\n"
    "```sh\n"
    "build/error_bar_coverage --out docs/validation.md      # minutes\n"
    "```\n\n";

/// Conditions with figures whose exact value lies outside the bar, a line each.
std::string misses(const std::vector<SolvedCase>& cases) {
  std::string text;
  for (const SolvedCase& one : cases)
    for (const Condition& condition : one.conditions) {
      std::string outside;
      double worst = 0.0;
      for (const Finding& f : condition.findings) {
        if (true_error(f) <= half_width(f)) continue;
        outside += (outside.empty() ? "" : ", ") +
                   fmt::format("{} {:.4g}{}{} (exact {:.4g})", f.figure, f.found.back(),
                               f.unit.empty() ? "" : " ", f.unit, f.exact);
        worst = std::max(worst, true_error(f) / half_width(f));
      }
      if (!outside.empty())
        text += fmt::format("| {}: {} | {} | {:.2f} |\n", one.exact->name, condition.words, outside,
                            worst);
    }
  if (text.empty()) return text;
  return "\nOutside the bar:\n\n| condition | figures | true error / bar, worst "
         "|\n|---|---|---|\n" +
         text +
         "\nThree meshes tell of their own convergence alone. Where a mesh too coarse for a blade "
         "lets the\nflow leave it, the finer ones start from that flow and may stay with it: they "
         "then converge to\nan answer with a loss near nought that is not the exact one.\n";
}

}  // namespace

std::string coverage_section(const std::vector<SolvedCase>& cases) {
  std::string text = intro, sources;
  Findings all;
  std::vector<std::pair<std::string, Findings>> by_figure;
  text += "| flow " + std::string(head);
  for (const SolvedCase& one : cases) {
    Findings findings;
    for (const Condition& condition : one.conditions)
      for (const Finding& finding : condition.findings) {
        findings.push_back(&finding);
        auto row = std::find_if(by_figure.begin(), by_figure.end(),
                                [&](const auto& r) { return r.first == finding.figure; });
        if (row == by_figure.end()) row = by_figure.insert(row, {finding.figure, {}});
        row->second.push_back(&finding);
      }
    text += line(one.exact->name + ": " + one.exact->words, findings);
    sources += fmt::format("- {}: {}.\n", one.exact->name, one.exact->source);
    all.insert(all.end(), findings.begin(), findings.end());
  }
  text += line("all", all) + "\n| figure " + head;
  for (const auto& [figure, findings] : by_figure) text += line(figure, findings);
  return text + misses(cases) + "\nSources of the exact answers:\n\n" + sources;
}

std::string coverage_list(const std::vector<SolvedCase>& cases) {
  std::string text = "case,condition,steady,figure,exact,coarse,medium,fine,error,half_width\n";
  for (const SolvedCase& one : cases)
    for (std::size_t i = 0; i < one.conditions.size(); ++i)
      for (const Finding& f : one.conditions[i].findings) {
        text += fmt::format("{},{},{},\"{}\",{:.10g}", one.exact->name, i,
                            one.conditions[i].steady ? "yes" : "no", f.figure, f.exact);
        for (const double value : f.found) text += fmt::format(",{:.10g}", value);
        text += fmt::format(",{:.4g},{:.4g}\n", true_error(f), half_width(f));
      }
  return text;
}

}  // namespace falcate::validation
