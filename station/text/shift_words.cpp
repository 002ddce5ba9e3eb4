#include "station/text/shift_words.h"

#include "station/base/numbers.h"
#include "station/text/history_words.h"
#include "station/text/table.h"
#include "station/trace/words.h"

namespace probewright::text {
namespace {

std::string number(int value) { return std::to_string(value); }

std::string percent(int part, int whole) {
  return whole > 0 ? fixed(100.0 * part / whole, 1) + " %" : std::string{"none"};
}

std::string head_of(const trace::ShiftFacts& facts, const Zone& zone) {
  return (facts.lot.empty() ? "Shift at " + facts.station : "Lot " + facts.lot + " at " + facts.station) + ", " +
         zone.local_text(facts.from).substr(0, 16) + " to " + zone.local_text(facts.to).substr(0, 16) + " (" +
         zone.name() + ")\n" + (facts.emulated ? "DEMONSTRATION, made on an emulated bench\n" : "");
}

std::string counts_of(const trace::ShiftFacts& facts) {
  const trace::ShiftCounts& probes = facts.probes;
  std::string text = "\n" + number(probes.tested()) + " probes tested: " + number(probes.passed) + " passed, " +
                     number(probes.failed) + " failed, " + number(probes.voided) + " void\n" + "yield " +
                     percent(probes.passed, probes.judged()) + ", first-pass yield " +
                     percent(probes.passed_first_time, probes.judged()) + " (" + number(probes.passed_first_time) +
                     " of " + number(probes.judged()) + " with a verdict)\n" + number(facts.runs.all()) +
                     " production runs: " + number(facts.runs.passed) + " passed, " + number(facts.runs.failed) +
                     " failed, " + number(facts.runs.voided) + " void\n";
  if (facts.sent_to_rework > 0) text += number(facts.sent_to_rework) + " of them sent to rework\n";
  for (const trace::PurposeFacts& other : facts.other_purposes)
    text += number(other.runs.all()) + " " + other.purpose + " runs, not counted above: " + number(other.runs.passed) +
            " passed, " + number(other.runs.failed) + " failed, " + number(other.runs.voided) + " void\n";
  if (facts.left_open > 0) text += number(facts.left_open) + " runs had begun and not ended\n";
  return text;
}

std::string failing_of(const trace::ShiftFacts& facts) {
  if (facts.failing.empty()) return "\nNo check failed.\n";
  Table table({"failing check", "failed runs", "likely cause"}, {Side::left, Side::right});
  for (const trace::FailingCheckFacts& check : facts.failing)
    table.add({trace::shown_as(check.check), number(check.runs), check.likely_cause_words});
  return "\n" + table.text() + "\n";
}

std::string nests_of(const trace::ShiftFacts& facts) {
  if (facts.nests.empty()) return "";
  Table table({"nest", "runs", "passed", "failed", "void", "mean cycle", "longest", "commonest failing check"},
              {Side::right, Side::right, Side::right, Side::right, Side::right, Side::right, Side::right});
  for (const trace::NestFacts& nest : facts.nests)
    table.add({number(nest.nest), number(nest.runs.all()), number(nest.runs.passed), number(nest.runs.failed),
               number(nest.runs.voided), nest.mean_cycle_s ? fixed(*nest.mean_cycle_s, 1) + " s" : "",
               nest.longest_cycle_s ? fixed(*nest.longest_cycle_s, 1) + " s" : "",
               trace::shown_as(nest.commonest_failing_check)});
  return "\n" + table.text() + "\n";
}

std::string nearest_of(const trace::ShiftFacts& facts) {
  constexpr std::size_t most = 5;
  if (facts.series.empty()) return "";
  Table table({"nearest to its limits", "model", "runs", "one in ten has a margin below"},
              {Side::left, Side::left, Side::right, Side::right});
  for (std::size_t i = 0; i < facts.series.size() && i < most; ++i) {
    const trace::CheckSeries& series = facts.series[i];
    table.add({trace::shown_as(series.check), series.model, std::to_string(series.values.size()),
               trace::margin_words(series.low_margin)});
  }
  return "\n" + table.text() + "\n";
}

std::string people_and_lots(const trace::ShiftFacts& facts) {
  std::string text = "\n";
  for (const trace::PersonFacts& person : facts.people)
    text +=
        person.name + (person.role.empty() ? "" : " (" + person.role + ")") + ": " + number(person.runs) + " runs\n";
  for (const trace::LotFacts& lot : facts.lots)
    text += "lot " + lot.lot + ", " + lot.model + ", sheet revision " + lot.sheet_revisions + ": " +
            number(lot.runs.all()) + " runs" + (lot.quantity ? ", opened for " + std::to_string(*lot.quantity) : "") +
            (lot.closed ? ", closed" : "") + "\n";
  return text == "\n" ? "" : text;
}

Json json_of(const trace::RunCounts& counts) {
  Json json = Json::object();
  json.set("runs", counts.all()).set("passed", counts.passed).set("failed", counts.failed);
  return std::move(json.set("void", counts.voided));
}

Json json_of(const trace::FailingCheckFacts& check) {
  Json json = Json::object();
  json.set("check", check.check).set("runs", check.runs);
  json.set("likely_cause", check.likely_cause.empty() ? Json{} : Json{check.likely_cause});
  json.set("likely_cause_words", check.likely_cause_words).set("runs_with_that_cause", check.runs_with_that_cause);
  return json;
}

Json json_of(const trace::NestFacts& nest) {
  Json json = json_of(nest.runs);
  json.set("nest", nest.nest).set("mean_cycle_s", nest.mean_cycle_s).set("longest_cycle_s", nest.longest_cycle_s);
  return std::move(json.set("commonest_failing_check",
                            nest.commonest_failing_check.empty() ? Json{} : Json{nest.commonest_failing_check}));
}

Json json_of(const trace::PersonFacts& person) {
  Json json = Json::object();
  return std::move(json.set("name", person.name).set("role", person.role).set("runs", person.runs));
}

Json json_of(const trace::LotFacts& lot) {
  Json json = json_of(lot.runs);
  json.set("lot", lot.lot).set("model", lot.model).set("sheet_revisions", lot.sheet_revisions);
  return std::move(json.set("quantity", lot.quantity).set("closed", lot.closed));
}

Json json_of(const trace::PurposeFacts& other) {
  Json json = json_of(other.runs);
  return std::move(json.set("purpose", other.purpose));
}

Json json_of(const trace::Stretch& stretch) {
  Json json = json_of(stretch.runs);
  return std::move(json.set("begin", stretch.begin));
}

Json json_of(const trace::CheckSeries& series) {
  Json runs = Json::array(), values = Json::array();
  for (const std::int64_t run : series.runs) runs.add(run);
  for (const auto& value : series.values) values.add(value);
  Json json = Json::object();
  json.set("check", series.check).set("model", series.model).set("unit", series.unit);
  json.set("acceptance_lower", series.lower).set("acceptance_upper", series.upper);
  json.set("limits_changed", series.limits_changed).set("low_margin", series.low_margin);
  return std::move(json.set("runs", std::move(runs)).set("values", std::move(values)));
}

template <class T>
Json list_of(const std::vector<T>& items) {
  Json list = Json::array();
  for (const T& item : items) list.add(json_of(item));
  return list;
}

}  // namespace

std::string words_of(const trace::ShiftFacts& facts, const Zone& zone) {
  return head_of(facts, zone) + counts_of(facts) + failing_of(facts) + nests_of(facts) + nearest_of(facts) +
         people_and_lots(facts) + "\n" + words_of(facts.seal) + "\n";
}

Json json_of(const trace::ShiftFacts& facts) {
  const trace::ShiftCounts& counts = facts.probes;
  Json probes = Json::object();
  probes.set("tested", counts.tested()).set("passed", counts.passed).set("failed", counts.failed);
  probes.set("void", counts.voided).set("passed_first_time", counts.passed_first_time);
  probes.set("first_pass_yield", trace::first_pass_yield(counts));
  Json json = Json::object();
  json.set("format", 1).set("station", facts.station).set("emulated", facts.emulated);
  json.set("lot", facts.lot.empty() ? Json{} : Json{facts.lot});
  json.set("from", to_text(facts.from)).set("to", to_text(facts.to));
  json.set("first_entry", facts.entries.first).set("last_entry", facts.entries.last);
  json.set("seal", to_hex(facts.seal.hash)).set("seal_entry", facts.seal.entry);
  json.set("probes", std::move(probes)).set("production", json_of(facts.runs));
  json.set("left_open", facts.left_open).set("sent_to_rework", facts.sent_to_rework);
  json.set("other_purposes", list_of(facts.other_purposes)).set("failing", list_of(facts.failing));
  json.set("nests", list_of(facts.nests)).set("people", list_of(facts.people)).set("lots", list_of(facts.lots));
  return std::move(json.set("stretches", list_of(facts.stretches)).set("series", list_of(facts.series)));
}

}  // namespace probewright::text
