#include <unistd.h>

#include <filesystem>

#include "db/hex.h"
#include "db/restore.h"
#include "station/text/interruption.h"
#include "station/text/ledger.h"
#include "station/text/ledger_file.h"
#include "station/text/ledger_note.h"

namespace probewright::text {
namespace {

namespace fs = std::filesystem;

/// A name that nothing has, beside other temporary files.
std::string scratch_name() {
  return (fs::temp_directory_path() / ("probewright-drill-" + std::to_string(::getpid()) + ".db")).string();
}

int told(const db::CheckedCopy& copy, Json extra, std::string_view line, Console& console) {
  if (console.json()) {
    console.print_json(extra);
    return done;
  }
  print_copy(copy, console);
  console.print(line);
  return done;
}

int drill(const LedgerRestoreOptions& options, const db::RestoreOptions& how, Console& console) {
  const auto copy = db::restore_drill(options.backup, scratch_name(), how);
  if (!copy) return console.refuse(copy.error());
  Body body = db::copy_body(*copy);
  (*body.object())["file"] = options.backup;
  const auto ledger = ledger_file(options.ledger, options.choice);
  const bool recorded = ledger && note_in_ledger(*ledger, options.build, "restore_drill", options.who, body, console);
  Json json = json_of(*copy);
  json.set("drill", true).set("recorded", recorded);
  return told(*copy, std::move(json), "The backup can be restored; the trial was taken away again.", console);
}

}  // namespace

int ledger_restore(const LedgerRestoreOptions& options, Console& console) {
  const auto printed = printed_seal(options.seal, options.entry);
  if (!printed) return console.refuse(printed.error());
  if (options.drill == !options.to.empty())
    return console.refuse(Problem{"restore_where", "probewright ledger restore"});
  const Interruption interruption;
  Progress progress(console, "copied and checked");
  db::RestoreOptions how;
  how.printed = *printed;
  how.who = options.who;
  how.reason = options.reason;
  how.program_version = options.build.version;
  how.program_commit = options.build.commit;
  how.copy.stop = interruption.token();
  how.copy.progress = [&](std::int64_t done, std::int64_t total) { progress.at(done, total); };
  if (options.drill) return drill(options, how, console);
  if (options.reason.empty()) return console.refuse(Problem{"reason_missing", "probewright ledger restore"});
  const SystemClock clock;
  const auto copy = db::restore_ledger(options.backup, options.to, clock, how);
  if (!copy) return console.refuse(copy.error());
  Json json = json_of(*copy);
  json.set("drill", false).set("recorded", true);
  return told(*copy, std::move(json),
              "Restored. What the lost ledger held after entry " + std::to_string(copy->report.seal.entry) +
                  " is not in it; an entry says so.",
              console);
}

}  // namespace probewright::text
