/// Tables of the report, as HTML; every text from outside is escaped.
#pragma once
#include <string>

#include "post/report.h"

namespace falcate::post {

/// The case as derived: label and value.
std::string derived_table(const ReportInput& input);

/// Every figure of every point that stands, with its error bar; a few points a table so that it
/// fits a sheet of paper. Remarks on a point stand below the table that holds it.
std::string figures_tables(const ReportInput& input);

/// Points that failed and why; empty where none did.
/// Shaft power and losses of a wheel's point, W and per cent of the supply; nothing for a rig.
std::string power_table(const PointResult& point);
std::string failures_list(const ReportInput& input);

/// How each point was solved: cells, state, residual drop, steps.
std::string solution_table(const ReportInput& input);

}  // namespace falcate::post
