#pragma once
#include "station/base/times.h"

namespace probewright {

/// Where time comes from: the machine in production, a virtual clock in trials. Any thread.
class Clock {
 public:
  virtual ~Clock() = default;
  virtual UtcTime utc_now() const = 0;
  virtual SteadyTime steady_now() const = 0;
};

/// The machine's own clocks.
class SystemClock final : public Clock {
 public:
  UtcTime utc_now() const override;
  SteadyTime steady_now() const override;
};

}  // namespace probewright
