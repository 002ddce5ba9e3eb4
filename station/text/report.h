#pragma once
#include <cstdint>
#include <optional>
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"
#include "station/text/page_maker.h"

namespace probewright::text {

/// What all reports are asked for with.
struct ReportOptions {
  StationChoice choice;
  std::string ledger;  ///< file; empty: the station's
  std::string out;     ///< PDF to write; empty: a name of its own in the current folder, none with --json
};
struct ReportRunOptions : ReportOptions {
  std::int64_t entry = 0;  ///< the run's number, or any entry of it
};
struct ReportSerialOptions : ReportOptions {
  std::string serial;
};
struct ReportShiftOptions : ReportOptions {
  /// Moments and days by the plant's zone (trace/period.h). Without any: the lot's whole life where a lot is named,
  /// else the day of the newest entry.
  std::string from, to, day;
  std::string lot;
};

/// `report run`, `report serial`, `report shift`: a page as PDF, and a summary in text or all data as JSON.
/// `pages`: nullptr in a program that was built without pages; then there is only the summary.
/// Exit status: 0 done, 1 the ledger has no such serial or run, 2 refused, 3 could not do it.
int report_run(const ReportRunOptions& options, PageMaker* pages, Console& console);
int report_serial(const ReportSerialOptions& options, PageMaker* pages, Console& console);
int report_shift(const ReportShiftOptions& options, PageMaker* pages, Console& console);

}  // namespace probewright::text
