#pragma once
#include <optional>
#include <string>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// How a run ended, without its proof.
struct BriefClosing {
  std::int64_t entry = 0;
  UtcTime closed_at;
  std::string verdict, cause, cause_words;
  std::vector<std::string> failing;  ///< slugs of checks
  bool provisional = false;
  Body bench;  ///< what the closing entry tells beside: cycle, likely cause ...
};

/// A run without its readings, captures and devices: enough to count it and to put it on a list.
struct RunBrief {
  RunId run;
  UtcTime opened_at;
  std::string serial, purpose;
  bool emulated = false;
  std::string lot, model;
  std::string sheet_revision;  ///< of the limit sheet it stood on; empty where it names none
  int nest = 1;
  std::string station, operator_name;
  int try_number = 1;
  std::optional<BriefClosing> closing;  ///< empty: still open
};

/// A run by its number, or nothing. Throws db::Error; ProblemError for a damaged ledger.
std::optional<RunBrief> run_brief(Reader& reader, RunId run);
/// Those of `runs` that are there, in their order.
std::vector<RunBrief> run_briefs(Reader& reader, const std::vector<RunId>& runs);

}  // namespace probewright::db
