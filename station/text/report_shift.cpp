#include "db/queries/seal.h"
#include "station/text/label_files.h"
#include "station/text/ledger_file.h"
#include "station/text/plant_zone.h"
#include "station/text/report_page.h"
#include "station/text/shift_words.h"

namespace probewright::text {
namespace {

/// What is asked for, or why it cannot be.
Result<trace::ShiftQuestion> question_of(const ReportShiftOptions& options, db::Reader& reader, const Zone& zone) {
  trace::ShiftQuestion question;
  question.lot = options.lot;
  question.zone = zone;
  const bool from_to = !options.from.empty() || !options.to.empty();
  if (!options.day.empty() && from_to)
    return Problem{
        "usage_not_together", "probewright report shift", {{"first", "--day"}, {"second", "--from or --to"}}};
  std::string day = options.day;
  if (day.empty() && !from_to && options.lot.empty())
    if (const auto newest = db::newest_entry_time(reader)) day = zone.day(*newest);
  if (!day.empty()) {
    const auto period = trace::day_in(zone, day);
    if (!period) return period.error();
    question.period = *period;
  }
  if (!from_to) return question;
  trace::Period period{{}, {std::numeric_limits<std::int64_t>::max() / 2}};
  if (const auto newest = db::newest_entry_time(reader)) period.to = {newest->microseconds + 1};
  for (const auto& [text, moment] : {std::pair{&options.from, &period.from}, std::pair{&options.to, &period.to}}) {
    if (text->empty()) continue;
    const auto read = trace::moment_in(zone, *text);
    if (!read) return read.error();
    *moment = *read;
  }
  if (!(period.from < period.to)) return Problem{"period_empty", "probewright report shift"};
  question.period = period;
  return question;
}

std::string name_of(const trace::ShiftFacts& facts, const Zone& zone) {
  return facts.lot.empty() ? "shift-" + zone.day(facts.from) + ".pdf" : "lot-" + file_part(facts.lot) + ".pdf";
}

}  // namespace

int report_shift(const ReportShiftOptions& options, PageMaker* pages, Console& console) {
  const auto file = ledger_file(options.ledger, options.choice);
  if (!file) return console.refuse(file.error());
  auto reader = db::Reader::open(*file);
  if (!reader) return console.refuse(reader.error());
  const Zone zone = plant_zone(*reader, options.choice, console);
  const auto question = question_of(options, *reader, zone);
  if (!question) return console.refuse(question.error());
  const trace::ShiftFacts facts = trace::shift_facts(*reader, *question);
  const trace::PageNotes notes = page_notes(zone, *file, facts.seal);
  const auto page =
      write_page(options, name_of(facts, zone), pages, console,
                 [&](PageMaker& maker, const std::string& pdf) { return maker.shift_report(facts, notes, pdf); });
  if (!page) return console.refuse(page.error());
  if (console.json())
    console.print_json(std::move(json_of(facts).set("report", options.out.empty() ? Json{} : Json{options.out})));
  else
    console.print_text(words_of(facts, zone) + *page + "\n");
  return done;
}

}  // namespace probewright::text
