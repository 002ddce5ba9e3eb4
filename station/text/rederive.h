#pragma once
#include <cstdint>
#include <optional>
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

/// Exactly one of serial, lot, run and everything is asked for.
struct RederiveOptions {
  StationChoice choice;
  Build build;
  std::string serial, lot;
  std::optional<std::int64_t> run;
  bool everything = false;
  std::string ledger;  ///< empty: the station's
  int threads = 0;
};
/// `rederive`: readings and verdicts from stored captures, compared with what was stored.
/// Exit status: 0 all that could be made again agrees, 1 something differs or nothing could be made again, 2 refused,
/// 3 it could not be done.
int rederive(const RederiveOptions& options, Console& console);

struct ImpactOptions {
  StationChoice choice;
  Build build;
  std::string device;
  std::string since, until;  ///< moments as trace::moment_in takes them; `until` may be empty
  std::string off;           ///< slug of what was off; empty with a certificate
  std::optional<double> by;  ///< how much too high, in its unit
  bool both_ways = false;
  std::string certificate;  ///< file of a corrected certificate
  std::string ledger;       ///< empty: the station's
  int threads = 0;
  bool hold = false;
  std::string who, reason;
};
/// `impact`: which passed probes would have failed. Exit status: 0 none, 1 some would, 2 refused, 3 it could not be
/// done.
int impact(const ImpactOptions& options, Console& console);

}  // namespace probewright::text
