#pragma once
#include <cstdint>
#include <optional>
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

/// Exactly one of serial, lot, person, entry and day is asked for.
struct TraceOptions {
  StationChoice choice;
  std::string serial, lot, person;
  std::optional<std::int64_t> entry;
  std::string day;     ///< of the plant's zone, "2026-12-01"
  std::string ledger;  ///< file; empty: the station file's
};

/// `trace`: all that the ledger holds of a serial, with the readings of its runs; the runs and entries of a lot, a
/// person, a day; or one entry.
/// Exit status: 0 told, 1 the ledger has nothing of it, 2 refused input, 3 could not read it.
int trace(const TraceOptions& options, Console& console);

}  // namespace probewright::text
