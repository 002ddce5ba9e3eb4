#include <filesystem>

#include "db/backup.h"
#include "station/base/numbers.h"
#include "station/text/interruption.h"
#include "station/text/ledger.h"
#include "station/text/ledger_file.h"
#include "station/text/ledger_note.h"

namespace probewright::text {
namespace {

namespace fs = std::filesystem;

/// In a folder, a backup is named after its ledger and the moment.
std::string target_of(const std::string& to, const std::string& ledger) {
  std::error_code ignored;
  if (!fs::is_directory(to, ignored)) return to;
  std::string moment = to_text(SystemClock{}.utc_now()).substr(0, 19);
  std::erase_if(moment, [](char c) { return c == '-' || c == ':'; });
  return (fs::path(to) / (fs::path(ledger).stem().string() + "-" + moment + "Z.db")).string();
}

}  // namespace

Json json_of(const db::CheckedCopy& copy) {
  Json json = Json::object();
  json.set("format", 1).set("file", copy.path).set("bytes", copy.size).set("sha256", to_hex(copy.sha256));
  json.set("seal", to_hex(copy.report.seal.hash)).set("seal_entry", copy.report.seal.entry);
  json.set("entries", copy.report.entries).set("runs", copy.report.runs);
  return json;
}

void print_copy(const db::CheckedCopy& copy, Console& console) {
  console.print(copy.path + ": " + fixed(static_cast<double>(copy.size) / 1e6, 1) + " MB, checked whole");
  console.print("sha256  " + to_hex(copy.sha256));
  console.print("seal    " + to_hex(copy.report.seal.hash) + " (entry " + std::to_string(copy.report.seal.entry) + ")");
}

int ledger_backup(const LedgerBackupOptions& options, Console& console) {
  const auto ledger = ledger_file(options.ledger, options.choice);
  if (!ledger) return console.refuse(ledger.error());
  const Interruption interruption;
  Progress progress(console, "copied and checked");
  db::CopyOptions how;
  how.stop = interruption.token();
  how.progress = [&](std::int64_t done, std::int64_t total) { progress.at(done, total); };
  const auto copy = db::copy_ledger(*ledger, target_of(options.to, *ledger), how);
  if (!copy) return console.refuse(copy.error());
  const bool recorded = note_in_ledger(*ledger, options.build, "backup", options.who, db::copy_body(*copy), console);
  if (console.json())
    console.print_json(json_of(*copy).set("recorded", recorded));
  else
    print_copy(*copy, console);
  return done;
}

}  // namespace probewright::text
