#pragma once
#include <cstdint>
#include <optional>

#include "db/connection.h"
#include "db/verify.h"

// The parts that `verify` is made of. They throw db::Error where the file cannot be read.
namespace probewright::db {

/// What a walk along the chain found.
struct ChainWalk {
  std::int64_t entries = 0;
  Seal seal;
  std::optional<Fault> fault;
};
/// Entries from number `from` to the newest, each with its hash, its own columns and its rows in projected tables.
/// Stops at the first fault.
ChainWalk walk_chain(Connection& connection, std::int64_t from);
/// A row of a projected table whose entry is not there.
std::optional<Fault> stray_projected_row(Connection& connection);
/// A reading or capture without its run, or bytes without their capture.
std::optional<Fault> stray_run_row(Connection& connection);

/// What a walk over runs found.
struct RunWalk {
  std::int64_t runs = 0, open_runs = 0, readings = 0, captures = 0;
  std::optional<Fault> fault;
  std::int64_t fault_run = 0;  ///< the run of the fault
};
/// Runs first to last, both included: digests of readings and captures against the closing entry, bytes of captures
/// against their digests. Stops at the first fault.
RunWalk walk_runs(Connection& connection, std::int64_t first, std::int64_t last);

}  // namespace probewright::db
