#pragma once
#include <iosfwd>
#include <string>
#include <string_view>
#include <vector>

#include "db/queries/run_record.h"

// Runs and readings as CSV (RFC 4180; FORMATS.md, "ledger export").
namespace probewright::text {

/// One line: cells with a comma, a quote or a line feed are quoted.
std::string csv_line(const std::vector<std::string>& cells);

void write_runs_head(std::ostream& out);
void write_run_line(std::ostream& out, const db::RunRecord& run);
void write_readings_head(std::ostream& out);
/// One line for each reading of the run.
void write_reading_lines(std::ostream& out, const db::RunRecord& run);

}  // namespace probewright::text
