#include "db/hex.h"
#include "db/verify.h"
#include "db/volumes.h"
#include "station/text/interruption.h"
#include "station/text/ledger.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

/// Volumes that lie beside the file, with itself, and where their chain breaks.
struct Volumes {
  std::size_t count = 1;
  std::optional<db::BrokenLink> broken;
};

Volumes volumes_of(const std::string& file) {
  const auto paths = db::volumes_beside(file);
  Volumes volumes{paths.size(), {}};
  if (paths.size() == 1) return volumes;
  const auto link = db::broken_link(paths);
  volumes.broken = link ? *link : db::BrokenLink{file, "cannot be read beside its volumes: " + link.error().text()};
  return volumes;
}

Json json_of(const std::optional<db::BrokenLink>& link) {
  if (!link) return nullptr;
  Json json = Json::object();
  json.set("file", link->path).set("what", link->what);
  return json;
}

Json json_of(const std::optional<db::Fault>& fault) {
  if (!fault) return nullptr;
  Json json = Json::object();
  json.set("entry", fault->entry).set("table", fault->table).set("row", fault->row);
  json.set("column", fault->column).set("what", fault->what);
  return json;
}

Json json_of(const db::VerifyReport& report, const Volumes& volumes) {
  Json json = Json::object();
  json.set("format", 1).set("entries", report.entries).set("runs", report.runs).set("open_runs", report.open_runs);
  json.set("readings", report.readings).set("captures", report.captures);
  json.set("seal", to_hex(report.seal.hash)).set("seal_entry", report.seal.entry);
  json.set("ok", report.ok()).set("first_fault", json_of(report.first_fault));
  json.set("volumes", volumes.count).set("broken_link", json_of(volumes.broken));
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
  const Volumes volumes = volumes_of(options.file);
  const ExitStatus status = report->ok() && !volumes.broken ? done : answer_is_no;
  if (console.json()) {
    console.print_json(json_of(*report, volumes));
    return status;
  }
  const std::string part = options.from > 1 ? "everything from entry " + std::to_string(options.from) : "all of it";
  console.print(options.file + ": " + (report->ok() ? part + " agrees" : "it does not agree"));
  console.print(counts(*report));
  if (volumes.count > 1 && !volumes.broken)
    console.print("  It is one of " + std::to_string(volumes.count) +
                  " volumes that lie beside each other; each begins with the seal of the one before.");
  if (volumes.broken) console.warn({"volume_link_broken", volumes.broken->path, {{"what", volumes.broken->what}}});
  if (!report->ok()) console.warn(db::altered_problem(options.file, *report->first_fault));
  return status;
}

}  // namespace probewright::text
