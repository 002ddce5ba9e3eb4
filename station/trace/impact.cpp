#include "station/trace/impact.h"

#include <algorithm>
#include <map>
#include <memory>
#include <mutex>

#include "db/queries/run_numbers.h"
#include "db/queries/seal.h"
#include "db/queries/tries.h"
#include "station/trace/in_parallel.h"
#include "station/trace/sensitivity.h"
#include "station/trace/stored_run.h"

namespace probewright::trace {
namespace {

constexpr std::size_t most_samples = 200;
constexpr int fewest_samples = 5;

/// The certificates that a question puts in the place of a run's own, one set for each way to ask.
std::vector<measure::Certificates> corrections(const ImpactQuestion& question, const measure::Certificates& own) {
  if (const auto* drift = std::get_if<Drift>(&question.found)) {
    std::vector<measure::Certificates> all{corrected(own, *drift)};
    if (question.both_ways) all.push_back(corrected(own, {drift->of, -drift->too_high}));
    return all;
  }
  measure::Certificates changed = own;
  const auto& certificate = std::get<CorrectedCertificate>(question.found);
  if (const auto* phantom = std::get_if<measure::PhantomCertificate>(&certificate)) changed.phantom = *phantom;
  if (const auto* adapter = std::get_if<measure::AdapterCertificate>(&certificate)) changed.adapter = *adapter;
  return {changed};
}

/// What corrections did to the readings of runs that could be made again: for each model and way to ask, each check.
/// Of each check the runs with the lowest numbers count, so that the answer does not depend on which thread was first.
class Samples {
 public:
  using Lines = std::map<std::string, ChangeLine>;

  /// Any thread.
  void add(const db::RunRecord& run, std::size_t way, const DerivedRun& before, const DerivedRun& after) {
    const std::lock_guard lock(mutex_);
    auto& of_model = changes_[{run.opened.model, way}];
    for (std::size_t i = 0; i < before.readings.size(); ++i) {
      const auto &was = before.readings[i].reading, &now = after.readings[i].reading;
      if (!was.value || !now.value) continue;
      auto& of_check = of_model[was.check];
      of_check[run.run] = {*was.value, *now.value - *was.value};
      if (of_check.size() > most_samples) of_check.erase(std::prev(of_check.end()));
    }
  }
  int count(const std::string& model) const {
    std::size_t most = 0;
    if (const auto found = changes_.find({model, 0}); found != changes_.end())
      for (const auto& [check, changes] : found->second) most = std::max(most, changes.size());
    return static_cast<int>(most);
  }
  /// Lines by check, made when they are first asked for; empty for a model that no run could be made again of.
  const Lines& lines(const std::string& model, std::size_t way) {
    const auto [place, fresh] = lines_.try_emplace({model, way});
    if (!fresh) return place->second;
    for (const auto& [check, changes] : changes_[{model, way}]) {
      std::vector<Change> list;
      for (const auto& [run, change] : changes) list.push_back(change);
      place->second.emplace(check, ChangeLine(list));
    }
    return place->second;
  }

