#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "db/queries/entries.h"
#include "db/queries/run_record.h"
#include "db/reader.h"
#include "db/rows.h"

namespace probewright::trace {

/// How many runs ended how.
struct Tally {
  int pass = 0, fail = 0, void_runs = 0, open = 0;
  int all() const { return pass + fail + void_runs + open; }
  bool operator==(const Tally&) const = default;
};

/// The runs of one serial, oldest first, and the seal of the ledger that they were read from.
struct History {
  std::string serial;
  std::vector<db::RunRecord> runs;
  db::Seal seal;
  /// What else belongs to these runs, oldest first: labels and whatever else names the serial, entries of its lots,
  /// the sign-ins under which it was tested.
  std::vector<db::EntryRecord> entries = {};
};

/// All that the ledger holds of one serial, in one state of the ledger. A serial that it does not know has no runs.
/// Throws db::Error; ProblemError for a damaged ledger.
History history_of(db::Reader& reader, std::string_view serial);

/// Counts by verdict.
Tally tally_of(const History& history);

/// What became of one reading, told from its row alone.
enum class Standing {
  ok,         ///< inside the acceptance limits
  outside,    ///< outside a limit
  too_close,  ///< inside the limits, outside the acceptance limits
  unusable,   ///< judged not ok though it lies inside: its uncertainty is missing or above the declared one
  missing,    ///< should have been judged, but there is no value
  watched,    ///< alerts only
  recorded    ///< neither judged nor watched
};
Standing standing_of(const db::ReadingRow& reading);
/// "ok", "outside", "too_close", "unusable", "missing", "watched", "recorded"
std::string_view slug(Standing standing);

/// The judged reading with the smallest margin: the one that decided, or nearly did. Nullptr where none has a margin.
const db::ReadingRow* nearest_to_an_edge(const db::RunRecord& run);

}  // namespace probewright::trace
