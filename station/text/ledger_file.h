#pragma once
#include <string>

#include "station/base/result.h"
#include "station/text/choices.h"

namespace probewright::text {

/// The ledger to read: `chosen` unless empty, else the one that the station file names.
/// Errors: those of finding the configuration and reading the station file.
ResultOrFaults<std::string> ledger_file(const std::string& chosen, const StationChoice& choice);

}  // namespace probewright::text
