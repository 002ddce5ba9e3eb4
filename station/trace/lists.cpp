#include "station/trace/lists.h"

#include "db/queries/entries_naming.h"
#include "db/queries/lot_entries.h"
#include "db/queries/runs_of.h"
#include "db/queries/runs_within.h"
#include "db/queries/seal.h"
#include "db/transaction.h"
#include "station/trace/run_story.h"

namespace probewright::trace {

Found found_of_lot(db::Reader& reader, std::string_view lot) {
  const db::Snapshot one_state{reader.connection()};
  return {db::runs_of_lot(reader, lot), db::entries_naming_lot(reader, lot), db::newest_seal(reader)};
}

Found found_of_person(db::Reader& reader, std::string_view person) {
  const db::Snapshot one_state{reader.connection()};
  return {db::runs_of_operator(reader, person), db::entries_naming_person(reader, person), db::newest_seal(reader)};
}

Found found_within(db::Reader& reader, const Period& period) {
  const db::Snapshot one_state{reader.connection()};
  const auto within = [&](UtcTime time) { return time >= period.from && time < period.to; };
  const db::EntryRange range = db::entries_between(reader, period.from, period.to);
  Found found{db::runs_opened_within(reader, range), db::entries_beside_runs(reader, range), db::newest_seal(reader)};
  std::erase_if(found.runs, [&](const db::RunBrief& run) { return !within(run.opened_at); });
  std::erase_if(found.entries, [&](const db::EntryRecord& entry) { return !within(entry.time); });
  return found;
}

Result<EntryFound> found_entry(db::Reader& reader, std::int64_t number) {
  const db::Snapshot one_state{reader.connection()};
  auto entries = db::entries(reader, number, number);
  if (entries.empty()) return Problem{"entry_unknown", "entry " + std::to_string(number)};
  EntryFound found{std::move(entries.front()), std::nullopt, db::newest_seal(reader)};
  if (const auto run = run_of_entry(reader, number)) found.run = db::run_brief(reader, *run);
  return found;
}

}  // namespace probewright::trace
