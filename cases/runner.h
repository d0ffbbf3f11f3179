/// Runs a case: mesh, every operating point, results. Points are dealt out in fixed chains of
/// neighbouring speeds; a chain is solved in order, each point from the one before it, and chains
/// run side by side. The chains do not depend on the number of threads, so neither do the results.
/// Errors: mesh::MeshError, FolderError, post::OutputError. A point that cannot be solved is
/// recorded with its reason and the others go on.
#pragma once
#include <string>
#include <utility>
#include <vector>

#include "cases/case.h"
#include "cases/run_observer.h"

namespace falcate::cases {

struct RunSummary {
  int points = 0, failed = 0, kept = 0;
};

RunSummary run_case(const Case& input, const std::string& folder, int threads,
                    RunObserver& observer);

/// Writes report.html of a finished (or partly finished) run anew. Returns the number of points in
/// it.
int rewrite_report(const std::string& folder);

/// First and one-past-last point of each chain.
std::vector<std::pair<int, int>> chains(int points);

}  // namespace falcate::cases
