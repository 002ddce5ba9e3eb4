#pragma once
#include <cstdint>
#include <filesystem>
#include <memory>
#include <string>

#include "db/store.h"
#include "station/base/clock.h"
#include "station/base/entropy.h"

// Ledgers to test on: a clock that is set by hand, a folder that goes away, runs like those of the line.
namespace probewright::db::sample {

/// Goes on by one millisecond each time it is asked.
class HandClock final : public Clock {
 public:
  UtcTime utc_now() const override { return now.microseconds += 1000, now; }
  SteadyTime steady_now() const override { return {std::chrono::microseconds{now.microseconds}}; }
  mutable UtcTime now{1796105772000000};  // 2026-12-01
};

class Folder {
 public:
  Folder();
  ~Folder();
  Folder(const Folder&) = delete;
  std::string file(const std::string& name) const { return (path / name).string(); }
  std::filesystem::path path;
};

StoreOptions options(const std::string& path);
/// Opens or throws ProblemError.
std::unique_ptr<Store> open(const StoreOptions& options, const Clock& clock);

DocumentRow model();
DocumentRow sheet();
DocumentRow certificate();
/// Adds the three documents.
void add_documents(Change& change);
/// An opening that stands on the three documents.
RunOpened opening(const std::string& serial, bool emulated = false);
/// Ten readings with values drawn from `entropy`; `not_ok` makes the red centroid fail.
std::vector<ReadingRow> readings(Entropy& entropy, bool not_ok = false);
/// A capture that packs (a slow wave with some noise) of `samples` 16-bit values.
Bytes wave(Entropy& entropy, std::size_t samples);
RunClosed closing(RunId run, const std::string& verdict);
/// One whole run, each step a commit of its own, as the line does it.
RunId whole_run(Store& store, const std::string& serial, Entropy& entropy, const std::string& verdict = "pass");
/// Begins a ledger that is a second volume: the first one beside it holds a failed serial, whose try is carried over as
/// entry 2.
void begin_second_volume(const std::string& path, const Clock& clock);
/// Throws ProblemError where an outcome is a problem.
void demand(const Result<void>& outcome);

}  // namespace probewright::db::sample
