#include "station/text/sheet_json.h"

#include "station/base/catalogue.h"
#include "station/text/console.h"

namespace probewright::text {
namespace {

using limits::CheckLine;
using limits::CheckRule;
using limits::Guard;
using limits::Use;

constexpr std::string_view slug(Use use) {
  switch (use) {
    case Use::judged:
      return "judged";
    case Use::watch:
      return "watch";
    case Use::record_only:
      break;
  }
  return "record_only";
}

constexpr std::string_view slug(limits::Move move) {
  switch (move) {
    case limits::Move::tighter:
      return "tighter";
    case limits::Move::looser:
      return "looser";
    case limits::Move::moved:
      return "moved";
    case limits::Move::neutral:
      break;
  }
  return "neutral";
}

Json json_of(const Guard& guard, double band) {
  if (guard.kind == Guard::Kind::none) return nullptr;
  Json json = Json::object();
  json.set(guard.kind == Guard::Kind::factor ? "factor" : "risk", guard.amount).set("band", band);
  return json;
}

Json json_of(const CheckRule& rule, const CheckLine& line) {
  const bool number = rule.use == Use::judged && !rule.must_be_yes;
  Json json = Json::object();
  json.set("check", rule.check).set("use", slug(rule.use)).set("unit", find_check(rule.check)->unit);
  json.set("must_be_yes", rule.must_be_yes);
  json.set("lower", rule.limits.lower).set("upper", rule.limits.upper);
  json.set("acceptance_lower", rule.acceptance.lower).set("acceptance_upper", rule.acceptance.upper);
  json.set("expanded_uncertainty", number ? Json{rule.expanded_uncertainty} : Json{});
  json.set("guard", json_of(rule.guard, line.guard_band));
  json.set("typical", rule.typical).set("at_degC", rule.at_degC).set("watch_beyond", rule.watch_beyond);
  json.set("conformance_at_acceptance", line.conformance_at_acceptance).set("words", line.words);
  return json;
}

Json json_of(const std::optional<limits::Bins>& bins) {
  if (!bins) return nullptr;
  Json all = Json::array();
  for (const limits::Bin& bin : bins->bins) {
    Json json = Json::object();
    json.set("name", bin.name).set("lower", bin.lower).set("upper", bin.upper).set("nominal", bin.nominal);
    all.add(std::move(json.set("id_resistor_ohm", bin.resistor_ohm)));
  }
  Json json = Json::object();
  json.set("by", bins->by).set("unit", find_check(bins->by)->unit).set("bins", std::move(all));
  return json;
}

Json json_of(const limits::Retest& retest) {
  Json json = Json::object();
  json.set("tries", retest.tries).set("after_s", retest.after_s);
  return json;
}

Json json_of(const limits::StopWhen& stop) {
  Json json = Json::object();
  json.set("fails_in_a_row", stop.fails_in_a_row).set("yield_below_percent", stop.yield_below_percent);
  json.set("of_last", stop.yield_below_percent ? Json{stop.of_last} : Json{});
  return json;
}

Json checks_of(const limits::SheetReport& report) {
  Json all = Json::array();
  for (const CheckLine& line : report.lines) all.add(json_of(*report.sheet->find(line.check), line));
  return all;
}

Json json_of_all(const Problems& problems) {
  Json all = Json::array();
  for (const Problem& problem : problems) all.add(text::json_of(problem));
  return all;
}

}  // namespace

Json json_of(const limits::SheetReport& report) {
  const limits::Sheet& sheet = *report.sheet;
  Json json = Json::object();
  json.set("format", 1).set("sheet", sheet.name).set("revision", sheet.revision);
  json.set("reason", sheet.reason).set("decision", sheet.decision);
  json.set("for_model", sheet.for_model ? Json{to_hex(*sheet.for_model)} : Json{});
  json.set("checks", checks_of(report)).set("bins", json_of(sheet.bins));
  json.set("retest", json_of(sheet.retest)).set("stop_when", json_of(sheet.stop_when));
  json.set("warnings", json_of_all(report.warnings));
  return json;
}

Json json_of(const limits::SheetDifference& difference) {
  Json changes = Json::array();
  for (const limits::Change& change : difference.changes) {
    Json json = Json::object();
    json.set("subject", change.subject).set("what", change.what);
    json.set("before", change.before).set("after", change.after).set("move", slug(change.move));
    changes.add(std::move(json));
  }
  Json json = Json::object();
  json.set("format", 1).set("before", difference.before_title).set("after", difference.after_title);
  json.set("changes", std::move(changes));
  return json;
}

}  // namespace probewright::text
