#pragma once
#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "station/base/result.h"
#include "station/base/times.h"
#include "station/base/zone.h"

namespace probewright::pages {

/// Probes of one shift by their last verdict in it. tested = passed + failed + voided.
struct ShiftCounts {
  int tested = 0;
  int passed = 0;
  int passed_first_time = 0;  ///< those whose first production verdict was a pass
  int failed = 0;
  int voided = 0;  ///< no verdict: only void runs
};

struct ShiftPerson {
  std::string name, role;
};

struct FailingCheck {
  std::string name;          ///< in words, "dark current"
  int runs = 0;              ///< failed runs in which it lay outside its acceptance limits
  std::string likely_cause;  ///< the commonest; may be empty
};

/// One nest, counted in runs: a probe tested again counts again.
struct NestRow {
  std::string name;
  int runs = 0, passed = 0, failed = 0, voided = 0;
  std::optional<double> mean_cycle_s;   ///< of the runs with a verdict
  std::string commonest_failing_check;  ///< may be empty
};

/// One reading over the shift, in the order of the runs.
struct RunChart {
  std::string name;                                ///< "red centroid"
  std::string unit;                                ///< "nm"
  std::vector<double> values;                      ///< NaN: no reading in that run
  std::optional<double> lower_limit, upper_limit;  ///< acceptance limits
  std::string note = {};                           ///< a sentence below; may be empty
};

/// Runs that ended in one hour or day.
struct StretchRow {
  std::string begin;  ///< "2026-12-01 06:00", "2026-12-01"
  int passed = 0, failed = 0, voided = 0;
};

/// Production runs: a probe tested again counts again.
struct ShiftRuns {
  int all = 0, passed = 0, failed = 0, voided = 0;
};

/// All that the page says; nothing is looked up.
struct ShiftReport {
  std::string station;
  std::string lot;  ///< the report is of this lot alone; empty: of all that was tested
  Zone zone;        ///< of the plant: every time on the page is told in it
  UtcTime begin, end, printed;
  std::vector<ShiftPerson> people;
  std::vector<std::string>
      lots;  ///< with model and sheet as the reader knows them, "AQ20-W48-07, AQ-20, sheet revision 4"
  std::string purpose = "production";
  bool emulated = false;
  ShiftCounts counts;
  std::optional<ShiftRuns> runs;
  int sent_to_rework = 0;                    ///< failed production runs that a rework instruction was named for
  int left_open = 0;                         ///< runs that had begun and not ended
  std::vector<std::string> others;           ///< runs of other purposes, in words, one a line
  std::vector<FailingCheck> failing_checks;  ///< any order; drawn with the commonest first
  std::vector<NestRow> nests;
  std::vector<StretchRow> stretches;  ///< in order
  std::vector<RunChart> charts;       ///< each with the histogram of its values
  std::string seal;                   ///< hash of the newest entry, 64 hexadecimal digits
  long long entry = 0;                ///< its number
  std::string verify_command;         ///< what a reader types to compare ledger and seal
  std::string cautions;               ///< what whoever relies on the page must know; paragraphs end with a line feed
};

/// Writes the report as A4 pages and returns how many. Output of an emulated bench says DEMONSTRATION on every page,
/// output of another purpose that purpose. An older file is replaced whole. Main thread only.
/// Errors: report_counts (they do not add up), report_no_seal, page_no_application, page_no_font, page_not_finished,
/// page_not_written.
Result<int> write_shift_report(const ShiftReport& report, const std::filesystem::path& path);

}  // namespace probewright::pages
