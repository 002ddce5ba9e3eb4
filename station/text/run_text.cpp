#include "station/text/run_text.h"

#include <cmath>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

using sequence::JudgedReading;
using sequence::RunOutcome;
using sequence::RunVerdict;

/// Digits so that the expanded uncertainty has two; six significant ones where there is none.
std::string shown(double value, const std::optional<double>& expanded_uncertainty) {
  const double scale =
      expanded_uncertainty && *expanded_uncertainty > 0.0 ? *expanded_uncertainty : std::abs(value) * 1e-4;
  if (!(scale > 0.0)) return shortest(value);
  const int decimals = 1 - static_cast<int>(std::floor(std::log10(scale)));
  return fixed(value, decimals < 0 ? 0 : decimals > 9 ? 9 : decimals);
}

std::string value_text(const JudgedReading& judged) {
  const auto& reading = judged.reading;
  if (!reading.value) return "none: " + reading.none_reason;
  if (reading.unit == "yes/no") return *reading.value != 0.0 ? "yes" : "no";
  return shown(*reading.value, reading.expanded_uncertainty);
}

std::string name_of(const std::string& check) {
  const Check* known = find_check(check);
  return known ? std::string{known->shown_as} : check;
}

void add_row(Table& table, const JudgedReading& judged) {
  const auto& [reading, judgement] = judged;
  const auto optional = [](const std::optional<double>& value) { return value ? shortest(*value) : std::string{}; };
  table.add({name_of(reading.check), value_text(judged),
             reading.expanded_uncertainty ? shown(*reading.expanded_uncertainty, reading.expanded_uncertainty) : "",
             reading.unit == "yes/no" ? "" : reading.unit, optional(judgement.acceptance.lower),
             optional(judgement.acceptance.upper), judgement.margin ? fixed(*judgement.margin, 2) : "",
             std::string{slug(judgement.outcome)}});
}

std::string headline(const RunOutcome& outcome) {
  std::string line = outcome.serial + ": ";
  line += outcome.verdict == RunVerdict::pass ? "PASS" : outcome.verdict == RunVerdict::fail ? "FAIL" : "VOID";
  return line + " (" + std::string{slug(outcome.purpose)} + " run " + std::to_string(outcome.run) + ", nest " +
         std::to_string(outcome.nest) + ", " + fixed(seconds(outcome.cycle), 2) + " s)\n";
}

}  // namespace

std::string run_text(const RunOutcome& outcome) {
  std::string text = headline(outcome);
  if (outcome.emulated) text += "DEMONSTRATION, made on an emulated bench\n";
  if (!outcome.cause_words.empty()) text += outcome.cause_words + "\n";
  for (const JudgedReading& judged : outcome.readings)
    for (const std::string& failing : outcome.failing)
      if (judged.reading.check == failing) text += judged.judgement.words + "\n";
  Table table({"check", "reading", "U", "unit", "accept from", "to", "margin", "judged"},
              {Side::left, Side::right, Side::right, Side::left, Side::right, Side::right, Side::right, Side::left});
  for (const JudgedReading& judged : outcome.readings) add_row(table, judged);
  if (!table.empty()) text += "\n" + table.text() + "\n";
  text += "\nentry " + std::to_string(outcome.closing_entry) + ", seal " + to_hex(outcome.seal) + "\n";
  return text;
}

Json run_json(const RunOutcome& outcome) {
  Json readings = Json::array();
  for (const auto& [reading, judgement] : outcome.readings) {
    Json row = Json::object();
    row.set("check", reading.check).set("value", reading.value);
    if (!reading.value) row.set("none_reason", reading.none_reason);
    row.set("expanded_uncertainty", reading.expanded_uncertainty).set("unit", reading.unit);
    row.set("lower", judgement.limits.lower).set("upper", judgement.limits.upper);
    row.set("acceptance_lower", judgement.acceptance.lower).set("acceptance_upper", judgement.acceptance.upper);
    row.set("margin", judgement.margin).set("conformance_probability", judgement.conformance_probability);
    row.set("outcome", slug(judgement.outcome)).set("words", judgement.words);
    readings.add(std::move(row));
  }
  Json failing = Json::array();
  for (const std::string& check : outcome.failing) failing.add(check);
  Json json = Json::object();
  json.set("format", 1).set("run", outcome.run).set("serial", outcome.serial).set("nest", outcome.nest);
  json.set("purpose", slug(outcome.purpose)).set("emulated", outcome.emulated).set("verdict", slug(outcome.verdict));
  json.set("cause", outcome.cause).set("cause_words", outcome.cause_words).set("failing", std::move(failing));
  json.set("cycle_s", seconds(outcome.cycle)).set("asked_again", outcome.asked_again);
  json.set("entry", outcome.closing_entry).set("seal", to_hex(outcome.seal)).set("readings", std::move(readings));
  return json;
}

}  // namespace probewright::text
