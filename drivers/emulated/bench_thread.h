#pragma once
#include <functional>
#include <memory>

#include "drivers/emulated/hosted_bench.h"

namespace probewright::emulated {

/// A bench in a thread of its own, behind real pseudo-terminals, for a program that also runs the station: the line
/// opens the ports as it opens any others. The control socket of the options is not opened; hands are lent instead.
class BenchThread {
 public:
  /// `observer` may be null; it is told on the bench's thread and outlives this. Errors: bench_options, those of
  /// HostedBench::start.
  static Result<std::unique_ptr<BenchThread>> start(RunBenchOptions options, ActionObserver* observer = nullptr);
  /// Ends the devices and waits for the thread.
  ~BenchThread();
  BenchThread(const BenchThread&) = delete;
  BenchThread& operator=(const BenchThread&) = delete;

  /// Lets `work` use the hands on the bench's thread and waits for it. Any thread but the bench's own.
  /// Errors: those of `work`; bench_ended when the bench ended by a mistake of ours.
  Result<void> with_hands(const std::function<Result<void>(Hands&)>& work);

 private:
  struct Inside;
  explicit BenchThread(std::unique_ptr<Inside> inside);
  std::unique_ptr<Inside> inside_;
};

}  // namespace probewright::emulated
