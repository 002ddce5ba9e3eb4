#include "station/text/rederive.h"

#include "station/base/numbers.h"
#include "station/text/interruption.h"
#include "station/text/ledger_file.h"
#include "station/text/table.h"
#include "station/trace/rederive.h"

namespace probewright::text {
namespace {

constexpr int shown_digits = 3;  // of a difference in units of U

Json json_of(const trace::ReadingDifference& difference) {
  Json json = Json::object();
  json.set("check", difference.check).set("unit", difference.unit);
  json.set("agreement", trace::slug(difference.agreement));
  json.set("stored", difference.stored).set("derived", difference.derived).set("in_U", difference.in_U);
  json.set("stored_ok", difference.stored_ok).set("derived_ok", difference.derived_ok);
  json.set("stored_none_reason", difference.stored_none).set("derived_none_reason", difference.derived_none);
  json.set("other_method", difference.other_method);
  return json;
}

Json json_of(const trace::RunAgreement& run) {
  Json json = Json::object();
  json.set("run", run.run.value).set("serial", run.serial).set("lot", run.lot).set("commit", run.commit);
  json.set("stored_verdict", run.stored_verdict);
  json.set("derived_verdict", run.problem ? Json{nullptr} : Json{run.derived_verdict});
  Json differences = Json::array();
  for (const auto& difference : run.differences) differences.add(json_of(difference));
  json.set("differences", std::move(differences));
  json.set("problem", run.problem ? text::json_of(*run.problem) : Json{nullptr});
  return json;
}

Json json_of(const trace::CheckAgreement& check) {
  Json json = Json::object();
  json.set("check", check.check).set("unit", check.unit).set("compared", check.compared);
  json.set("bitwise", check.bitwise).set("close", check.close).set("differing", check.differing);
  json.set("largest", check.largest).set("largest_in_U", check.largest_in_U);
  json.set("largest_run", check.largest > 0.0 ? Json{check.largest_run.value} : Json{nullptr});
  return json;
}

Json json_of(const trace::RederiveReport& report, bool agrees) {
  Json json = Json::object();
  json.set("format", 1).set("agrees", agrees).set("stopped", report.stopped);
  json.set("seal", to_hex(report.seal.hash)).set("seal_entry", report.seal.entry);
  json.set("runs", report.runs).set("derived", report.derived).set("same_verdict", report.same_verdict);
  json.set("not_derived", report.not_derived).set("bitwise_runs", report.bitwise_runs);
  json.set("same_build", report.same_build).set("readings", report.readings).set("bitwise", report.bitwise);
  json.set("close", report.close).set("differing", report.differing);
  Json checks = Json::array(), listed = Json::array();
  for (const auto& check : report.checks) checks.add(json_of(check));
  for (const auto& run : report.listed) listed.add(json_of(run));
  json.set("checks", std::move(checks)).set("listed", std::move(listed));
  return json;
}

std::string checks_table(const trace::RederiveReport& report) {
  Table table({"check", "compared", "bitwise", "within 1e-12", "differing", "largest, in U"},
              {Side::left, Side::right, Side::right, Side::right, Side::right, Side::right});
  for (const auto& check : report.checks)
    table.add({check.check, std::to_string(check.compared), std::to_string(check.bitwise), std::to_string(check.close),
               std::to_string(check.differing),
               check.largest > 0.0 ? shortest(check.largest_in_U).substr(0, 10) : "-"});
  return table.text();
}

std::string words_of(const trace::ReadingDifference& difference) {
  const auto side = [](const std::optional<double>& value, const std::string& none, const std::string& ok) {
    return (value          ? shortest(*value)
            : none.empty() ? std::string{"no reading"}
                           : "none (" + none + ")") +
           (ok.empty() ? "" : ", " + ok);
  };
  std::string words = "    " + difference.check + ": stored " +
                      side(difference.stored, difference.stored_none, difference.stored_ok) + "; now " +
                      side(difference.derived, difference.derived_none, difference.derived_ok);
  if (difference.in_U) words += "; " + fixed(*difference.in_U, shown_digits) + " U apart";
  return words + (difference.other_method ? "; another version of the method" : "");
}

void print_listed(const trace::RederiveReport& report, Console& console) {
  constexpr std::size_t most = 20;
  std::size_t shown = 0;
  for (const auto& run : report.listed) {
    if (++shown > most) break;
    console.print(
        "run " + std::to_string(run.run.value) + ", " + run.serial + ": " +
        (run.problem ? run.problem->text() : "stored " + run.stored_verdict + ", now " + run.derived_verdict));
    for (const auto& difference : run.differences) console.print(words_of(difference));
  }
  if (report.listed.size() > most)
    console.print("... and " + std::to_string(report.listed.size() - most) + " more; --json tells up to 1000");
}

void print(const trace::RederiveReport& report, Console& console) {
  if (!report.checks.empty()) console.print(checks_table(report));
  print_listed(report, console);
  console.print(std::to_string(report.derived) + " of " + std::to_string(report.runs) +
                " closed runs made again: " + std::to_string(report.same_verdict) + " with the same verdict, " +
                std::to_string(report.bitwise_runs) + " the same to the last bit; " +
                std::to_string(report.not_derived) + " could not be (no captures, or a document missing).");
  console.print(std::to_string(report.bitwise) + " of " + std::to_string(report.readings) + " readings bitwise, " +
                std::to_string(report.close) + " within 1e-12, " + std::to_string(report.differing) + " differ; " +
                std::to_string(report.same_build) + " runs were made by this very build.");
  if (report.stopped) console.print("Stopped before the end: these figures are of the runs up to then.");
}

Result<trace::RederiveScope> scope_of(const RederiveOptions& options) {
  const int asked = !options.serial.empty() + !options.lot.empty() + options.run.has_value() + options.everything;
  if (asked != 1) return Problem{"rederive_what", "probewright rederive"};
  trace::RederiveScope scope;
  scope.serial = options.serial;
  scope.lot = options.lot;
  if (options.run) scope.run = db::RunId{*options.run};
  return scope;
}

}  // namespace

int rederive(const RederiveOptions& options, Console& console) {
  const auto scope = scope_of(options);
  if (!scope) return console.refuse(scope.error());
  const auto ledger = ledger_file(options.ledger, options.choice);
  if (!ledger) return console.refuse(ledger.error());
  const Interruption interruption;
  trace::RederiveOptions how;
  how.threads = options.threads;
  how.stop = interruption.token();
  const auto report = [&] {
    Progress progress(console, "runs made again");
    how.progress = [&](std::int64_t done, std::int64_t total) { progress.at(done, total); };
    return trace::rederive(*ledger, *scope, options.build.commit, how);
  }();
  if (!report) return console.refuse(report.error());
  const bool agrees = report->agrees() && report->derived > 0 && !report->stopped;
  if (console.json())
    console.print_json(json_of(*report, agrees));
  else
    print(*report, console);
  return agrees ? done : answer_is_no;
}

}  // namespace probewright::text
