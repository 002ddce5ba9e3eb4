#include "drivers/wire/line_clock.h"

#include <boost/asio/error.hpp>
#include <boost/system/system_error.hpp>

#include "drivers/wire/wait_queue.h"

namespace probewright::wire {

asio::awaitable<void> LineClock::wait_until(SteadyTime moment) {
  if (moment <= steady_now()) co_return;
  const auto why = co_await WaitQueue::wait(waits(), moment, nullptr);
  if (why != asio::error::timed_out) throw boost::system::system_error(why);
}

asio::awaitable<void> LineClock::dwell(Duration physical) {
  return wait_until(steady_now() + from_seconds(seconds(physical) / speed()));
}

SteadyTime LineClock::deadline_after(Duration expected, Duration margin) const {
  return steady_now() + from_seconds(seconds(expected) / speed()) + margin;
}

}  // namespace probewright::wire
