#pragma once
#include <boost/asio/awaitable.hpp>
#include <memory>

#include "station/base/clock.h"

namespace probewright::wire {

class WaitQueue;

/// A clock that coroutines can wait on. The only source of waits in the line: nothing else may use a timer.
/// Waits honour asio's cancellation slot (terminal cancellation ends them with operation_aborted).
class LineClock : public Clock {
 public:
  /// Until `moment`. Returns at once when it has passed. Throws system_error(operation_aborted) when cancelled.
  virtual boost::asio::awaitable<void> wait_until(SteadyTime moment);
  /// How much faster than real time the bench runs: 1 on real devices. Deadlines and dwell() scale with it.
  virtual double speed() const = 0;
  /// The waits that this clock counts down; ports are woken through them (Signal).
  virtual std::shared_ptr<WaitQueue> waits() const = 0;
  /// Waits as long as physics asks for, i.e. `physical` / speed().
  boost::asio::awaitable<void> dwell(Duration physical);
  /// Deadline for something that takes `expected` in device time: expected / speed + `margin` of real time.
  SteadyTime deadline_after(Duration expected, Duration margin = std::chrono::milliseconds(500)) const;
};

}  // namespace probewright::wire
