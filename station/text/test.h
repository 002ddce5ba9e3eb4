#pragma once
#include <optional>
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct TestOptions {
  StationChoice choice;
  Build build;
  std::string serial;
  int nest = 1;
  std::string purpose = "engineering";
  std::string ledger;           ///< file; empty: the station file's
  std::string ports;            ///< folder for port names that are no full paths; empty: the station file's
  std::optional<double> speed;  ///< of the emulated bench; empty: the station file's
  bool hands = false;           ///< the probe is seated and taken out through the bench's control socket
  std::string control;          ///< that socket; empty: the bench's usual one
  std::string record;           ///< folder for all bytes both ways; empty: not recorded
};

/// `test`: one run of one probe in one nest, from the scan to the verdict on disk.
/// Exit status: 0 pass, 1 fail or void, 2 refused input, 3 could not do it.
int test(const TestOptions& options, Console& console);

}  // namespace probewright::text
