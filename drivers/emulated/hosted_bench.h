#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <functional>
#include <memory>
#include <optional>
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
  std::string scenario_file;       ///< what goes wrong with the bench (SCENARIO.md), read by whoever asks; may be empty
  Scenario scenario;               ///< what stood in it
  std::vector<std::string> seats;  ///< probes that sit there from the start: "1:AQ20-048-00001"
};

/// Why no bench can run like that (bench_options), asked before a clock is made of its speed. Nothing: it can.
std::optional<Problem> impossible(const RunBenchOptions& options);

/// A bench behind pseudo-terminals, or ttys that others made, in real time. Lines that are lost from outside are taken
/// up again. One thread, that of the executor; clock and observer outlive it.
class HostedBench {
 public:
  /// `failed` hears of a truth file that could not be written later; the bench goes on.
  /// `options` must be possible. Errors: bench_folder, those of the ports, of seating, of the truth file.
  static Result<std::unique_ptr<HostedBench>> start(asio::any_io_executor executor, wire::LineClock& clock,
                                                    RunBenchOptions options, std::function<void(Problem)> failed,
                                                    ActionObserver* observer = nullptr);
  Bench& bench() { return *bench_; }
  /// Where the device's line stands in the file system.
  std::string path(const DeviceId& device) const;

 private:
  HostedBench(asio::any_io_executor executor, wire::LineClock& clock, RunBenchOptions options,
              std::function<void(Problem)> failed, ActionObserver* observer);
  Result<void> begin();
  Result<std::unique_ptr<wire::Port>> make_line(const DeviceId& device);
  Result<void> seat(const std::string& wanted);
  Result<void> write_truth();

  asio::any_io_executor executor_;
  wire::LineClock& clock_;
  RunBenchOptions options_;
  std::function<void(Problem)> failed_;
  std::shared_ptr<Bench> bench_;
};

}  // namespace probewright::emulated