 private:
  using Key = std::pair<std::string, std::size_t>;  ///< model, way
  std::mutex mutex_;
  std::map<Key, std::map<std::string, std::map<db::RunId, Change>>> changes_;
  std::map<Key, Lines> lines_;
};

const db::ReadingRow* stored_reading(const db::RunRecord& run, std::string_view check) {
  for (const db::ReadingRow& row : run.readings)
    if (row.check == check) return &row;
  return nullptr;
}

/// Puts what a run came to into its row, unless another way to ask gave something worse.
void take_worse(ImpactRow& row, const db::RunRecord& stored, const DerivedRun& now) {
  const DerivedReading* worst = nullptr;
  for (const DerivedReading& each : now.readings)
    if (each.judgement && each.judgement->margin && (!worst || *each.judgement->margin < *worst->judgement->margin))
      worst = &each;
  const bool fails = now.verdict != "pass";
  const auto margin = worst ? worst->judgement->margin : std::nullopt;
  const bool better =
      row.by != ImpactBy::unknown && (row.fails > fails || (row.fails == fails && row.margin <= margin));
  if (better) return;
  row.fails = fails;
  row.failing = now.failing;
  row.margin = margin;
  row.check = worst ? worst->reading.check : fails && !now.failing.empty() ? now.failing.front() : "";
  row.value = worst ? worst->reading.value : std::nullopt;
  row.unit = worst ? worst->reading.unit : "";
  const db::ReadingRow* was = stored_reading(stored, row.check);
  row.was_margin = was ? was->margin : std::nullopt;
  row.was_value = was ? was->value : std::nullopt;
}

/// The stored readings, moved by lines, and judged anew.
std::vector<DerivedReading> moved(const db::RunRecord& stored, const RunBasis& basis,
                                  const std::map<std::string, ChangeLine>& lines) {
  std::vector<measure::Reading> readings;
  for (const db::ReadingRow& row : stored.readings) {
    measure::Reading reading;
    reading.check = row.check;
    reading.value = row.value;
    reading.none_reason = row.none_reason;
    reading.expanded_uncertainty = row.expanded_uncertainty;
    reading.unit = row.unit;
    reading.definition = row.definition;
    const auto line = lines.find(row.check);
    if (reading.value && line != lines.end()) *reading.value += line->second.at(*reading.value);
    readings.push_back(std::move(reading));
  }
  return judged(std::move(readings), *basis.sheet);
}

class Worker {
 public:
  Worker(const std::string& ledger, const ImpactQuestion& question, Samples& samples)
      : reader_(db::Reader::open(ledger).value()), documents_(reader_), question_(question), samples_(samples) {}

  /// A row for the run, from its captures where they are kept.
  ImpactRow from_captures(db::RunId run) {
    const db::RunRecord stored = db::run_record(reader_, run).value();
    ImpactRow row = row_of(stored);
    row.problem = make_again(stored, &row);
    return row;
  }
  /// What the correction does to a run that is only an example. False where it cannot be made again.
  void sample(db::RunId run) {
    if (const auto stored = db::run_record(reader_, run)) make_again(*stored, nullptr);
  }
  /// The same from the stored readings alone; the row stays unknown where no run of the model has captures.
  void by_sensitivity(ImpactRow& row) {
    const db::RunRecord stored = db::run_record(reader_, row.run).value();
    const auto basis = documents_.basis_of(stored);
    row.from_runs = samples_.count(row.model);
    if (!basis || row.from_runs == 0) return;
    const std::size_t ways = corrections(question_, basis->certificates()).size();
    for (std::size_t way = 0; way < ways; ++way) {
      take_worse(row, stored, with_verdict(moved(stored, *basis, samples_.lines(row.model, way)), *basis, stored));
      row.by = ImpactBy::sensitivity;
    }
  }

 private:
  ImpactRow row_of(const db::RunRecord& stored) {
    ImpactRow row;
    row.run = stored.run;
    row.opened_at = stored.opened_at;
    row.serial = stored.opened.serial;
    row.lot = stored.opened.lot;
    row.model = stored.opened.model;
    row.purpose = stored.opened.purpose;
    return row;
  }

  std::optional<Problem> make_again(const db::RunRecord& stored, ImpactRow* row) {
    const auto basis = documents_.basis_of(stored);
    if (!basis) return basis.error();
    const auto captures = stored_captures(reader_, stored);
    if (!captures) return captures.error();
    const measure::Certificates own = basis->certificates();
    const DerivedRun before = derive(*basis, own, *captures, stored);
    const auto ways = corrections(question_, own);
    for (std::size_t way = 0; way < ways.size(); ++way) {
      const DerivedRun after = derive(*basis, ways[way], *captures, stored);
      samples_.add(stored, way, before, after);
      if (!row) continue;
      take_worse(*row, stored, after);
      row->by = ImpactBy::rederivation;
    }
    return std::nullopt;
  }

