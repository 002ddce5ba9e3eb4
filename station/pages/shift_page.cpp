#include "station/pages/shift_page.h"

#include <algorithm>
#include <limits>

#include "station/trace/words.h"

namespace probewright::pages {
namespace {

constexpr std::size_t most_charts = 3;

std::string lot_words(const trace::LotFacts& lot) {
  return lot.lot + ", " + lot.model + (lot.sheet_revisions.empty() ? "" : ", sheet revision " + lot.sheet_revisions) +
         ": " + std::to_string(lot.runs.all()) + " runs" +
         (lot.quantity ? ", opened for " + std::to_string(*lot.quantity) + " probes" : "") +
         (lot.closed ? ", closed" : "");
}

std::string other_words(const trace::PurposeFacts& other) {
  return other.purpose + ": " + std::to_string(other.runs.all()) + (other.runs.all() == 1 ? " run, " : " runs, ") +
         std::to_string(other.runs.passed) + " passed, " + std::to_string(other.runs.failed) + " failed, " +
         std::to_string(other.runs.voided) + " void";
}

RunChart chart_of_series(const trace::CheckSeries& series) {
  RunChart chart;
  chart.name = trace::shown_as(series.check);
  chart.unit = series.unit == "1" ? "" : series.unit;
  for (const auto& value : series.values)
    chart.values.push_back(value.value_or(std::numeric_limits<double>::quiet_NaN()));
  chart.lower_limit = series.lower;
  chart.upper_limit = series.upper;
  chart.note = "Model " + series.model + ". One run in ten has a margin below " +
               trace::margin_words(series.low_margin) + "." +
               (series.limits_changed ? " The limits changed within the shift; those of its last run are drawn." : "");
  return chart;
}

}  // namespace

ShiftReport shift_report_of(const trace::ShiftFacts& facts, const trace::PageNotes& notes) {
  ShiftReport report;
  report.station = facts.station;
  report.lot = facts.lot;
  report.zone = notes.zone;
  report.begin = facts.from;
  report.end = facts.to;
  report.printed = notes.printed;
  for (const trace::PersonFacts& person : facts.people)
    report.people.push_back({person.name, person.role.empty() ? "not signed in" : person.role});
  for (const trace::LotFacts& lot : facts.lots) report.lots.push_back(lot_words(lot));
  for (const trace::PurposeFacts& other : facts.other_purposes) report.others.push_back(other_words(other));
  report.emulated = facts.emulated;
  const trace::ShiftCounts& probes = facts.probes;
  report.counts = {probes.tested(), probes.passed, probes.passed_first_time, probes.failed, probes.voided};
  report.runs = {facts.runs.all(), facts.runs.passed, facts.runs.failed, facts.runs.voided};
  report.sent_to_rework = facts.sent_to_rework;
  report.left_open = facts.left_open;
  for (const trace::FailingCheckFacts& check : facts.failing)
    report.failing_checks.push_back({trace::shown_as(check.check), check.runs, check.likely_cause_words});
  for (const trace::NestFacts& nest : facts.nests)
    report.nests.push_back({"nest " + std::to_string(nest.nest), nest.runs.all(), nest.runs.passed, nest.runs.failed,
                            nest.runs.voided, nest.mean_cycle_s,
                            nest.commonest_failing_check.empty() ? "" : trace::shown_as(nest.commonest_failing_check)});
  for (const trace::Stretch& stretch : facts.stretches)
    report.stretches.push_back({stretch.begin, stretch.runs.passed, stretch.runs.failed, stretch.runs.voided});
  for (std::size_t i = 0; i < std::min(most_charts, facts.series.size()); ++i)
    report.charts.push_back(chart_of_series(facts.series[i]));
  report.seal = to_hex(facts.seal.hash);
  report.entry = facts.seal.entry;
  report.verify_command = notes.verify_command;
  report.cautions = notes.cautions;
  return report;
}

}  // namespace probewright::pages
