#pragma once
#include <boost/asio/awaitable.hpp>
#include <memory>

#include "drivers/wire/line_clock.h"

namespace probewright::wire {

/// Coroutines that wait for something to happen, woken in the order in which they came. Waits honour the cancellation
/// slot. Woken coroutines resume on their own executor, never inside a wake. Line thread only.
class Waiters {
 public:
  explicit Waiters(const LineClock& clock);
  /// Until woken. Throws system_error(operation_aborted) when cancelled.
  boost::asio::awaitable<void> wait();
  /// Wakes the one that waits longest; false when nobody waits.
  bool wake_one();
  void wake_all();

 private:
  struct State;
  std::shared_ptr<State> state_;
};

/// Lets one coroutine at a time through, in the order of asking: a device works on one request at a time, and two
/// coroutines may want it. Line thread only.
class Turn {
  struct State;

 public:
  /// The turn, given back when this goes. May outlive the Turn.
  class Held {
   public:
    Held(Held&& other) noexcept = default;
    Held& operator=(Held&&) = delete;
    ~Held();

   private:
    friend class Turn;
    explicit Held(std::shared_ptr<State> state) : state_(std::move(state)) {}
    std::shared_ptr<State> state_;
  };

  explicit Turn(const LineClock& clock);
  /// Waits for the turn. Throws system_error(operation_aborted) when cancelled.
  boost::asio::awaitable<Held> take();

 private:
  std::shared_ptr<State> state_;
};

}  // namespace probewright::wire