  db::Reader reader_;
  StoredDocuments documents_;
  const ImpactQuestion& question_;
  Samples& samples_;
};

/// Smallest margin first; failures without a margin before all, unknown rows after all.
bool before(const ImpactRow& a, const ImpactRow& b) {
  const auto rank = [](const ImpactRow& row) {
    return row.by == ImpactBy::unknown ? 3 : row.fails && !row.margin ? 0 : row.fails ? 1 : 2;
  };
  if (rank(a) != rank(b)) return rank(a) < rank(b);
  if (a.margin != b.margin) return a.margin < b.margin;
  return a.run < b.run;
}

class Answer {
 public:
  Answer(const std::string& ledger, const ImpactQuestion& question, const ImpactOptions& options)
      : ledger_(ledger), question_(question), options_(options), workers_(workers_for(options.threads)) {}

  ImpactReport of(db::Reader& reader, const std::vector<db::RunId>& runs) {
    report_.rows.resize(runs.size());
    std::vector<char> done(runs.size());
    report_.stopped = !in_parallel(
        options_.threads, runs.size(),
        [&](std::size_t worker, std::size_t item) {
          report_.rows[item] = at(worker).from_captures(runs[item]);
          done[item] = 1;
        },
        [&](std::size_t now, std::size_t total) {
          if (options_.progress) options_.progress(static_cast<std::int64_t>(now), static_cast<std::int64_t>(total));
        },
        options_.stop);
    std::size_t kept = 0;
    for (std::size_t i = 0; i < runs.size(); ++i)
      if (done[i]) std::swap(report_.rows[kept++], report_.rows[i]);
    report_.rows.resize(kept);
    find_samples(reader);
    for (ImpactRow& row : report_.rows)
      if (row.by == ImpactBy::unknown && !options_.stop.stop_requested()) at(0).by_sensitivity(row);
    return finished(reader);
  }

 private:
  Worker& at(std::size_t worker) {
    if (!workers_[worker]) workers_[worker] = std::make_unique<Worker>(ledger_, question_, samples_);
    return *workers_[worker];
  }

  /// For models that too few of the runs themselves have captures of: the newest others.
  void find_samples(db::Reader& reader) {
    std::map<std::string, bool> models;
    for (const ImpactRow& row : report_.rows)
      if (row.by == ImpactBy::unknown) models[row.model] = true;
    for (const auto& [model, wanted] : models)
      if (samples_.count(model) < fewest_samples)
        for (const db::RunId run : db::newest_runs_with_captures(reader, model, 4 * fewest_samples)) at(0).sample(run);
  }

  ImpactReport finished(db::Reader& reader) {
    for (ImpactRow& row : report_.rows) {
      report_.fails += row.fails;
      report_.rederived += row.by == ImpactBy::rederivation;
      report_.by_sensitivity += row.by == ImpactBy::sensitivity;
      report_.unknown += row.by == ImpactBy::unknown;
      if (row.fails) row.later_pass = passed_later(reader, row);
    }
    std::sort(report_.rows.begin(), report_.rows.end(), before);
    report_.seal = db::newest_seal(reader);
    return std::move(report_);
  }

  bool passed_later(db::Reader& reader, const ImpactRow& row) const {
    for (const db::Try& other : db::tries_of_serial(reader, row.serial))
      if (other.run > row.run && other.verdict == "pass" && other.purpose == row.purpose &&
          std::none_of(report_.rows.begin(), report_.rows.end(),
                       [&](const ImpactRow& r) { return r.run == other.run; }))
        return true;
    return false;
  }

  const std::string& ledger_;
  const ImpactQuestion& question_;
  const ImpactOptions& options_;
  Samples samples_;
  std::vector<std::unique_ptr<Worker>> workers_;
  ImpactReport report_;
};

}  // namespace

std::string_view slug(ImpactBy by) {
  switch (by) {
    case ImpactBy::rederivation:
      return "rederivation";
    case ImpactBy::sensitivity:
      return "sensitivity";
    case ImpactBy::unknown:
      break;
  }
  return "unknown";
}

Result<ImpactReport> impact(const std::string& ledger, const ImpactQuestion& question, const ImpactOptions& options) {
  auto reader = db::Reader::open(ledger);
  if (!reader) return reader.error();
  const auto runs = db::passed_runs_with_device(*reader, question.device, question.since, question.until);
  if (runs.empty())
    return Problem{"impact_no_runs", ledger, {{"device", question.device}, {"since", to_text(question.since)}}};
  return Answer(ledger, question, options).of(*reader, runs);
}

}  // namespace probewright::trace
