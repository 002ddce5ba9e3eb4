#include "station/text/ledger_note.h"

namespace probewright::text {

db::StoreOptions appending(const std::string& ledger, const Build& build) {
  db::StoreOptions options;
  options.path = ledger;
  options.lease = false;
  options.create = false;
  options.program_version = build.version;
  options.program_commit = build.commit;
  return options;
}

bool note_in_ledger(const std::string& ledger, const Build& build, std::string_view kind, std::string_view who,
                    const Body& data, Console& console) {
  if (db::is_copy(ledger)) {
    console.say("not recorded: " + ledger + " is a copy, and nothing is written into a copy");
    return false;
  }
  const SystemClock clock;
  auto store = db::Store::open(appending(ledger, build), clock);
  const Result<void> added = store ? (*store)->commit([&](db::Change& change) { change.add_entry(kind, who, data); })
                                   : Result<void>{store.error()};
  if (!added) console.say("not recorded: " + added.error().text());
  return added.has_value();
}

}  // namespace probewright::text
