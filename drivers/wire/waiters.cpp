#include "drivers/wire/waiters.h"

#include <boost/asio/error.hpp>
#include <boost/system/system_error.hpp>
#include <list>

#include "drivers/wire/wait_queue.h"

namespace probewright::wire {

struct Waiters::State {
  std::shared_ptr<WaitQueue> queue;
  std::list<WaitQueue::Id*> waiting;  // in the frames of the waiting coroutines; the oldest first
};

Waiters::Waiters(const LineClock& clock) : state_(new State{clock.waits(), {}}) {}

boost::asio::awaitable<void> Waiters::wait() {
  const auto state = state_;
  WaitQueue::Id id;
  struct Place {  // also when the coroutine is destroyed where it stands
    State& state;
    WaitQueue::Id* id;
    Place(State& s, WaitQueue::Id* i) : state(s), id(i) { state.waiting.push_back(id); }
    ~Place() { state.waiting.remove(id); }
  } place{*state, &id};
  const auto why = co_await WaitQueue::wait(state->queue, WaitQueue::never, &id);
  if (why) throw boost::system::system_error(why);
}

bool Waiters::wake_one() {
  while (!state_->waiting.empty()) {
    const WaitQueue::Id id = *state_->waiting.front();
    state_->waiting.pop_front();
    if (state_->queue->finish(id, {})) return true;  // else it was cancelled and has not resumed yet
  }
  return false;
}

void Waiters::wake_all() {
  while (wake_one()) {
  }
}

struct Turn::State {
  explicit State(const LineClock& clock) : queue(clock) {}
  bool taken = false;
  Waiters queue;
};

// The turn passes straight to the next in the queue, so that nobody overtakes.
Turn::Held::~Held() {
  if (state_ && !state_->queue.wake_one()) state_->taken = false;
}

Turn::Turn(const LineClock& clock) : state_(std::make_shared<State>(clock)) {}

boost::asio::awaitable<Turn::Held> Turn::take() {
  const auto state = state_;
  if (state->taken) co_await state->queue.wait();
  state->taken = true;
  co_return Held{state};
}

}  // namespace probewright::wire
