#include "station/sequence/ledger_start.h"

#include <filesystem>

#include "db/queries/open_runs.h"

namespace probewright::sequence {
namespace {

db::RunClosed late_closing(const db::OpenRun& open) {
  db::RunClosed closing;
  closing.run = open.run;
  closing.verdict = slug(verdict_of(EndedBy::person_or_probe, false, !open.not_ok.empty()));
  closing.cause = "station_stopped";
  closing.cause_words = "the station stopped during this run; closed at the next start";
  closing.failing = open.not_ok;
  closing.bench = Body{Body::Object{{"asked_again", 0}, {"drive_off_confirmed", false}}};
  return closing;
}

Result<std::vector<ClosedLate>> close_open_runs(db::Store& store) {
  std::vector<ClosedLate> closed;
  db::Reader reader = store.reader();
  const std::vector<db::OpenRun> open = db::open_runs(reader);
  if (open.empty()) return closed;
  std::vector<db::Store::Job> jobs;
  for (const db::OpenRun& run : open) {
    jobs.emplace_back([closing = late_closing(run)](db::Change& change) { change.close_run(closing); });
    closed.push_back(
        {run.run.value, run.serial, run.not_ok.empty() ? RunVerdict::void_run : RunVerdict::fail, run.nest});
  }
  for (const Result<void>& outcome : store.commit_group(jobs))
    if (!outcome) return outcome.error();
  return closed;
}

}  // namespace

Result<LedgerStart> start_ledger(const db::StoreOptions& options, const Clock& clock) {
  const auto folder = std::filesystem::path{options.path}.parent_path();
  if (options.vfs.empty() && !folder.empty()) {
    std::error_code error;
    std::filesystem::create_directories(folder, error);
    if (error) return Problem{"ledger_folder", folder.string(), {{"reason", error.message()}}};
  }
  auto store = db::Store::open(options, clock);
  if (!store) return store.error();
  if (const auto behind = (*store)->clock_behind(); behind > db::clock_tolerance)
    return Problem{"ledger_clock_behind", options.path, {{"seconds", std::to_string(behind.count() / 1'000'000)}}};
  auto closed = close_open_runs(**store);
  if (!closed) return closed.error();
  return LedgerStart{std::move(*store), std::move(*closed)};
}

db::StoreOptions ledger_options(const StationFile& station, std::string path, const Software& software) {
  db::StoreOptions options;
  options.path = std::move(path);
  options.station = station.station;
  options.emulated = station.emulated;
  options.program_version = software.version;
  options.program_commit = software.commit;
  return options;
}

}  // namespace probewright::sequence
