#include <algorithm>
#include <cctype>

#include "limits/words.h"
#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/text/history_words.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

using trace::Standing;

std::string shown_as(std::string_view slug) {
  const Check* check = find_check(slug);
  return std::string{check ? check->shown_as : slug};
}

std::string upper_case(std::string word) {
  std::transform(word.begin(), word.end(), word.begin(), [](unsigned char c) { return std::toupper(c); });
  return word;
}

std::string short_hash(const Digest& digest) { return to_hex(digest).substr(0, 12); }

/// Enough decimals that a value never looks like a limit that it is not.
int decimals_of(const db::ReadingRow& reading) {
  const double value = reading.value.value_or(0.0);
  int decimals = limits::decimals_for(reading.expanded_uncertainty.value_or(0.0), value);
  for (const auto& limit : {reading.lower, reading.upper, reading.acceptance_lower, reading.acceptance_upper})
    if (limit) decimals = limits::decimals_apart(value, *limit, decimals);
  return decimals;
}

/// A limit as it was applied, no digit dropped.
std::string whole(double limit) { return fixed(limit, limits::decimals_of(limit)); }

std::string window(const std::optional<double>& lower, const std::optional<double>& upper) {
  if (lower && upper) return whole(*lower) + " to " + whole(*upper);
  if (upper) return "up to " + whole(*upper);
  if (lower) return "from " + whole(*lower) + " up";
  return "";
}

std::string standing_words(const db::ReadingRow& reading) {
  switch (trace::standing_of(reading)) {
    case Standing::ok:
      return "ok";
    case Standing::outside:
      return "OUTSIDE the limit";
    case Standing::too_close:
      return "NOT OK: inside the limit, too close for our uncertainty";
    case Standing::unusable:
      return "NOT OK: its uncertainty is not the declared one";
    case Standing::missing:
      return "NO READING: " + limits::reason_words(reading.none_reason);
    case Standing::watched:
      return reading.value ? "watched" : "watched; no reading: " + limits::reason_words(reading.none_reason);
    case Standing::recorded:
      break;
  }
  return reading.value ? "recorded" : "no reading: " + limits::reason_words(reading.none_reason);
}

std::vector<std::string> cells_of(const db::ReadingRow& reading) {
  const std::string name = shown_as(reading.check), standing = standing_words(reading);
  if (!reading.value) return {name, "", "", "", "", "", "", standing};
  if (reading.unit == "yes/no") return {name, *reading.value == 0.0 ? "no" : "yes", "", "", "", "", "", standing};
  const int decimals = decimals_of(reading);
  const bool guarded = reading.acceptance_lower != reading.lower || reading.acceptance_upper != reading.upper;
  return {name,
          fixed(*reading.value, decimals),
          reading.expanded_uncertainty ? fixed(*reading.expanded_uncertainty, decimals) : "",
          reading.unit == "1" ? "" : reading.unit,
          window(reading.lower, reading.upper),
          guarded ? window(reading.acceptance_lower, reading.acceptance_upper) : "",
          reading.margin ? fixed(*reading.margin, limits::decimals_apart(*reading.margin, 0.0, 2)) : "",
          standing + (reading.cut_short ? ", cut short" : "")};
}

std::string readings_table(const db::RunRecord& run) {
  Table table({"check", "value", "U (k = 2)", "unit", "limits", "accepted", "margin", "state"},
              {Side::left, Side::right, Side::right, Side::left, Side::left, Side::left, Side::right});
  for (const db::ReadingRow& reading : run.readings) table.add(cells_of(reading));
  return table.text(4);
}

/// What must be said of a run that is no production evidence.
std::string overprint(const db::RunOpened& opened) {
  std::string words;
  if (opened.emulated) words += "DEMONSTRATION, made on an emulated bench";
  if (opened.purpose != "production")
    words += (words.empty() ? "" : "; ") + upper_case(opened.purpose) + ", no production run";
  return words;
}

std::string head_of(const db::RunRecord& run) {
  const std::string verdict = run.closing ? upper_case(run.closing->verdict) : "OPEN, no verdict";
  return "Run " + std::to_string(run.run.value) + ": " + verdict +
         (run.closing && run.closing->provisional ? " (provisional)" : "") + ", " + run.opened.purpose + ", try " +
         std::to_string(run.opened.try_number);
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

std::string cause_of(const db::ClosingRecord& closing) {
  std::string words = closing.cause_words.empty() ? limits::reason_words(closing.cause) : closing.cause_words;
  std::string failing;
  for (const std::string& check : closing.failing) failing += (failing.empty() ? "" : ", ") + shown_as(check);
  if (failing.empty()) return words;
  return words.empty() ? "failing: " + failing : words + "; failing: " + failing;
}

std::string document_line(const db::NamedDocument& document) {
  return document.role + ": " + document.name + (document.revision.empty() ? "" : ", revision " + document.revision) +
         " (SHA-256 " + short_hash(document.digest) + "...)";
}

std::string device_line(const db::RunDevice& device) {
  return device.role + ": " + device.identity + ", firmware " + device.firmware +
         (device.certificate_number.empty() ? ", no certificate" : ", certificate " + device.certificate_number);
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
  return shown_as(nearest->check) + ", margin " +
         fixed(*nearest->margin, limits::decimals_apart(*nearest->margin, 0.0, 2));
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

std::string words_of(const db::RunRecord& run) {
  Facts facts;
  facts.add("note", overprint(run.opened));
  facts.add("time", when(run));
  facts.add("place", where(run.opened));
  if (run.closing) facts.add("cause", cause_of(*run.closing));
  facts.add("nearest", nearest_line(run));
  for (std::size_t i = 0; i < run.documents.size(); ++i)
    facts.add(i == 0 ? "documents" : "", document_line(run.documents[i]));
  for (std::size_t i = 0; i < run.opened.devices.size(); ++i)
    facts.add(i == 0 ? "devices" : "", device_line(run.opened.devices[i]));
  facts.add("software",
            run.opened.software_version + ", commit " + run.opened.software_commit + ", " + run.opened.compiler);
  facts.add("captures", captures_line(run));
  std::string text = head_of(run) + "\n" + facts.text();
  if (!run.readings.empty()) text += "\n" + readings_table(run) + "\n";
  return text;
}

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
  return text + "\nRead from the ledger up to entry " + std::to_string(history.seal.entry) + ", seal " +
         to_hex(history.seal.hash) + "\n";
}

}  // namespace probewright::text
