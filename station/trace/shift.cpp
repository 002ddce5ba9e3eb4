#include "station/trace/shift.h"

#include <algorithm>
#include <map>
#include <set>
#include <tuple>

#include "db/queries/entries.h"
#include "db/queries/first_verdict.h"
#include "db/queries/lot_entries.h"
#include "db/queries/readings_within.h"
#include "db/queries/runs_within.h"
#include "db/queries/seal.h"
#include "db/queries/sign_in.h"
#include "db/transaction.h"
#include "station/base/catalogue.h"

namespace probewright::trace {
namespace {

using db::RunBrief;

void count(RunCounts& counts, const std::string& verdict) {
  ++(verdict == "pass" ? counts.passed : verdict == "fail" ? counts.failed : counts.voided);
}

const std::string& verdict_of(const RunBrief& run) { return run.closing->verdict; }

std::vector<RunBrief> production_of(const std::vector<RunBrief>& runs) {
  std::vector<RunBrief> production;
  std::copy_if(runs.begin(), runs.end(), std::back_inserter(production),
               [](const RunBrief& run) { return run.purpose == "production"; });
  return production;
}

ShiftCounts probes_of(db::Reader& reader, const std::vector<RunBrief>& production) {
  std::map<std::string, std::string> last;  // verdict by serial; a void does not replace a verdict
  for (const RunBrief& run : production) {
    std::string& verdict = last[run.serial];
    if (verdict.empty() || verdict_of(run) != "void") verdict = verdict_of(run);
  }
  ShiftCounts counts;
  for (const auto& [serial, verdict] : last) {
    ++(verdict == "pass" ? counts.passed : verdict == "fail" ? counts.failed : counts.voided);
    if (verdict != "void" && db::first_production_verdict(reader, serial) == "pass") ++counts.passed_first_time;
  }
  return counts;
}

/// What is counted by name, in the order of first appearance; the commonest is the first of the largest.
class Named {
 public:
  int& operator[](const std::string& name) {
    for (auto& [known, times] : counts_)
      if (known == name) return times;
    return counts_.emplace_back(name, 0).second;
  }
  std::pair<std::string, int> commonest() const {
    const auto most = std::max_element(counts_.begin(), counts_.end(),
                                       [](const auto& a, const auto& b) { return a.second < b.second; });
    return most == counts_.end() ? std::pair<std::string, int>{} : *most;
  }

