#include "station/text/history_words.h"

#include <algorithm>

#include "station/base/numbers.h"
#include "station/text/table.h"
#include "station/trace/words.h"

namespace probewright::text {
namespace {

std::vector<std::string> cells_of(const db::ReadingRow& reading) {
  const trace::ReadingWords words = trace::words_of(reading);
  return {words.check,  words.value,    words.expanded, words.unit,
          words.limits, words.accepted, words.margin,   words.state};
}

std::string readings_table(const db::RunRecord& run) {
  Table table({"check", "value", "U (k = 2)", "unit", "limits", "accepted", "margin", "state"},
              {Side::left, Side::right, Side::right, Side::left, Side::left, Side::left, Side::right});
  for (const db::ReadingRow& reading : run.readings) table.add(cells_of(reading));
  return table.text(4);
}

std::string head_of(const db::RunRecord& run) {
  return "Run " + std::to_string(run.run.value) + ": " + trace::verdict_words(run.closing) + ", " + run.opened.purpose +
         ", try " + std::to_string(run.opened.try_number);
}

std::string when(const db::RunRecord& run) {
  const std::string opened = "opened " + to_text(run.opened_at);
  if (!run.closing) return opened + ", not closed";
  const auto took = run.closing->closed_at.microseconds - run.opened_at.microseconds;
  return opened + ", closed " + to_text(run.closing->closed_at) + " (" + fixed(static_cast<double>(took) * 1e-6, 2) +
         " s), entry " + std::to_string(run.closing->entry);
}

std::string where(const db::RunOpened& opened) {
  return opened.station + ", nest " + std::to_string(opened.nest) +
         (opened.operator_name.empty() ? "" : ", " + opened.operator_name) +
         (opened.lot.empty() ? ", no lot" : ", lot " + opened.lot) +
         (opened.ambient_temperature_C ? ", " + fixed(*opened.ambient_temperature_C, 1) + " degC" : "");
}

std::string captures_line(const db::RunRecord& run) {
  std::string line;
  for (const db::CaptureRecord& capture : run.captures)
    line += (line.empty() ? "" : ", ") + capture.kind + (capture.set_label.empty() ? "" : " " + capture.set_label) +
            (capture.pruned ? " (bytes pruned)" : "");
  return line.empty() ? "none" : line;
}

std::string nearest_line(const db::RunRecord& run) {
  const db::ReadingRow* nearest = trace::nearest_to_an_edge(run);
  if (!nearest) return "";
  return trace::shown_as(nearest->check) + ", margin " + trace::margin_words(*nearest->margin);
}

/// "  label    words", left out where there are none.
class Facts {
 public:
  void add(std::string label, const std::string& words) {
    if (words.empty()) return;
    label.resize(std::max<std::size_t>(label.size(), 11), ' ');
    text_ += "  " + label + words + "\n";
  }
  const std::string& text() const { return text_; }

 private:
  std::string text_;
};

}  // namespace

std::string words_of(const db::RunRecord& run) {
  Facts facts;
  facts.add("note", trace::standing_in_words(run.opened));
  facts.add("time", when(run));
  facts.add("place", where(run.opened));
  if (run.closing)
    facts.add("cause", trace::cause_words(run.closing->cause, run.closing->cause_words, run.closing->failing));
  if (run.closing) facts.add("likely", run.closing->bench.text("likely_cause_words"));
  if (run.closing) facts.add("rework", run.closing->bench.text("rework"));
  facts.add("nearest", nearest_line(run));
  for (std::size_t i = 0; i < run.documents.size(); ++i)
    facts.add(i == 0 ? "documents" : "", run.documents[i].role + ": " + trace::document_words(run.documents[i]));
  for (std::size_t i = 0; i < run.opened.devices.size(); ++i)
    facts.add(i == 0 ? "devices" : "", trace::device_words(run.opened.devices[i]));
  facts.add("software",
            run.opened.software_version + ", commit " + run.opened.software_commit + ", " + run.opened.compiler);
  facts.add("captures", captures_line(run));
  std::string text = head_of(run) + "\n" + facts.text();
  if (!run.readings.empty()) text += "\n" + readings_table(run) + "\n";
  return text;
}

namespace {

void add_count(std::string& words, int count, std::string_view what) {
  if (count > 0) words += ", " + std::to_string(count) + " " + std::string{what};
}

}  // namespace

std::string words_of(const trace::History& history) {
  const trace::Tally tally = trace::tally_of(history);
  std::string text = history.serial + ": " + std::to_string(tally.all()) + (tally.all() == 1 ? " run" : " runs");
  add_count(text, tally.pass, "pass");
  add_count(text, tally.fail, "fail");
  add_count(text, tally.void_runs, "void");
  add_count(text, tally.open, "open");
  text += "\n";
  for (const db::RunRecord& run : history.runs) text += "\n" + words_of(run);
  if (!history.entries.empty()) text += "\n" + words_of(history.entries) + "\n";
  return text + "\n" + words_of(history.seal) + "\n";
}

std::string words_of(const std::vector<db::EntryRecord>& entries) {
  Table table({"entry", "time", "kind", "who", "what"}, {Side::right});
  for (const db::EntryRecord& entry : entries)
    table.add({std::to_string(entry.number), to_text(entry.time).substr(0, 19) + "Z", entry.kind, entry.who,
               trace::entry_words(entry)});
  return "Other entries\n" + table.text(2);
}

std::string words_of(const db::Seal& seal) {
  return "Read from the ledger up to entry " + std::to_string(seal.entry) + ", seal " + to_hex(seal.hash);
}

}  // namespace probewright::text
