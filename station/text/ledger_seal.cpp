#include "db/queries/seal.h"
#include "db/transaction.h"
#include "station/text/ledger.h"
#include "station/text/ledger_file.h"

namespace probewright::text {
namespace {

struct Newest {
  db::Seal seal;
  std::string time;  ///< UTC; empty for a ledger without entries
};

/// One look at the ledger, so that hash and time belong together.
Newest newest_of(db::Reader& reader) {
  const db::Snapshot one_state{reader.connection()};
  Newest newest{db::newest_seal(reader), ""};
  if (const auto time = db::newest_entry_time(reader)) newest.time = to_text(*time);
  return newest;
}

Json json_of(const Newest& newest, const std::string& file) {
  Json json = Json::object();
  json.set("format", 1).set("ledger", file).set("entry", newest.seal.entry);
  json.set("seal", to_hex(newest.seal.hash)).set("time", newest.time);
  return json;
}

}  // namespace

int ledger_seal(const LedgerSealOptions& options, Console& console) {
  const auto file = ledger_file(options.file, options.choice);
  if (!file) return console.refuse(file.error());
  auto reader = db::Reader::open(*file);
  if (!reader) return console.refuse(reader.error());
  const Newest newest = newest_of(*reader);
  if (console.json()) {
    console.print_json(json_of(newest, *file));
    return done;
  }
  console.print("entry " + std::to_string(newest.seal.entry) + "  " + newest.time);
  console.print("seal  " + to_hex(newest.seal.hash));
  console.print("Later: probewright ledger verify " + *file + " --entry " + std::to_string(newest.seal.entry) +
                " --seal " + to_hex(newest.seal.hash));
  return done;
}

}  // namespace probewright::text
