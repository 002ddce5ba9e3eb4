#pragma once
#include <boost/asio/io_context.hpp>
#include <functional>
#include <memory>
#include <string>

#include "drivers/wire/line_clock.h"

namespace probewright::wire {

/// Time for trials: it stands still while anything is ready and then jumps to the earliest wait, so that a shift takes
/// milliseconds and one seed gives one order of events. One thread. Declare it after the io_context.
class VirtualClock final : public LineClock {
 public:
  /// Steady time begins at 0 and UTC at `start`. `speed` as for AsioClock, above 0.
  explicit VirtualClock(UtcTime start, double speed = 1.0);
  ~VirtualClock() override;
  UtcTime utc_now() const override;
  SteadyTime steady_now() const override { return now_; }
  double speed() const override { return speed_; }
  std::shared_ptr<WaitQueue> waits() const override { return waits_; }

  /// Jumps to the earliest wait and ends it, that one alone; false when no wait has a moment.
  bool advance();

  enum class Ended {
    reached,  ///< what was asked for holds
    stalled,  ///< nothing is ready and no wait has a moment: it would never hold
    too_late  ///< the next wait lies beyond the limit
  };
  /// Runs what is ready, then jumps, again and again, until `holds` (asked whenever nothing is ready). A stall is for
  /// the caller to report: see waiting().
  Ended run_until(boost::asio::io_context& io, const std::function<bool()>& holds, SteadyTime limit = latest);
  /// The same without a condition: until nothing is left to do. True when no coroutine is left waiting.
  bool run_out(boost::asio::io_context& io);
  /// How many waits stand open, those without a moment included.
  std::size_t waiting() const;

  /// Steps UTC (not the steady time), as a clock correction does.
  void step_utc(Duration by) { utc_step_ += by; }

  static constexpr SteadyTime latest{Duration::max()};

 private:
  UtcTime start_;
  double speed_;
  SteadyTime now_;
  Duration utc_step_{0};
  std::shared_ptr<WaitQueue> waits_;
};

}  // namespace probewright::wire
