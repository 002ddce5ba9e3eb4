#include "db/hex.h"
#include "db/verify.h"
#include "station/text/interruption.h"
#include "station/text/ledger.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

Json json_of(const std::optional<db::Fault>& fault) {
  if (!fault) return nullptr;
  Json json = Json::object();
  json.set("entry", fault->entry).set("table", fault->table).set("row", fault->row);
  json.set("column", fault->column).set("what", fault->what);
  return json;
}

Json json_of(const db::VerifyReport& report) {
  Json json = Json::object();
  json.set("format", 1).set("entries", report.entries).set("runs", report.runs).set("open_runs", report.open_runs);
  json.set("readings", report.readings).set("captures", report.captures);
  json.set("seal", to_hex(report.seal.hash)).set("seal_entry", report.seal.entry);
  json.set("ok", report.ok()).set("first_fault", json_of(report.first_fault));
  return json;
}

std::string counts(const db::VerifyReport& report) {
  Table table({"entries", std::to_string(report.entries)});
  const std::string open = report.open_runs > 0 ? ", " + std::to_string(report.open_runs) + " of them open" : "";
  table.add({"runs", std::to_string(report.runs) + open});
  table.add({"readings", std::to_string(report.readings)});
  table.add({"captures", std::to_string(report.captures)});
  table.add({"seal", to_hex(report.seal.hash) + " (entry " + std::to_string(report.seal.entry) + ")"});
  return table.text(2);
}

}  // namespace

Result<std::optional<db::Seal>> printed_seal(const std::string& seal, const std::optional<std::int64_t>& entry) {
  if (seal.empty() || !entry) return std::optional<db::Seal>{};
  const auto hash = db::digest_from_hex(seal);
  if (!hash) return Problem{"seal_malformed", "--seal", {{"text", seal}}};
  return std::optional<db::Seal>{db::Seal{*entry, *hash}};
}

int ledger_verify(const LedgerVerifyOptions& options, Console& console) {
  const auto printed = printed_seal(options.seal, options.entry);
  if (!printed) return console.refuse(printed.error());
  db::VerifyOptions how;
  how.printed = *printed;
  how.from = options.from;
  const Interruption interruption;
  how.stop = interruption.token();
  const auto report = [&] {
    Progress progress(console, "checked");
    how.progress = [&](std::int64_t done, std::int64_t total) { progress.at(done, total); };
    return db::verify(options.file, how);
  }();
  if (!report) return console.refuse(report.error());
  const ExitStatus status = report->ok() ? done : answer_is_no;
  if (console.json()) {
    console.print_json(json_of(*report));
    return status;
  }
  const std::string part = options.from > 1 ? "everything from entry " + std::to_string(options.from) : "all of it";
  console.print(options.file + ": " + (report->ok() ? part + " agrees" : "it does not agree"));
  console.print(counts(*report));
  if (!report->ok()) console.warn(db::altered_problem(options.file, *report->first_fault));
  return status;
}

}  // namespace probewright::text
