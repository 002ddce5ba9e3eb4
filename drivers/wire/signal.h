#pragma once
#include <boost/asio/awaitable.hpp>
#include <memory>

#include "drivers/wire/line_clock.h"

namespace probewright::wire {

/// Lets one coroutine wait for something that another part of the line thread does, with a deadline. It remembers
/// nothing: the waiter checks its condition, waits, and checks again. Line thread only.
class Signal {
 public:
  explicit Signal(const LineClock& clock);
  ~Signal();
  Signal(const Signal&) = delete;
  Signal& operator=(const Signal&) = delete;
  /// Until notify() (true) or `deadline` (false). Throws system_error(operation_aborted) when cancelled, and
  /// std::logic_error when somebody waits here already. The signal must outlive the wait.
  boost::asio::awaitable<bool> wait(SteadyTime deadline);
  /// Wakes the waiter, if there is one.
  void notify();

 private:
  struct State;
  std::unique_ptr<State> state_;
};

}  // namespace probewright::wire
