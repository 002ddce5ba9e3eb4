#pragma once
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct TraceOptions {
  StationChoice choice;
  std::string serial;
  std::string ledger;  ///< file; empty: the station's
};
/// `trace`: the runs of one serial with their readings, documents and devices, oldest first.
/// Exit status: 0, 1 the ledger holds no run of this serial, 2 refused input, 3 the ledger cannot be read.
int trace(const TraceOptions& options, Console& console);

}  // namespace probewright::text
