#include "drivers/wire/asio_clock.h"

#include <algorithm>
#include <boost/asio/steady_timer.hpp>
#include <stdexcept>

#include "drivers/wire/wait_queue.h"

namespace probewright::wire {

/// The timer stands at the earliest wait or before it: ends of waits do not move it, which would cost a system call
/// for every deadline that was kept; it then finds nothing due and goes on.
struct AsioClock::Core : std::enable_shared_from_this<AsioClock::Core> {
  explicit Core(asio::any_io_executor executor) : timer(std::move(executor)) {}

  void rearm() {
    const auto first = waits->earliest();
    if (!first) {
      timer.cancel();  // or run() would go on until it expires
      armed = WaitQueue::never;
    } else if (*first < armed) {
      arm(*first);
    }
  }

  void arm(SteadyTime moment) {
    armed = moment;
    timer.expires_after(std::max(moment - machine.steady_now(), Duration{0}));
    timer.async_wait([weak = weak_from_this(), moment](boost::system::error_code error) {
      const auto core = weak.lock();
      if (!error && core && core->armed == moment) core->ring();
    });
  }

  void ring() {
    armed = WaitQueue::never;
    const auto now = machine.steady_now();
    while (waits->earliest() && *waits->earliest() <= now) waits->release_first();
    rearm();
  }

  SystemClock machine;
  asio::steady_timer timer;
  std::shared_ptr<WaitQueue> waits = std::make_shared<WaitQueue>();
  SteadyTime armed = WaitQueue::never;
};

AsioClock::AsioClock(asio::any_io_executor executor, double speed)
    : speed_(speed), core_(std::make_shared<Core>(std::move(executor))) {
  if (!(speed > 0.0)) throw std::invalid_argument("speed of a clock must be above 0");
  core_->waits->on_change([core = core_.get()] { core->rearm(); });
}

AsioClock::~AsioClock() { core_->waits->close(); }

UtcTime AsioClock::utc_now() const { return core_->machine.utc_now(); }
SteadyTime AsioClock::steady_now() const { return core_->machine.steady_now(); }
std::shared_ptr<WaitQueue> AsioClock::waits() const { return core_->waits; }

}  // namespace probewright::wire
