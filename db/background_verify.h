#pragma once
#include <cstdint>
#include <memory>
#include <mutex>
#include <optional>
#include <string>
#include <thread>

#include "db/verify.h"

namespace probewright::db {

/// How far a check of a ledger is.
struct VerifyState {
  std::int64_t checked = 0;  ///< entries that agree so far
  std::int64_t newest = 0;   ///< the newest entry when the check began
  bool finished = false;     ///< all of them were looked at, or a fault or trouble ended it
  std::optional<Fault> fault;
  std::optional<Problem> trouble;  ///< the file could not be looked at
};

/// Checks a live ledger piece by piece beside its writer: each piece is a short snapshot of its own, so that the
/// write-ahead log can be copied into the file meanwhile. Entries are never changed, so pieces of different moments fit
/// together. Looks at the layout, at entries, rows, runs and captures; the whole-file check of pages is left to
/// `verify`, since it would hold one snapshot for long. One thread at a time.
class StepwiseVerify {
 public:
  /// Checks the entries from `from` to the newest there is now. `vfs` empty: the machine's files.
  StepwiseVerify(std::string path, std::string vfs, std::int64_t from = 1);
  ~StepwiseVerify();
  StepwiseVerify(const StepwiseVerify&) = delete;

  /// Looks at the next `entries` of them. False when there is nothing left to do. Never throws.
  bool step(std::int64_t entries);
  const VerifyState& state() const { return state_; }

 private:
  void look(std::int64_t entries);
  std::string path_, vfs_;
  std::int64_t next_;
  VerifyState state_;
  struct Open;
  std::unique_ptr<Open> open_;
};

/// StepwiseVerify in a thread of its own that runs only when the machine has nothing better to do (SCHED_IDLE).
/// What a station starts with: the newest entries were checked when the ledger was opened, this checks the rest.
class BackgroundVerify {
 public:
  /// Begins at once. Any thread.
  explicit BackgroundVerify(std::string path, std::int64_t from = 1);
  /// Stops after the piece that goes on (some milliseconds) and waits for it.
  ~BackgroundVerify() = default;
  BackgroundVerify(const BackgroundVerify&) = delete;
  /// Any thread.
  VerifyState state() const;
  /// Asks it to stop; state().finished stays false. Any thread.
  void stop() { thread_.request_stop(); }

 private:
  void run(const std::stop_token& stop, const std::string& path, std::int64_t from);
  mutable std::mutex mutex_;
  VerifyState state_;
  std::jthread thread_;  // goes first
};

}  // namespace probewright::db
