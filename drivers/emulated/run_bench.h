#pragma once
#include <iosfwd>
#include <string>
#include <vector>

#include "drivers/emulated/bench.h"
#include "station/base/result.h"

namespace probewright::emulated {

/// What `probewright bench` was asked to do.
struct RunBenchOptions {
  BenchOptions bench;
  std::string folder;              ///< where the links nest1-phantom ... stand; made if missing, for this user alone
  std::string attach;              ///< folder of ttys nest1-phantom ... that others made; empty: own pseudo-terminals
  std::string control;             ///< control socket; empty: "control" in the folder
  std::string truth_file;          ///< written whenever a serial is seated for the first time; empty: none
  std::vector<std::string> seats;  ///< probes that sit there from the start: "1:AQ20-048-00001"
};

/// Runs a bench in real time (device time goes `speed` times as fast) until SIGINT, SIGTERM or SIGHUP. Prints to `out`
/// one line per port, "nest1-phantom PATH", then "control PATH", then "ready". Gives nothing when it ended by a signal.
/// Errors: bench_options, bench_folder, those of the ports, of the control socket, of seating, of the truth file.
Result<void> run_bench(const RunBenchOptions& options, std::ostream& out);

}  // namespace probewright::emulated
