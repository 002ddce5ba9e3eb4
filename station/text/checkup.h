#pragma once
#include <optional>
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct CheckupOptions {
  StationChoice choice;
  std::string ledger;           ///< file; empty: the station file's
  std::string ports;            ///< folder for port names that are no full paths; empty: the station file's
  std::optional<double> speed;  ///< of the emulated bench; empty: the station file's
};

/// `checkup`: ports, devices, documents, ledger, disk, clock, permissions; what is wrong and how to mend it.
/// Exit status: 0 all well, 1 something is wrong, 2 refused input.
int checkup(const CheckupOptions& options, Console& console);

}  // namespace probewright::text