 private:
  std::vector<std::pair<std::string, int>> counts_;
};

std::vector<FailingCheckFacts> failing_of(const std::vector<RunBrief>& production) {
  std::map<std::string, Named> causes;  // by check
  std::map<std::string, int> runs;
  std::map<std::string, std::string> words;  // by cause
  for (const RunBrief& run : production) {
    if (verdict_of(run) != "fail") continue;
    const std::string cause = run.closing->bench.text("likely_cause");
    if (!cause.empty()) words[cause] = run.closing->bench.text("likely_cause_words");
    for (const std::string& check : run.closing->failing) {
      ++runs[check];
      if (!cause.empty()) ++causes[check][cause];
    }
  }
  std::vector<FailingCheckFacts> all;
  for (const auto& [check, times] : runs) {
    const auto [cause, with_cause] = causes[check].commonest();
    all.push_back({check, times, cause, words[cause], with_cause});
  }
  std::sort(all.begin(), all.end(), [](const FailingCheckFacts& a, const FailingCheckFacts& b) {
    return std::tuple{-a.runs, check_index(a.check), a.check} < std::tuple{-b.runs, check_index(b.check), b.check};
  });
  return all;
}

std::vector<NestFacts> nests_of(const std::vector<RunBrief>& production) {
  struct Cycles {
    double sum_s = 0.0, longest_s = 0.0;
    int runs = 0;
  };
  std::map<int, NestFacts> nests;
  std::map<int, Named> failing;
  std::map<int, Cycles> cycles;
  for (const RunBrief& run : production) {
    count(nests[run.nest].runs, verdict_of(run));
    for (const std::string& check : run.closing->failing) ++failing[run.nest][check];
    const auto cycle = cycle_s_of(run);
    if (!cycle || verdict_of(run) == "void") continue;
    Cycles& of = cycles[run.nest];
    of = {of.sum_s + *cycle, std::max(of.longest_s, *cycle), of.runs + 1};
  }
  std::vector<NestFacts> all;
  for (auto& [number, nest] : nests) {
    nest.nest = number;
    nest.commonest_failing_check = failing[number].commonest().first;
    if (const Cycles& of = cycles[number]; of.runs > 0)
      nest.mean_cycle_s = of.sum_s / of.runs, nest.longest_cycle_s = of.longest_s;
    all.push_back(nest);
  }
  return all;
}

/// Who signed in, then who operated runs without having signed in in the shift.
std::vector<PersonFacts> people_of(db::Reader& reader, const db::EntryRange& range, const std::vector<RunBrief>& runs,
                                   bool of_one_lot) {
  std::vector<PersonFacts> people;
  const auto person = [&](const std::string& name) -> PersonFacts& {
    for (PersonFacts& known : people)
      if (known.name == name) return known;
    return people.emplace_back(PersonFacts{name, "", 0});
  };
  if (!of_one_lot)
    for (const db::EntryRecord& entry : db::entries(reader, range.first, range.last, "sign_in"))
      person(entry.data.text("person")).role = entry.data.text("role");
  for (const RunBrief& run : runs) {
    if (run.operator_name.empty()) continue;
    PersonFacts& who = person(run.operator_name);
    ++who.runs;
    if (!who.role.empty()) continue;
    if (const auto entry = db::sign_in_before(reader, run.operator_name, run.run.value))
      who.role = entry->data.text("role");
  }
  return people;
}

std::string joined(const std::set<std::string>& words) {
  std::string all;
  for (const std::string& word : words) all += (all.empty() ? "" : ", ") + word;
  return all;
}

std::vector<LotFacts> lots_of(db::Reader& reader, const std::vector<RunBrief>& production) {
  std::vector<LotFacts> lots;
  std::map<std::string, std::set<std::string>> revisions;
  for (const RunBrief& run : production) {
    if (run.lot.empty()) continue;
    auto known = std::find_if(lots.begin(), lots.end(), [&](const LotFacts& lot) { return lot.lot == run.lot; });
    if (known == lots.end()) known = lots.insert(lots.end(), {run.lot, run.model, "", std::nullopt, false, {}});
    count(known->runs, verdict_of(run));
    if (!run.sheet_revision.empty()) revisions[run.lot].insert(run.sheet_revision);
  }
  for (LotFacts& lot : lots) {
    lot.sheet_revisions = joined(revisions[lot.lot]);
    for (const db::EntryRecord& entry : db::lot_entries(reader, lot.lot)) {
      const Body* quantity = entry.data.find("quantity");
      if (entry.kind == "lot_opened" && quantity && quantity->integer()) lot.quantity = *quantity->integer();
      if (entry.kind == "lot_opened" || entry.kind == "lot_closed") lot.closed = entry.kind == "lot_closed";
    }
  }
  return lots;
}

std::vector<PurposeFacts> other_purposes_of(const std::vector<RunBrief>& runs) {
  std::map<std::string, RunCounts> purposes;
  for (const RunBrief& run : runs)
    if (run.purpose != "production") count(purposes[run.purpose], verdict_of(run));
  std::vector<PurposeFacts> all;
  for (const auto& [purpose, counts] : purposes) all.push_back({purpose, counts});
  return all;
}

constexpr std::int64_t hour_us = 3'600'000'000;

/// Hour by hour, or day by day, from the first to the last run's end; one without a run is there too.
std::vector<Stretch> stretches_of(const std::vector<RunBrief>& production, const Zone& zone) {
  if (production.empty()) return {};
  const auto ended = [](const RunBrief& run) { return run.closing->closed_at; };
  const auto [first, last] = std::minmax_element(
      production.begin(), production.end(), [&](const RunBrief& a, const RunBrief& b) { return ended(a) < ended(b); });
  const bool by_day = ended(*last).microseconds - ended(*first).microseconds > 48 * hour_us;
  const auto name = [&](UtcTime time) { return by_day ? zone.day(time) : zone.local_text(time).substr(0, 13) + ":00"; };
  std::vector<Stretch> stretches;
  const auto of = [&](UtcTime time) -> Stretch& {
    const std::string begin = name(time);
    for (Stretch& known : stretches)
      if (known.begin == begin) return known;
    return stretches.emplace_back(Stretch{begin, {}});
  };
  const std::int64_t step = by_day ? 12 * hour_us : hour_us / 2;  // no stretch is shorter, whatever clocks do
  for (std::int64_t at = ended(*first).microseconds; at <= ended(*last).microseconds; at += step) of({at});
  for (const RunBrief& run : production) count(of(ended(run)).runs, verdict_of(run));
  return stretches;
}

/// The k-th smallest, k a tenth of the number of margins, rounded down.
double low_margin_of(std::vector<double> margins) {
  const auto at = margins.begin() + static_cast<std::ptrdiff_t>(margins.size() / 10);
  std::nth_element(margins.begin(), at, margins.end());
  return *at;
}

std::vector<CheckSeries> series_of(db::Reader& reader, const db::EntryRange& range, const std::string& lot,
                                   const std::set<std::int64_t>& wanted) {
  std::map<std::pair<std::string, std::string>, std::pair<CheckSeries, std::vector<double>>> all;
  db::production_readings_within(reader, range, lot, [&](const db::ChartedReading& reading) {
    if (!wanted.contains(reading.run.value)) return;
    auto& [series, margins] = all[{std::string{reading.model}, std::string{reading.check}}];
    if (series.runs.empty()) {
      series.model = reading.model, series.check = reading.check, series.unit = reading.unit;
      series.lower = reading.acceptance_lower, series.upper = reading.acceptance_upper;
    }
    if (series.lower != reading.acceptance_lower || series.upper != reading.acceptance_upper)
      series.limits_changed = true;
    series.lower = reading.acceptance_lower, series.upper = reading.acceptance_upper;
    series.runs.push_back(reading.run.value);
    series.values.push_back(reading.value);
    if (reading.margin) margins.push_back(*reading.margin);
  });
  std::vector<CheckSeries> series;
  for (auto& [key, found] : all) {
    if (found.second.empty()) continue;
    found.first.low_margin = low_margin_of(std::move(found.second));
    series.push_back(std::move(found.first));
  }
  std::sort(series.begin(), series.end(), [](const CheckSeries& a, const CheckSeries& b) {
    return std::tuple{a.low_margin, check_index(a.check), a.model} <
           std::tuple{b.low_margin, check_index(b.check), b.model};
  });
  return series;
}

db::EntryRange range_of(db::Reader& reader, const ShiftQuestion& question) {
  if (question.period) return db::entries_between(reader, question.period->from, question.period->to);
  db::EntryRange all = db::all_entries(reader);
  if (!question.entries) return all;
  return {std::max(all.first, question.entries->first), std::min(all.last, question.entries->last)};
}

/// The times that a report tells: those asked for, else of the first and last entry.
Period told_period(db::Reader& reader, const ShiftQuestion& question, const db::EntryRange& range) {
  if (question.period) return *question.period;
  if (range.empty()) return {};
  return {db::entries(reader, range.first, range.first).at(0).time,
          db::entries(reader, range.last, range.last).at(0).time};
}

}  // namespace

ShiftFacts shift_facts(db::Reader& reader, const ShiftQuestion& question) {
  const db::Snapshot one_state{reader.connection()};
  ShiftFacts facts;
  facts.seal = db::newest_seal(reader);
  facts.lot = question.lot;
  facts.entries = range_of(reader, question);
  const Period told = told_period(reader, question, facts.entries);
  facts.from = told.from, facts.to = told.to;
  const auto in_time = [&](UtcTime time) {
    return !question.period || (time >= question.period->from && time < question.period->to);
  };
  auto runs = db::runs_closed_within(reader, facts.entries, question.lot);
  std::erase_if(runs, [&](const RunBrief& run) { return !in_time(run.closing->closed_at); });
  auto open = db::runs_left_open(reader, facts.entries, question.lot);
  std::erase_if(open, [&](const RunBrief& run) { return !in_time(run.opened_at); });
  const auto production = production_of(runs);

  if (const auto begun = db::entries(reader, 1, 1); !begun.empty()) facts.station = begun[0].data.text("station");
  facts.emulated = std::any_of(runs.begin(), runs.end(), [](const RunBrief& run) { return run.emulated; });
  facts.probes = probes_of(reader, production);
  std::set<std::int64_t> numbers;
  for (const RunBrief& run : production) {
    count(facts.runs, verdict_of(run));
    if (verdict_of(run) == "fail" && !run.closing->bench.text("rework").empty()) ++facts.sent_to_rework;
    numbers.insert(run.run.value);
  }
  facts.left_open = static_cast<int>(open.size());
  facts.failing = failing_of(production);
  facts.nests = nests_of(production);
  facts.people = people_of(reader, facts.entries, runs, !question.lot.empty());
  facts.lots = lots_of(reader, production);
  facts.other_purposes = other_purposes_of(runs);
  facts.stretches = stretches_of(production, question.zone);
  facts.series = series_of(reader, facts.entries, question.lot, numbers);
  return facts;
}

std::optional<double> first_pass_yield(const ShiftCounts& probes) {
  if (probes.judged() == 0) return std::nullopt;
  return static_cast<double>(probes.passed_first_time) / probes.judged();
}

std::optional<double> cycle_s_of(const db::RunBrief& run) {
  const Body* cycle = run.closing ? run.closing->bench.find("cycle_us") : nullptr;
  if (!cycle || !cycle->integer()) return std::nullopt;
  return static_cast<double>(*cycle->integer()) * 1e-6;
}

}  // namespace probewright::trace
