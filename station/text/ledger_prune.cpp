#include "db/retention.h"
#include "station/base/numbers.h"
#include "station/text/ledger.h"
#include "station/text/ledger_file.h"
#include "station/text/ledger_note.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

Json json_of(const db::PrunePlan& plan, bool done_now) {
  Json json = Json::object();
  json.set("format", 1).set("done", done_now).set("captures", plan.captures.size()).set("runs", plan.runs);
  json.set("bytes", plan.bytes).set("left_in_period", plan.in_period).set("left_by_choice", plan.chosen);
  json.set("left_lot_open", plan.lot_open).set("left_held", plan.held);
  return json;
}

std::string words_of(const db::PrunePlan& plan) {
  Table table({"captures that go", std::to_string(plan.captures.size()) + " of " + std::to_string(plan.runs) +
                                       " runs, " + fixed(static_cast<double>(plan.bytes) / 1e6, 1) + " MB"});
  table.add({"runs in the record period", std::to_string(plan.in_period)});
  table.add({"runs kept by 1 in N", std::to_string(plan.chosen)});
  table.add({"runs of lots not closed", std::to_string(plan.lot_open)});
  table.add({"runs on hold", std::to_string(plan.held)});
  return table.text();
}

/// The moment so many days before now.
UtcTime days_ago(std::int64_t days) { return {SystemClock{}.utc_now().microseconds - days * 86'400'000'000}; }

}  // namespace

int ledger_prune(const LedgerPruneOptions& options, Console& console) {
  const auto ledger = ledger_file(options.ledger, options.choice);
  if (!ledger) return console.refuse(ledger.error());
  const db::RetentionRules rules{days_ago(options.record_days), options.keep_one_in};
  auto reader = db::Reader::open(*ledger);
  if (!reader) return console.refuse(reader.error());
  const db::PrunePlan plan = db::plan_prune(*reader, rules);
  if (options.take_away) {
    if (options.reason.empty()) return console.refuse(Problem{"reason_missing", "probewright ledger prune"});
    const SystemClock clock;
    const auto store = db::Store::open(appending(*ledger, options.build), clock);
    if (!store) return console.refuse(store.error());
    Progress progress(console, "captures taken away");
    const auto gone = db::prune(**store, plan, options.who, options.reason,
                                [&](std::int64_t done, std::int64_t total) { progress.at(done, total); });
    if (!gone) return console.refuse(gone.error());
  }
  if (console.json()) {
    console.print_json(json_of(plan, options.take_away));
  } else {
    console.print(words_of(plan));
    console.print(options.take_away ? "Taken away; their digests stay."
                                    : "Nothing was changed: --take-away with --reason does it.");
  }
  return done;
}

}  // namespace probewright::text
