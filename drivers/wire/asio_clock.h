#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <memory>

#include "drivers/wire/line_clock.h"

namespace probewright::wire {

/// The machine's clock for a line: one asio timer for all waits. The executor's context must outlive it. Waits: line
/// thread only; reading the time: any thread.
class AsioClock final : public LineClock {
 public:
  /// `speed`: that of the bench, above 0 (1 for real devices). The clock itself always runs in real time.
  explicit AsioClock(boost::asio::any_io_executor executor, double speed = 1.0);
  ~AsioClock() override;
  UtcTime utc_now() const override;
  SteadyTime steady_now() const override;
  double speed() const override { return speed_; }
  std::shared_ptr<WaitQueue> waits() const override;

 private:
  struct Core;
  double speed_;
  std::shared_ptr<Core> core_;
};

}  // namespace probewright::wire
