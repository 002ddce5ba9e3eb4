#include "station/trace/words.h"

#include <algorithm>
#include <cctype>

#include "limits/words.h"
#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/trace/history.h"

namespace probewright::trace {
namespace {

std::string upper_case(std::string word) {
  std::transform(word.begin(), word.end(), word.begin(), [](unsigned char c) { return std::toupper(c); });
  return word;
}

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
  switch (standing_of(reading)) {
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

/// "2: smudged" ...: what is added after a colon, where there is anything.
std::string with(std::string words, std::string_view sign, const std::string& more) {
  return more.empty() ? words : std::move(words.append(sign).append(more));
}

std::string label_words(const Body& data) {
  const std::int64_t copy = data.number("copy", 1);
  const std::string words = data.text("kind") + " label of run " + std::to_string(data.number("run"));
  return with(copy > 1 ? words + ", copy " + std::to_string(copy) : words, ": ", data.text("reason"));
}

std::string lot_words(const Body& data) {
  std::string words = with(data.text("lot"), ", ", data.text("model"));
  if (const std::int64_t quantity = data.number("quantity")) words += ", " + std::to_string(quantity) + " probes";
  if (!data.text("first_serial").empty()) words += ", " + data.text("first_serial") + " to " + data.text("last_serial");
  return with(std::move(words), ", sheet ", data.text("sheet"));
}

std::string run_words(const Body& data) {
  return data.text("serial") + ", " + data.text("purpose") + ", nest " + std::to_string(data.number("nest"));
}

std::string document_body_words(const Body& data) {
  return with(data.text("kind") + " " + data.text("name"), ", revision ", data.text("revision"));
}

/// Texts, numbers and yes/no of a body, "name: value; ...", as far as they fit on a line.
std::string plain_words(const Body& data) {
  constexpr std::size_t longest = 160;
  std::string words;
  if (!data.object()) return words;
  for (const auto& [key, value] : *data.object()) {
    std::string told;
    if (value.string()) told = *value.string();
    if (value.integer()) told = std::to_string(*value.integer());
    if (value.boolean()) told = *value.boolean() ? "yes" : "no";
    if (told.empty() || told.size() >= 40) continue;  // a digest says nothing to people
    words += (words.empty() ? "" : "; ") + limits::reason_words(key) + ": " + told;
    if (words.size() > longest) return words.substr(0, longest) + "...";
  }
  return words;
}

}  // namespace

std::string shown_as(std::string_view slug) {
  const Check* check = find_check(slug);
  return std::string{check ? check->shown_as : slug};
}

ReadingWords words_of(const db::ReadingRow& reading) {
  ReadingWords words;
  words.check = shown_as(reading.check);
  words.state = standing_words(reading);
  if (!reading.value) return words;
  if (reading.unit == "yes/no") {
    words.value = *reading.value == 0.0 ? "no" : "yes";
    return words;
  }
  const int decimals = decimals_of(reading);
  const bool guarded = reading.acceptance_lower != reading.lower || reading.acceptance_upper != reading.upper;
  words.value = fixed(*reading.value, decimals);
  if (reading.expanded_uncertainty) words.expanded = fixed(*reading.expanded_uncertainty, decimals);
  if (reading.unit != "1") words.unit = reading.unit;
  words.limits = window(reading.lower, reading.upper);
  if (guarded) words.accepted = window(reading.acceptance_lower, reading.acceptance_upper);
  if (reading.margin) words.margin = margin_words(*reading.margin);
  if (reading.cut_short) words.state += ", cut short";
  return words;
}

std::string margin_words(double margin) { return fixed(margin, limits::decimals_apart(margin, 0.0, 2)); }

std::string standing_in_words(const db::RunOpened& opened) {
  std::string words;
  if (opened.emulated) words += "DEMONSTRATION, made on an emulated bench";
  if (opened.purpose != "production")
    words += (words.empty() ? "" : "; ") + upper_case(opened.purpose) + ", no production run";
  return words;
}

std::string verdict_words(const std::optional<db::ClosingRecord>& closing) {
  if (!closing) return "OPEN, no verdict";
  return upper_case(closing->verdict) + (closing->provisional ? " (provisional)" : "");
}

std::string cause_words(std::string_view cause, std::string_view told, const std::vector<std::string>& failing) {
  const bool says_nothing = cause == "limits" || cause == "completed";  // the verdict and the checks say it
  std::string words = !told.empty() ? std::string{told} : says_nothing ? "" : limits::reason_words(cause);
  std::string checks;
  for (const std::string& check : failing) checks += (checks.empty() ? "" : ", ") + shown_as(check);
  if (checks.empty()) return words;
  return words.empty() ? "failing: " + checks : words + "; failing: " + checks;
}

std::string device_words(const db::RunDevice& device) {
  return device.role + ": " + device.identity + ", firmware " + device.firmware +
         (device.certificate_number.empty() ? ", no certificate" : ", certificate " + device.certificate_number);
}

std::string document_words(const db::NamedDocument& document) {
  return document.name + (document.revision.empty() ? "" : ", revision " + document.revision) + " (SHA-256 " +
         to_hex(document.digest).substr(0, 12) + "...)";
}

std::string entry_words(const db::EntryRecord& entry) {
  const Body& data = entry.data;
  if (entry.kind == "label_made") return label_words(data);
  if (entry.kind == "sign_in") return data.text("person") + " as " + data.text("role");
  if (entry.kind == "sign_out") return data.text("person");
  if (entry.kind == "lot_opened" || entry.kind == "lot_closed") return lot_words(data);
  if (entry.kind == "run_opened") return run_words(data);
  if (entry.kind == "run_closed")
    return "run " + std::to_string(data.number("run")) + ": " + upper_case(data.text("verdict"));
  if (entry.kind == "document") return document_body_words(data);
  return plain_words(data);
}

}  // namespace probewright::trace
