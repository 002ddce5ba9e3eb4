#include "station/text/label.h"

#include "db/store.h"
#include "station/base/numbers.h"
#include "station/text/label_files.h"
#include "station/text/ledger_file.h"
#include "station/text/plant_zone.h"

namespace probewright::text {
namespace {

Result<std::unique_ptr<db::Store>> opened(const std::string& file, const LabelOptions& options, const Clock& clock) {
  db::StoreOptions how;
  how.path = file;
  how.lease = false;  // a line may be at work; this only appends
  how.create = false;
  how.program_version = options.build.version;
  how.program_commit = options.build.commit;
  return db::Store::open(how, clock);
}

std::optional<Problem> clock_problem(db::Store& store) {
  const auto behind = store.clock_behind();
  if (behind <= db::clock_tolerance) return std::nullopt;
  const double behind_s = std::chrono::duration<double>(behind).count();
  return Problem{"ledger_clock_behind", store.path(), {{"seconds", fixed(behind_s, 1)}}};
}

/// What can be refused before anything is drawn.
std::optional<Problem> refusal(const sequence::LabelFacts& facts, const LabelOptions& options) {
  const std::string where = "run " + std::to_string(facts.run);
  if (!options.kind.empty() && options.kind != slug(facts.kind))
    return Problem{"label_other_kind", where, {{"serial", facts.serial}, {"verdict", facts.verdict}}};
  if (facts.copy > 1 && options.reason.empty())
    return Problem{
        "label_reason_missing", where, {{"run", std::to_string(facts.run)}, {"copy", std::to_string(facts.copy)}}};
  return std::nullopt;
}

Json json_of(const sequence::LabelFacts& facts, const DrawnLabel& label, std::int64_t entry) {
  Json json = Json::object();
  json.set("format", 1).set("serial", facts.serial).set("run", facts.run).set("kind", slug(facts.kind));
  json.set("copy", facts.copy).set("entry", entry).set("code", label.code()).set("emulated", facts.emulated);
  json.set("pdf", label.pdf().string()).set("png", label.png().string());
  return json;
}

void tell(const sequence::LabelFacts& facts, const DrawnLabel& label, std::int64_t entry, Console& console) {
  if (console.json()) return console.print_json(json_of(facts, label, entry));
  console.print(facts.serial + ": " + std::string{slug(facts.kind)} + " label of run " + std::to_string(facts.run) +
                (facts.copy > 1 ? ", copy " + std::to_string(facts.copy) : "") + ", entry " + std::to_string(entry) +
                (facts.emulated ? "; DEMONSTRATION, made on an emulated bench" : ""));
  if (facts.copy > 1) console.print("Destroy the earlier label: this one takes its place.");
  console.print(label.pdf().string());
  console.print(label.png().string());
}

}  // namespace

int label(const LabelOptions& options, PageMaker* pages, Console& console) {
  if (pages == nullptr) return console.refuse(Problem{"pages_left_out", "probewright label"});
  const auto file = ledger_file(options.ledger, options.choice);
  if (!file) return console.refuse(file.error());
  const SystemClock clock;
  auto store = opened(*file, options, clock);
  if (!store) return console.refuse(store.error());
  if (const auto problem = clock_problem(**store)) return console.refuse(*problem);
  db::Reader reader = (*store)->reader();
  const auto facts =
      sequence::label_facts_of_serial(reader, options.serial, plant_zone(reader, options.choice, console));
  if (!facts) return console.refuse(facts.error());
  if (const auto problem = refusal(*facts, options)) return console.refuse(*problem);
  auto drawn = DrawnLabel::draw(*pages, *facts, options.form, clock.utc_now(), options.folder);
  if (!drawn) return console.refuse(drawn.error());
  const auto asked = drawn->entry(options.who.empty() ? "station" : options.who, options.reason);
  std::int64_t entry = 0;
  const auto written = (*store)->commit([&](db::Change& change) { entry = sequence::make_label_entry(change, asked); });
  if (!written) return console.refuse(written.error());
  if (const auto placed = drawn->put_in_place(); !placed) return console.refuse(placed.error());
  tell(*facts, *drawn, entry, console);
  return done;
}

}  // namespace probewright::text
