#include "station/trace/history.h"

#include <map>
#include <set>

#include "db/queries/entries_naming.h"
#include "db/queries/lot_entries.h"
#include "db/queries/runs_of_serial.h"
#include "db/queries/seal.h"
#include "db/queries/sign_in.h"
#include "db/transaction.h"
#include "limits/limits.h"

namespace probewright::trace {
namespace {

std::vector<db::EntryRecord> entries_beside(db::Reader& reader, const History& history) {
  std::map<std::int64_t, db::EntryRecord> found;  // by number: each once, in order
  const auto take = [&](std::vector<db::EntryRecord> entries) {
    for (db::EntryRecord& entry : entries) found.emplace(entry.number, std::move(entry));
  };
  take(db::entries_naming_serial(reader, history.serial));
  std::set<std::string> lots;
  for (const db::RunRecord& run : history.runs) {
    lots.insert(run.opened.lot);
    if (auto signed_in = db::sign_in_before(reader, run.opened.operator_name, run.run.value))
      found.emplace(signed_in->number, *std::move(signed_in));
  }
  for (const std::string& lot : lots)
    if (!lot.empty()) take(db::lot_entries(reader, lot));
  std::vector<db::EntryRecord> entries;
  for (auto& [number, entry] : found) entries.push_back(std::move(entry));
  return entries;
}

}  // namespace

History history_of(db::Reader& reader, std::string_view serial) {
  const db::Snapshot one_state{reader.connection()};
  History history{std::string{serial}, db::runs_of_serial(reader, serial), db::newest_seal(reader)};
  history.entries = entries_beside(reader, history);
  return history;
}

Tally tally_of(const History& history) {
  Tally tally;
  for (const db::RunRecord& run : history.runs) {
    if (!run.closing)
      ++tally.open;
    else if (run.closing->verdict == "pass")
      ++tally.pass;
    else if (run.closing->verdict == "fail")
      ++tally.fail;
    else
      ++tally.void_runs;
  }
  return tally;
}

Standing standing_of(const db::ReadingRow& reading) {
  if (reading.ok == "ok") return Standing::ok;
  if (reading.ok == "watch") return Standing::watched;
  if (reading.ok == "record") return Standing::recorded;
  if (!reading.value) return Standing::missing;
  const limits::Limits limits{reading.lower, reading.upper};
  const limits::Limits acceptance{reading.acceptance_lower, reading.acceptance_upper};
  // Yes/no checks have no limits: not ok is the answer that must not be.
  if (!limits.any() || !limits.contain(*reading.value)) return Standing::outside;
  return acceptance.contain(*reading.value) ? Standing::unusable : Standing::too_close;
}

std::string_view slug(Standing standing) {
  switch (standing) {
    case Standing::ok:
      return "ok";
    case Standing::outside:
      return "outside";
    case Standing::too_close:
      return "too_close";
    case Standing::unusable:
      return "unusable";
    case Standing::missing:
      return "missing";
    case Standing::watched:
      return "watched";
    case Standing::recorded:
      break;
  }
  return "recorded";
}

const db::ReadingRow* nearest_to_an_edge(const db::RunRecord& run) {
  const db::ReadingRow* nearest = nullptr;
  for (const db::ReadingRow& reading : run.readings)
    if (reading.margin && (!nearest || *reading.margin < *nearest->margin)) nearest = &reading;
  return nearest;
}

}  // namespace probewright::trace
