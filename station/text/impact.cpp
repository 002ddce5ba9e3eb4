#include "station/trace/impact.h"

#include <set>

#include "station/base/files.h"
#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"
#include "station/text/interruption.h"
#include "station/text/ledger_file.h"
#include "station/text/ledger_note.h"
#include "station/text/plant_zone.h"
#include "station/text/rederive.h"
#include "station/text/table.h"
#include "station/trace/period.h"

namespace probewright::text {
namespace {

Json json_of(const trace::ImpactRow& row) {
  Json json = Json::object();
  json.set("run", row.run.value).set("opened_at", to_text(row.opened_at)).set("serial", row.serial);
  json.set("lot", row.lot).set("model", row.model).set("purpose", row.purpose).set("by", trace::slug(row.by));
  json.set("fails", row.fails).set("check", row.check).set("unit", row.unit);
  json.set("margin", row.margin).set("was_margin", row.was_margin);
  json.set("value", row.value).set("was_value", row.was_value);
  Json failing = Json::array();
  for (const std::string& check : row.failing) failing.add(check);
  json.set("failing", std::move(failing)).set("from_runs", row.from_runs).set("later_pass", row.later_pass);
  json.set("problem", row.problem ? text::json_of(*row.problem) : Json{nullptr});
  return json;
}

Json json_of(const trace::ImpactReport& report, int held) {
  Json json = Json::object();
  json.set("format", 1).set("runs", report.rows.size()).set("would_fail", report.fails);
  json.set("by_rederivation", report.rederived).set("by_sensitivity", report.by_sensitivity);
  json.set("unknown", report.unknown).set("stopped", report.stopped).set("held", held);
  json.set("seal", to_hex(report.seal.hash)).set("seal_entry", report.seal.entry);
  Json rows = Json::array();
  for (const auto& row : report.rows) rows.add(json_of(row));
  json.set("rows", std::move(rows));
  return json;
}

std::string how(const trace::ImpactRow& row) {
  switch (row.by) {
    case trace::ImpactBy::rederivation:
      return "re-derived";
    case trace::ImpactBy::sensitivity:
      return "sensitivity, from " + std::to_string(row.from_runs) + " runs";
    case trace::ImpactBy::unknown:
      break;
  }
  return "unknown: " + (row.problem ? row.problem->what() : std::string{});
}

std::string maybe(const std::optional<double>& value, int decimals) { return value ? fixed(*value, decimals) : "-"; }

void print(const trace::ImpactReport& report, Console& console) {
  constexpr std::size_t most = 50;
  Table table({"serial", "run", "opened", "nearest check", "margin was", "now", "would", "how"},
              {Side::left, Side::right, Side::left, Side::left, Side::right, Side::right, Side::left, Side::left});
  for (const auto& row : report.rows) {
    if (&row - report.rows.data() >= static_cast<std::ptrdiff_t>(most)) break;
    const std::string would = row.by == trace::ImpactBy::unknown ? "?" : row.fails ? "fail" : "pass";
    table.add({row.serial, std::to_string(row.run.value), to_text(row.opened_at).substr(0, 19) + "Z", row.check,
               maybe(row.was_margin, 3), maybe(row.margin, 3), would + (row.later_pass ? " (passed again later)" : ""),
               how(row)});
  }
  console.print(table.text());
  if (report.rows.size() > most)
    console.print("... and " + std::to_string(report.rows.size() - most) + " more; --json tells all");
  console.print(std::to_string(report.fails) + " of " + std::to_string(report.rows.size()) +
                " passed runs would have failed; " + std::to_string(report.rederived) + " by re-derivation, " +
                std::to_string(report.by_sensitivity) + " by sensitivity, " + std::to_string(report.unknown) +
                " unknown.");
  if (report.stopped) console.print("Stopped before the end: these are the runs up to then.");
}

Result<trace::CorrectedCertificate> read_certificate(const std::string& file) {
  const auto text = read_file(file, yaml::Document::max_bytes);
  if (!text) return text.error();
  if (auto phantom = measure::read_phantom_certificate(*text, file)) return trace::CorrectedCertificate{*phantom};
  auto adapter = measure::read_adapter_certificate(*text, file);
  if (adapter) return trace::CorrectedCertificate{*adapter};
  return adapter.error().front();
}

Result<trace::ImpactQuestion> question_of(const ImpactOptions& options, const Zone& zone) {
  trace::ImpactQuestion question;
  question.device = options.device;
  question.both_ways = options.both_ways;
  if (options.certificate.empty() == (options.off.empty() || !options.by))
    return Problem{"impact_how_much", "probewright impact"};
  const auto since = trace::moment_in(zone, options.since);
  if (!since) return since.error();
  question.since = *since;
  if (!options.until.empty()) {
    const auto until = trace::moment_in(zone, options.until);
    if (!until) return until.error();
    question.until = *until;
  }
  if (options.certificate.empty()) {
    question.found = trace::Drift{trace::find_drift(options.off).value(), *options.by};
    return question;
  }
  auto certificate = read_certificate(options.certificate);
  if (!certificate) return certificate.error();
  question.found = std::move(*certificate);
  return question;
}

/// A hold on every serial that would have failed, in one commit.
Result<int> hold(const trace::ImpactReport& report, const ImpactOptions& options, const std::string& ledger) {
  std::set<std::string> serials;
  for (const auto& row : report.rows)
    if (row.fails) serials.insert(row.serial);
  if (serials.empty()) return 0;
  const SystemClock clock;
  const auto store = db::Store::open(appending(ledger, options.build), clock);
  if (!store) return store.error();
  const auto added = (*store)->commit([&](db::Change& change) {
    for (const std::string& serial : serials)
      change.add_entry("hold", options.who,
                       Body::Object{{"name", serial}, {"reason", options.reason}, {"subject", "serial"}});
  });
  if (!added) return added.error();
  return static_cast<int>(serials.size());
}

}  // namespace

int impact(const ImpactOptions& options, Console& console) {
  const auto ledger = ledger_file(options.ledger, options.choice);
  if (!ledger) return console.refuse(ledger.error());
  auto reader = db::Reader::open(*ledger);
  if (!reader) return console.refuse(reader.error());
  const auto question = question_of(options, plant_zone(*reader, options.choice, console));
  if (!question) return console.refuse(question.error());
  const Interruption interruption;
  trace::ImpactOptions how;
  how.threads = options.threads;
  how.stop = interruption.token();
  const auto report = [&] {
    Progress progress(console, "runs made again");
    how.progress = [&](std::int64_t done, std::int64_t total) { progress.at(done, total); };
    return trace::impact(*ledger, *question, how);
  }();
  if (!report) return console.refuse(report.error());
  const auto held = options.hold && !report->stopped ? hold(*report, options, *ledger) : Result<int>{0};
  if (!held) return console.refuse(held.error());
  if (console.json()) {
    console.print_json(json_of(*report, *held));
  } else {
    print(*report, console);
    if (options.hold) console.print(std::to_string(*held) + " serials were put on hold.");
  }
  return report->fails > 0 ? answer_is_no : done;
}

}  // namespace probewright::text
