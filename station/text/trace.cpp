#include "station/text/trace.h"

#include "station/text/history_words.h"
#include "station/text/ledger_file.h"

namespace probewright::text {

int trace(const TraceOptions& options, Console& console) {
  const auto file = ledger_file(options.ledger, options.choice);
  if (!file) return console.refuse(file.error());
  auto reader = db::Reader::open(*file);
  if (!reader) return console.refuse(reader.error());
  const trace::History history = trace::history_of(*reader, options.serial);
  if (history.runs.empty())
    return console.refuse(Problem{"serial_not_in_ledger", *file, {{"serial", options.serial}}}, answer_is_no);
  if (console.json())
    console.print_json(json_of(history));
  else
    console.print_text(words_of(history));
  return done;
}

}  // namespace probewright::text
