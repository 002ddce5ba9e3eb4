#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "db/queries/entries.h"
#include "db/queries/run_brief.h"
#include "db/reader.h"
#include "db/rows.h"
#include "station/base/zone.h"
#include "station/trace/period.h"

// Runs and other entries that belong to a lot, a person, a day. Each is one state of the ledger; what it does not know
// has empty lists. All throw db::Error; ProblemError for a damaged ledger.
namespace probewright::trace {

struct Found {
  std::vector<db::RunBrief> runs;        ///< oldest first
  std::vector<db::EntryRecord> entries;  ///< other than of runs, oldest first
  db::Seal seal;
  bool empty() const { return runs.empty() && entries.empty(); }
};

/// Runs of a lot; its entries, labels among them.
Found found_of_lot(db::Reader& reader, std::string_view lot);
/// Runs that a person operated; entries that the person made or that name the person as the one signed in or out.
Found found_of_person(db::Reader& reader, std::string_view person);
/// Runs opened within the period; all other entries made in it.
Found found_within(db::Reader& reader, const Period& period);

/// One entry, and the run that it is of.
struct EntryFound {
  db::EntryRecord entry;
  std::optional<db::RunBrief> run;
  db::Seal seal;
};
/// Errors: entry_unknown.
Result<EntryFound> found_entry(db::Reader& reader, std::int64_t number);

}  // namespace probewright::trace
