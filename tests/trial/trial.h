#pragma once
#include <boost/asio/io_context.hpp>
#include <cstdint>
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "db/store.h"
#include "drivers/emulated/bench.h"
#include "drivers/wire/trial_workers.h"
#include "drivers/wire/virtual_clock.h"
#include "station/sequence/ledger_start.h"
#include "station/sequence/line.h"

// A whole station in one thread under the virtual clock: the real line, drivers and store, the emulated bench behind
// in-memory lines, and a ledger wherever the trial wants it. Everything is drawn from one seed.
namespace probewright::trial {

/// The configuration of the demonstration, read once from the sources.
const sequence::Configuration& demonstration();

struct Options {
  std::uint64_t seed = 1;
  emulated::BenchOptions bench;          ///< its seed is replaced by the trial's
  db::StoreOptions store;                ///< path and vfs; the rest is filled in
  UtcTime start{1'796'103'000'000'000};  ///< 2026-12-01T05:30:00Z
  sequence::Purpose purpose = sequence::Purpose::engineering;
  const sequence::Configuration* configuration = nullptr;  ///< nullptr: demonstration()
  emulated::ActionObserver* observer = nullptr;            ///< of the bench; outlives the trial
  emulated::Scenario scenario;                             ///< what goes wrong with the bench
  /// Puts something between the line and its ports; empty: nothing.
  std::function<sequence::PortOpener(sequence::PortOpener)> between;
};

/// What came out of one probe.
struct Told {
  std::optional<sequence::RunOutcome> outcome;
  std::optional<Problem> problem;  ///< not armed, arming ended, or not recorded
  bool recorded_trouble = false;   ///< the run was made and could not be recorded
  bool hung = false;               ///< nothing came within the trial's patience
};

class Trial {
 public:
  /// Opens the ledger and starts the line. Problems of the start stand in start_problem().
  explicit Trial(Options options);
  ~Trial();

  const std::optional<Problem>& start_problem() const { return start_problem_; }
  const std::vector<sequence::ClosedLate>& closed_late() const { return closed_late_; }

  /// Scans the serial for nest 1, seats the probe when asked to, waits for the end, takes the probe out.
  /// With a fault in it, if one is given: a serial keeps it for as long as the trial lives.
  Told test(const std::string& serial, std::optional<emulated::PlantedFault> fault = {});
  /// Goes on until the nest is in this state; false when it never is.
  bool reaches(sequence::NestState state);
  /// Goes on for a while of the clock's time.
  void let_pass(Duration time);

  emulated::Bench& bench() { return *bench_; }
  sequence::Line& line() { return *line_; }
  wire::VirtualClock& clock() { return clock_; }
  boost::asio::io_context& io() { return io_; }
  /// Why a nest ended by an exception: our own mistake.
  const std::optional<std::string>& broken() const { return broken_; }
  /// What is wrong with the ledger.
  const std::optional<Problem>& ledger_trouble() const { return ledger_->trouble(); }
  /// The newest entry on disk as the store knows it.
  db::Seal seal() const { return store_ ? store_->seal() : db::Seal{}; }
  const std::vector<sequence::LineEvent>& events() const { return events_; }
  /// Called for every event before it is kept.
  std::function<void(const sequence::LineEvent&)> on_event;
  /// Ends the line as a person would: runs are stopped and closed. False when it never ended.
  bool finish();

 private:
  void hear(const sequence::LineEvent& event);

  Options options_;
  boost::asio::io_context io_;
  wire::VirtualClock clock_;
  SeededEntropy entropy_;
  std::optional<wire::TrialWorkers> workers_;
  std::unique_ptr<emulated::Bench> bench_;
  db::Store* store_ = nullptr;
  std::unique_ptr<sequence::LedgerWriter> ledger_;
  std::unique_ptr<sequence::Line> line_;
  std::vector<sequence::LineEvent> events_;
  std::vector<sequence::ClosedLate> closed_late_;
  std::optional<Problem> start_problem_;
  std::optional<std::string> broken_;  ///< a nest ended by an exception
  bool finished_ = false;
};

}  // namespace probewright::trial
