#pragma once
#include <functional>
#include <optional>
#include <string>

#include "station/base/result.h"
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
  std::string operator_name;    ///< who tests; kept with the run
  std::string record;           ///< new folder for all bytes both ways; empty: none are kept
  /// The probe is seated and taken out through the bench's control socket; empty: where such a socket is.
  std::optional<bool> hands;
  std::string control;  ///< that socket; empty: the bench's usual one
};

/// The emulated bench's hands, for those who do not sit at it: made by main, since only it knows the bench.
struct BenchHands {
  std::function<Result<void>(int nest, const std::string& serial)> seat;
  std::function<Result<void>(int nest)> take_out;
};

/// `test`: one run of one probe in one nest, from the scan to the verdict on disk.
/// `hands`: who puts the probe in; nullptr: the person who reads what is asked for.
/// Exit status: 0 pass, 1 fail or void, 2 refused input, 3 could not do it.
int test(const TestOptions& options, const BenchHands* hands, Console& console);

}  // namespace probewright::text
