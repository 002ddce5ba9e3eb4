#pragma once
#include <cstdint>
#include <functional>
#include <optional>
#include <stop_token>
#include <string>

#include "db/connection.h"
#include "db/rows.h"

namespace probewright::db {

/// The first place where a ledger does not agree with itself.
struct Fault {
  std::int64_t entry = 0;  ///< number of the entry it belongs to; 0 where it belongs to none
  std::string table;       ///< "file" where the database itself cannot be read
  std::string row;         ///< key of the row, in words
  std::string column;
  std::string what;
};

struct VerifyOptions {
  std::string vfs;              ///< empty: the machine's files
  bool exclusive = false;       ///< for a VFS without shared memory; one connection, one thread
  bool archive = false;         ///< immutable=1: nobody writes the file
  std::optional<Seal> printed;  ///< a seal from an earlier report that must be in the chain
  std::int64_t from = 1;  ///< first entry to walk; the hash before it is taken as it stands (use a printed seal for it)
  /// Called now and then, in the calling thread, with how much of how much is done.
  std::function<void(std::int64_t done, std::int64_t total)> progress;
  std::stop_token stop;
};

struct VerifyReport {
  std::int64_t entries = 0, runs = 0, open_runs = 0, readings = 0, captures = 0;
  Seal seal;
  std::optional<Fault> first_fault;
  bool ok() const { return !first_fault; }
};

/// Walks a whole ledger: layout with triggers, the chain, every projection, every run's digests, every capture's bytes,
/// rows that belong to nothing, then SQLite's own check of its pages. Two threads, by range of entries. With `from`,
/// the entries from there on, the runs that they open or close, and open runs. Readings of open runs are not yet
/// covered by a digest; only their shape is looked at. Never throws for what is in the file: that is the first fault.
/// Errors (the file cannot be looked at): ledger_cannot_open, ledger_newer, verify_stopped, verify_from_beyond.
Result<VerifyReport> verify(const std::string& path, const VerifyOptions& options = {});

/// {"captures","entries","first_fault","ok","open_runs","readings","runs","seal"}: the JSON of `ledger verify`.
Body report_body(const VerifyReport& report);

/// First fault in the newest `count` entries, in the runs that they close, and in the runs that are open.
std::optional<Fault> recent_fault(Connection& connection, std::int64_t count);

/// A fault as a Problem (ledger_altered).
Problem altered_problem(const std::string& file, const Fault& fault);

}  // namespace probewright::db
