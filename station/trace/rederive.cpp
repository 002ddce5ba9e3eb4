#include "station/trace/rederive.h"

#include <algorithm>
#include <cmath>
#include <map>
#include <memory>

#include "db/queries/run_numbers.h"
#include "db/queries/seal.h"
#include "station/base/catalogue.h"
#include "station/trace/agreement.h"
#include "station/trace/in_parallel.h"

namespace probewright::trace {
namespace {

/// One thread's part of the work: its own connection, documents and figures.
class Worker {
 public:
  Worker(const std::string& ledger, const std::string& commit)
      : reader_(db::Reader::open(ledger).value()), documents_(reader_), commit_(commit) {}

  void take(db::RunId run) {
    const auto stored = db::run_record(reader_, run);
    if (!stored) return;
    report.same_build += stored->opened.software_commit == commit_;
    if (auto problem = make_again(*stored)) {
      ++report.not_derived;
      RunAgreement listed = agreement_of(*stored, {}, [](auto&&...) {});
      listed.differences.clear();
      listed.problem = std::move(problem);
      report.listed.push_back(std::move(listed));
    }
  }

  RederiveReport report;
  std::map<std::string, CheckAgreement> checks;

 private:
  /// Why it could not be done, or nothing.
  std::optional<Problem> make_again(const db::RunRecord& stored) {
    const auto basis = documents_.basis_of(stored);
    if (!basis) return basis.error();
    const auto captures = stored_captures(reader_, stored);
    if (!captures) return captures.error();
    RunAgreement agreement =
        agreement_of(stored, derive(*basis, basis->certificates(), *captures, stored),
                     [&](const std::string& check, const std::string& unit, const ReadingDifference* difference) {
                       count(stored.run, check, unit, difference);
                     });
    ++report.derived;
    const bool same = agreement.stored_verdict == agreement.derived_verdict;
    report.same_verdict += same;
    report.bitwise_runs += same && agreement.differences.empty();
    if (!same || !agreement.differences.empty()) report.listed.push_back(std::move(agreement));
    return std::nullopt;
  }

  void count(db::RunId run, const std::string& slug, const std::string& unit, const ReadingDifference* difference) {
    CheckAgreement& check = checks[slug];
    check.check = slug;
    check.unit = unit;
    ++check.compared;
    if (!difference) {
      ++check.bitwise;
      return;
    }
    (difference->agreement == Agreement::close ? check.close : check.differing) += 1;
    if (!difference->stored || !difference->derived) return;
    const double apart = std::abs(*difference->derived - *difference->stored);
    if (apart > check.largest) check.largest = apart, check.largest_run = run;
    check.largest_in_U = std::max(check.largest_in_U, difference->in_U.value_or(0.0));
  }

  db::Reader reader_;
  StoredDocuments documents_;
  const std::string& commit_;
};

void add(CheckAgreement& total, const CheckAgreement& part) {
  total.check = part.check;
  total.unit = part.unit;
  total.compared += part.compared;
  total.bitwise += part.bitwise;
  total.close += part.close;
  total.differing += part.differing;
  total.largest_in_U = std::max(total.largest_in_U, part.largest_in_U);
  const bool larger = part.largest > total.largest ||
                      (part.largest == total.largest && part.largest > 0.0 && part.largest_run < total.largest_run);
  if (larger) total.largest = part.largest, total.largest_run = part.largest_run;
}

void add(RederiveReport& total, RederiveReport& part) {
  total.derived += part.derived;
  total.same_verdict += part.same_verdict;
  total.not_derived += part.not_derived;
  total.bitwise_runs += part.bitwise_runs;
  total.same_build += part.same_build;
  std::move(part.listed.begin(), part.listed.end(), std::back_inserter(total.listed));
}

Result<std::vector<db::RunId>> runs_of(db::Reader& reader, const RederiveScope& scope) {
  if (!scope.serial.empty()) return db::closed_runs_of_serial(reader, scope.serial);
  if (!scope.lot.empty()) return db::closed_runs_of_lot(reader, scope.lot);
  if (!scope.run) return db::closed_runs(reader);
  const auto record = db::run_record(reader, *scope.run);
  if (record && record->closing) return std::vector{*scope.run};
  return Problem{"run_not_closed", "run " + std::to_string(scope.run->value)};
}

RederiveReport merged(std::vector<std::unique_ptr<Worker>>& workers, std::size_t most_listed) {
  RederiveReport report;
  std::map<std::string, CheckAgreement> checks;
  for (const auto& worker : workers) {
    if (!worker) continue;
    add(report, worker->report);
    for (const auto& [slug, check] : worker->checks) add(checks[slug], check);
  }
  for (auto& [slug, check] : checks) {
    report.readings += check.compared;
    report.bitwise += check.bitwise;
    report.close += check.close;
    report.differing += check.differing;
    report.checks.push_back(std::move(check));
  }
  std::sort(report.checks.begin(), report.checks.end(),
            [](const auto& a, const auto& b) { return check_index(a.check) < check_index(b.check); });
  std::sort(report.listed.begin(), report.listed.end(), [](const auto& a, const auto& b) { return a.run < b.run; });
  if (report.listed.size() > most_listed) report.listed.resize(most_listed);
  return report;
}

}  // namespace

Result<RederiveReport> rederive(const std::string& ledger, const RederiveScope& scope, const std::string& commit,
                                const RederiveOptions& options) {
  auto reader = db::Reader::open(ledger);
  if (!reader) return reader.error();
  const auto runs = runs_of(*reader, scope);
  if (!runs) return runs.error();
  std::vector<std::unique_ptr<Worker>> workers(workers_for(options.threads));
  const bool all = in_parallel(
      options.threads, runs->size(),
      [&](std::size_t worker, std::size_t item) {
        if (!workers[worker]) workers[worker] = std::make_unique<Worker>(ledger, commit);
        workers[worker]->take((*runs)[item]);
      },
      [&](std::size_t done, std::size_t total) {
        if (options.progress) options.progress(static_cast<std::int64_t>(done), static_cast<std::int64_t>(total));
      },
      options.stop);
  RederiveReport report = merged(workers, options.most_listed);
  report.seal = db::newest_seal(*reader);
  report.runs = static_cast<std::int64_t>(runs->size());
  report.stopped = !all;
  return report;
}

}  // namespace probewright::trace
