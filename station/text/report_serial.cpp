#include "station/text/history_words.h"
#include "station/text/label_files.h"
#include "station/text/ledger_file.h"
#include "station/text/plant_zone.h"
#include "station/text/report_page.h"

namespace probewright::text {

int report_serial(const ReportSerialOptions& options, PageMaker* pages, Console& console) {
  const auto file = ledger_file(options.ledger, options.choice);
  if (!file) return console.refuse(file.error());
  auto reader = db::Reader::open(*file);
  if (!reader) return console.refuse(reader.error());
  const trace::History history = trace::history_of(*reader, options.serial);
  if (history.runs.empty())
    return console.refuse(Problem{"serial_not_in_ledger", *file, {{"serial", options.serial}}}, answer_is_no);
  const trace::PageNotes notes = page_notes(plant_zone(*reader, options.choice, console), *file, history.seal);
  const auto page =
      write_page(options, "serial-" + file_part(options.serial) + ".pdf", pages, console,
                 [&](PageMaker& maker, const std::string& pdf) { return maker.serial_report(history, notes, pdf); });
  if (!page) return console.refuse(page.error());
  if (console.json())
    console.print_json(std::move(json_of(history).set("report", options.out.empty() ? Json{} : Json{options.out})));
  else
    console.print_text(words_of(history) + *page + "\n");
  return done;
}

}  // namespace probewright::text
