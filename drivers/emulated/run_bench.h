#pragma once
#include <iosfwd>

#include "drivers/emulated/hosted_bench.h"

namespace probewright::emulated {

/// Runs a bench in real time (device time goes `speed` times as fast) until SIGINT, SIGTERM or SIGHUP. Prints to `out`
/// one line per port, "nest1-phantom PATH", then "control PATH", then "ready". Gives nothing when it ended by a signal.
/// Errors: bench_options, bench_folder, those of playing the scenario, those of the ports, of the control socket, of
/// seating, of the truth file.
Result<void> run_bench(const RunBenchOptions& options, std::ostream& out);

}  // namespace probewright::emulated
