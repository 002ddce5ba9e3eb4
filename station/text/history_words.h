#pragma once
#include <string>

#include "station/text/json_out.h"
#include "station/trace/history.h"

namespace probewright::text {

/// The history of a serial for people: a line that sums it up, then each run with its readings. Times are UTC.
std::string words_of(const trace::History& history);
/// The same as JSON (FORMATS.md, "trace").
Json json_of(const trace::History& history);
/// One run for people, with its readings.
std::string words_of(const db::RunRecord& run);
/// Entries as a table for people.
std::string words_of(const std::vector<db::EntryRecord>& entries);
/// "Read from the ledger up to entry 12, seal ..."
std::string words_of(const db::Seal& seal);
/// The same as JSON (FORMATS.md): a run as in "trace", an entry as in "trace --entry".
Json json_of(const db::RunRecord& run);
Json json_of(const db::EntryRecord& entry);
/// Text and integers of a ledger body as JSON.
Json json_of(const Body& body);

}  // namespace probewright::text
