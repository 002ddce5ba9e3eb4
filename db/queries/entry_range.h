#pragma once
#include <optional>

#include "db/reader.h"
#include "station/base/times.h"

namespace probewright::db {

/// Entries from `first` to `last`, both included. Empty where `last` is below `first`.
struct EntryRange {
  std::int64_t first = 1, last = 0;
  bool empty() const { return last < first; }
  bool operator==(const EntryRange&) const = default;
};

/// How far a clock may have been set back for entries_between to find every entry all the same.
inline constexpr std::int64_t clock_slack_s = 3600;

/// The narrowest range that holds every entry with a time from `from` up to, but without, `to`. Entries are in the
/// order in which they were written, and so are their times but for what a clock was set back: entries within an hour
/// of both ends are looked at one by one. The range may hold entries of another time; whoever counts looks at each.
/// Throws db::Error; ProblemError time_malformed for a damaged ledger.
EntryRange entries_between(Reader& reader, UtcTime from, UtcTime to);
/// All entries of the ledger.
EntryRange all_entries(Reader& reader);

}  // namespace probewright::db
