#include "db/volumes.h"
#include "station/text/ledger.h"
#include "station/text/ledger_file.h"

namespace probewright::text {

int ledger_close_volume(const LedgerCloseVolumeOptions& options, Console& console) {
  const auto ledger = ledger_file(options.ledger, options.choice);
  if (!ledger) return console.refuse(ledger.error());
  if (options.reason.empty()) return console.refuse(Problem{"reason_missing", "probewright ledger close-volume"});
  const SystemClock clock;
  const auto closed =
      db::close_volume({*ledger, options.who, options.reason, options.build.version, options.build.commit}, clock);
  if (!closed) return console.refuse(closed.error());
  if (console.json()) {
    Json json = Json::object();
    json.set("format", 1).set("archive", closed->archive).set("volume", closed->volume).set("ledger", *ledger);
    json.set("seal", to_hex(closed->seal.hash)).set("seal_entry", closed->seal.entry);
    json.set("documents", closed->documents).set("tries", closed->tries).set("standing", closed->standing);
    console.print_json(json);
    return done;
  }
  const std::string number = std::to_string(closed->volume);
  console.print("volume " + number + " is closed: " + closed->archive);
  console.print("seal  " + to_hex(closed->seal.hash) + " (entry " + std::to_string(closed->seal.entry) + ")");
  console.print("Volume " + std::to_string(closed->volume + 1) + " begins in " + *ledger + " with " +
                std::to_string(closed->documents) + " documents in force, tries of " + std::to_string(closed->tries) +
                " serials, " + std::to_string(closed->standing) + " open lots and holds.");
  console.print("Keep the closed volume beside the ledger for as long as it must answer, and a backup elsewhere.");
  return done;
}

}  // namespace probewright::text
