#pragma once
#include <cstdint>
#include <memory>
#include <optional>

#include "db/chain.h"
#include "db/connection.h"
#include "db/verify.h"

// The parts that `verify` is made of. They throw db::Error where the file cannot be read.
namespace probewright::db {

/// What a walk over a range of entries found.
struct RangeWalk {
  std::int64_t entries = 0, runs = 0, open_runs = 0, readings = 0, captures = 0;
  Seal seal;  ///< the last entry that agreed
  std::optional<Fault> fault;
};

class Projections;
class RunWalker;

/// Walks a ledger in ranges of entries, in any order: whether one entry follows from the one before it needs only that
/// one's hash, which the range before it checks. Keeps its statements. One thread, like its connection.
class RangeWalker {
 public:
  explicit RangeWalker(Connection& connection);
  ~RangeWalker();
  RangeWalker(const RangeWalker&) = delete;

  /// Entries first to last, both included and both to be there: each with its hash, its own columns and its rows in
  /// projected tables; the runs opened among them, with digests of readings and captures and every capture's bytes;
  /// rows with a key in this range that belong to nothing. Ends at the first fault.
  RangeWalk walk(std::int64_t first, std::int64_t last);
  /// The entries alone.
  RangeWalk walk_entries(std::int64_t first, std::int64_t last);
  /// One run, wherever it was opened; adds to `walk`.
  std::optional<Fault> run_fault(std::int64_t run, RangeWalk& walk);

 private:
  Connection& connection_;
  std::unique_ptr<Projections> projections_;
  std::shared_ptr<RunWalker> runs_;  // its class stands in walk_runs.cpp
};

/// A row whose key lies before `first` or after `last`: no entry can have made it.
std::optional<Fault> row_out_of_range(Connection& connection, std::int64_t first, std::int64_t last);
/// Bytes without their capture.
std::optional<Fault> stray_bytes(Connection& connection);

// What RangeWalker is made of.

std::shared_ptr<RunWalker> make_run_walker(Connection& connection);
/// Runs opened from entry first to last; counts into `walk`. The first fault.
std::optional<Fault> walk_runs(RunWalker& walker, std::int64_t first, std::int64_t last, RangeWalk& walk);
/// A reading or capture of a run from first to last that was not opened; looked for only where there are more rows than
/// were `walked`.
std::optional<Fault> stray_run_row(Connection& connection, std::int64_t first, std::int64_t last,
                                   const RangeWalk& walked);

}  // namespace probewright::db
