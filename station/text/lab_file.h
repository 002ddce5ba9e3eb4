#pragma once
#include <string>

#include "station/base/csv.h"
#include "station/measure/lab.h"
#include "station/text/json_out.h"

namespace probewright::text {

/// Reads a lab's own CSV file. Errors: all faults of the file, with line and column.
ResultOrFaults<CsvTable> read_lab_file(const std::string& file, const CsvRules& rules);

/// The same problem, with the file as its place where it names none.
Problem in_file(Problem problem, const std::string& file);

/// {"value", "expanded_uncertainty", "unit"}
Json json_of(const measure::Figure& figure);
/// Cells for a table: value and expanded uncertainty with the same decimals, and the unit.
std::vector<std::string> cells_of(std::string_view name, const measure::Figure& figure);

}  // namespace probewright::text
