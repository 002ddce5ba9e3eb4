#include "drivers/wire/virtual_clock.h"

#include <algorithm>
#include <stdexcept>

#include "drivers/wire/wait_queue.h"

namespace probewright::wire {

VirtualClock::VirtualClock(UtcTime start, double speed)
    : start_(start), speed_(speed), waits_(std::make_shared<WaitQueue>()) {
  if (!(speed > 0.0)) throw std::invalid_argument("speed of a clock must be above 0");
}

VirtualClock::~VirtualClock() { waits_->close(); }

UtcTime VirtualClock::utc_now() const {
  return {start_.microseconds +
          std::chrono::duration_cast<std::chrono::microseconds>(now_.since_start + utc_step_).count()};
}

bool VirtualClock::advance() {
  const auto first = waits_->earliest();
  if (!first) return false;
  now_ = std::max(now_, *first);
  waits_->release_first();
  return true;
}

VirtualClock::Ended VirtualClock::run_until(asio::io_context& io, const std::function<bool()>& holds,
                                            SteadyTime limit) {
  while (true) {
    io.restart();  // poll() stops the context whenever it runs out of work
    io.poll();
    if (holds()) return Ended::reached;
    const auto next = waits_->earliest();
    if (next && *next > limit) return Ended::too_late;
    if (!advance()) return Ended::stalled;
  }
}

bool VirtualClock::run_out(asio::io_context& io) {
  run_until(io, [] { return false; });
  return waiting() == 0;
}

std::size_t VirtualClock::waiting() const { return waits_->size(); }

}  // namespace probewright::wire
