#include "station/text/found_words.h"

#include "station/text/history_words.h"
#include "station/text/table.h"
#include "station/trace/words.h"

namespace probewright::text {
namespace {

std::string to_the_second(UtcTime time) { return to_text(time).substr(0, 19) + "Z"; }

std::string upper_case(std::string word) {
  for (char& c : word)
    if (c >= 'a' && c <= 'z') c = static_cast<char>(c - 'a' + 'A');
  return word;
}

std::string ended_words(const db::RunBrief& run) {
  if (!run.closing) return "";
  std::string words = trace::cause_words(run.closing->cause, run.closing->cause_words, run.closing->failing);
  const std::string likely = run.closing->bench.text("likely_cause_words");
  return likely.empty() ? words : words + "; likely: " + likely;
}

std::string runs_table(const std::vector<db::RunBrief>& runs) {
  Table table({"run", "opened", "serial", "purpose", "try", "lot", "nest", "operator", "verdict", "why"},
              {Side::right, Side::left, Side::left, Side::left, Side::right, Side::left, Side::right});
  for (const db::RunBrief& run : runs)
    table.add({std::to_string(run.run.value), to_the_second(run.opened_at), run.serial, run.purpose,
               std::to_string(run.try_number), run.lot, std::to_string(run.nest), run.operator_name,
               run.closing ? upper_case(run.closing->verdict) : "open", ended_words(run)});
  return table.text(2);
}

std::string tally_of(const std::vector<db::RunBrief>& runs) {
  int passed = 0, failed = 0, voided = 0, open = 0;
  bool emulated = false;
  for (const db::RunBrief& run : runs) {
    ++(!run.closing                     ? open
       : run.closing->verdict == "pass" ? passed
       : run.closing->verdict == "fail" ? failed
                                        : voided);
    emulated = emulated || run.emulated;
  }
  std::string words = std::to_string(runs.size()) + (runs.size() == 1 ? " run" : " runs");
  const auto add = [&](int count, const char* what) {
    if (count > 0) words += ", " + std::to_string(count) + " " + what;
  };
  add(passed, "pass"), add(failed, "fail"), add(voided, "void"), add(open, "open");
  return words + (emulated ? "\nDEMONSTRATION, made on an emulated bench" : "");
}

Json json_of(const db::RunBrief& run) {
  Json json = Json::object();
  json.set("run", run.run.value).set("serial", run.serial).set("opened_at", to_text(run.opened_at));
  json.set("purpose", run.purpose).set("emulated", run.emulated).set("lot", run.lot).set("model", run.model);
  json.set("sheet_revision", run.sheet_revision).set("station", run.station).set("nest", run.nest);
  json.set("operator", run.operator_name).set("try", run.try_number);
  const auto& closing = run.closing;
  json.set("closed_at", closing ? Json{to_text(closing->closed_at)} : Json{});
  json.set("closing_entry", closing ? Json{closing->entry} : Json{});
  json.set("verdict", closing ? Json{closing->verdict} : Json{});
  json.set("cause", closing ? Json{closing->cause} : Json{});
  json.set("cause_words", closing ? Json{closing->cause_words} : Json{});
  json.set("provisional", closing && closing->provisional);
  const std::string likely = closing ? closing->bench.text("likely_cause") : "";
  json.set("likely_cause", likely.empty() ? Json{} : Json{likely});
  Json failing = Json::array();
  if (closing)
    for (const std::string& check : closing->failing) failing.add(check);
  return std::move(json.set("failing", std::move(failing)));
}

}  // namespace

std::string words_of(const trace::Found& found, std::string_view of) {
  std::string text = std::string{of} + ": " + tally_of(found.runs) + "\n";
  if (!found.runs.empty()) text += "\nRuns\n" + runs_table(found.runs) + "\n";
  if (!found.entries.empty()) text += "\n" + words_of(found.entries) + "\n";
  return text + "\n" + words_of(found.seal) + "\n";
}

Json json_of(const trace::Found& found, std::string_view key, std::string_view value) {
  Json runs = Json::array(), entries = Json::array();
  for (const db::RunBrief& run : found.runs) runs.add(json_of(run));
  for (const db::EntryRecord& entry : found.entries) entries.add(json_of(entry));
  Json json = Json::object();
  json.set("format", 1).set(key, value);
  json.set("seal", to_hex(found.seal.hash)).set("seal_entry", found.seal.entry);
  return std::move(json.set("runs", std::move(runs)).set("entries", std::move(entries)));
}

std::string words_of(const trace::EntryFound& found) {
  const db::EntryRecord& entry = found.entry;
  std::string text = "Entry " + std::to_string(entry.number) + ": " + entry.kind + ", " + to_text(entry.time) + ", " +
                     entry.who + "\n  " + trace::entry_words(entry) + "\n  hash " + to_hex(entry.hash) + "\n  data " +
                     canonical(entry.data) + "\n";
  if (found.run) text += "\nRuns\n" + runs_table({*found.run}) + "\n";
  return text + "\n" + words_of(found.seal) + "\n";
}

Json json_of(const trace::EntryFound& found) {
  Json entry = json_of(found.entry);
  entry.set("hash", to_hex(found.entry.hash));
  Json json = Json::object();
  json.set("format", 1).set("seal", to_hex(found.seal.hash)).set("seal_entry", found.seal.entry);
  return std::move(json.set("entry", std::move(entry)).set("run", found.run ? json_of(*found.run) : Json{}));
}

}  // namespace probewright::text
