#pragma once
#include <memory>
#include <string>
#include <vector>

#include "db/store.h"
#include "station/base/clock.h"
#include "station/sequence/configuration.h"
#include "station/sequence/line_services.h"
#include "station/sequence/run_book.h"

namespace probewright::sequence {

/// A run that an earlier start left open, and how it was closed now.
struct ClosedLate {
  std::int64_t run = 0;
  std::string serial;
  RunVerdict verdict = RunVerdict::void_run;
  int nest = 0;  ///< where the probe sat
};

/// The line's ledger, opened for writing, and what had to be set right.
struct LedgerStart {
  std::unique_ptr<db::Store> store;
  std::vector<ClosedLate> closed_late;
};

/// Opens (or begins) the ledger of a station, with its folder, and closes the runs that an earlier start left open:
/// fail when a judged reading on disk lies outside its acceptance limits, else void; their readings stay.
/// Errors: those of db::Store::open, ledger_folder, ledger_clock_behind (the clock stands behind the last entry).
Result<LedgerStart> start_ledger(const db::StoreOptions& options, const Clock& clock);

/// Options for the ledger of this station at `path`.
db::StoreOptions ledger_options(const StationFile& station, std::string path, const Software& software);

}  // namespace probewright::sequence
