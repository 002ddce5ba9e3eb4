#include "station/text/trace.h"

#include "station/text/found_words.h"
#include "station/text/history_words.h"
#include "station/text/ledger_file.h"
#include "station/text/plant_zone.h"

namespace probewright::text {
namespace {

/// One question to an open ledger.
struct Asked {
  const TraceOptions& options;
  const std::string& file;
  db::Reader& reader;
  Console& console;

  int serial() {
    const trace::History history = trace::history_of(reader, options.serial);
    if (history.runs.empty())
      return console.refuse(Problem{"serial_not_in_ledger", file, {{"serial", options.serial}}}, answer_is_no);
    if (console.json())
      console.print_json(json_of(history));
    else
      console.print_text(words_of(history));
    return done;
  }

  int entry() {
    const auto found = trace::found_entry(reader, *options.entry);
    if (!found) return console.refuse(found.error(), answer_is_no);
    if (console.json())
      console.print_json(json_of(*found));
    else
      console.print_text(words_of(*found));
    return done;
  }

  int day() {
    const auto period = trace::day_in(plant_zone(reader, options.choice, console), options.day);
    if (!period) return console.refuse(period.error());
    return tell(trace::found_within(reader, *period), "day", options.day);
  }

  int tell(const trace::Found& found, const std::string& key, const std::string& value) {
    const std::string of = key + " " + value;
    if (found.empty()) return console.refuse(Problem{"not_in_ledger", file, {{"what", of}}}, answer_is_no);
    if (console.json())
      console.print_json(json_of(found, key, value));
    else
      console.print_text(words_of(found, of));
    return done;
  }
};

}  // namespace

int trace(const TraceOptions& options, Console& console) {
  const auto file = ledger_file(options.ledger, options.choice);
  if (!file) return console.refuse(file.error());
  auto reader = db::Reader::open(*file);
  if (!reader) return console.refuse(reader.error());
  Asked asked{options, *file, *reader, console};
  if (!options.lot.empty()) return asked.tell(trace::found_of_lot(*reader, options.lot), "lot", options.lot);
  if (!options.person.empty())
    return asked.tell(trace::found_of_person(*reader, options.person), "person", options.person);
  if (options.entry) return asked.entry();
  if (!options.day.empty()) return asked.day();
  return asked.serial();
}

}  // namespace probewright::text
