#include "station/text/demo_pages.h"

#include <algorithm>
#include <filesystem>
#include <set>

#include "station/sequence/configuration.h"
#include "station/sequence/ledger_start.h"
#include "station/text/label_files.h"
#include "station/text/report_page.h"

namespace probewright::text {
namespace {

/// The plant's zone, from the configuration that the demonstration was made with.
Result<Zone> zone_of(const DemoFolder& folder) {
  const auto station = sequence::read_station(folder.configs(), "");
  if (!station) return station.error().front();
  return Zone::read(station->value.zone);
}

std::set<std::string> serials_with_verdict(const DemoResult& result) {
  std::set<std::string> serials;
  for (const DemoRun& run : result.runs)
    if (run.outcome.verdict != sequence::RunVerdict::void_run) serials.insert(run.outcome.serial);
  return serials;
}

int labels_in(const std::string& folder) {
  std::error_code ignored;
  int count = 0;
  for (const auto& item : std::filesystem::directory_iterator(folder, ignored))
    count += item.path().extension() == ".pdf";
  return count;
}

/// One label from the drawing to its place; nothing where this serial is to have none now.
Result<void> make_label(PageMaker& pages, db::Store& store, const std::string& serial, const Zone& zone,
                        const std::string& folder, const Clock& clock) {
  db::Reader reader = store.reader();
  const auto facts = sequence::label_facts_of_serial(reader, serial, zone);
  if (!facts) return facts.error();
  if (facts->copy > 1) return {};  // made by an earlier start
  auto drawn = DrawnLabel::draw(pages, *facts, LabelForm{}, clock.utc_now(), folder);
  if (!drawn) return drawn.error();
  const auto entry = drawn->entry("station", {});
  const auto written = store.commit([&](db::Change& change) { sequence::make_label_entry(change, entry); });
  if (!written) return written.error();
  return drawn->put_in_place();
}

}  // namespace

Result<int> make_demo_labels(PageMaker& pages, const DemoResult& result, const Build& build) {
  const auto zone = zone_of(result.folder);
  if (!zone) return zone.error();
  const SystemClock clock;
  db::StoreOptions options;
  options.path = result.folder.ledger();
  options.create = false;
  options.program_version = build.version;
  options.program_commit = build.commit;
  auto store = db::Store::open(options, clock);
  if (!store) return store.error();
  for (const std::string& serial : serials_with_verdict(result))
    if (auto made = make_label(pages, **store, serial, *zone, result.folder.labels(), clock); !made)
      return made.error();
  return labels_in(result.folder.labels());
}

Result<void> write_demo_report(PageMaker& pages, const DemoFolder& folder) {
  const auto zone = zone_of(folder);
  if (!zone) return zone.error();
  auto reader = db::Reader::open(folder.ledger());
  if (!reader) return reader.error();
  trace::ShiftQuestion question;
  question.zone = *zone;
  const trace::ShiftFacts facts = trace::shift_facts(*reader, question);
  const auto drawn = pages.shift_report(facts, page_notes(*zone, folder.ledger(), facts.seal), folder.report());
  if (!drawn) return drawn.error();
  return {};
}

}  // namespace probewright::text
