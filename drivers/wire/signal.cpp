#include "drivers/wire/signal.h"

#include <boost/asio/error.hpp>
#include <boost/system/system_error.hpp>
#include <stdexcept>

#include "drivers/wire/wait_queue.h"

namespace probewright::wire {

struct Signal::State {
  std::shared_ptr<WaitQueue> queue;
  WaitQueue::Id id;
  bool waiting = false;
};

Signal::Signal(const LineClock& clock) : state_(new State{clock.waits(), {}, false}) {}

Signal::~Signal() = default;

asio::awaitable<bool> Signal::wait(SteadyTime deadline) {
  if (state_->waiting) throw std::logic_error("two coroutines wait on one signal");
  struct Waiting {  // also when the coroutine is destroyed where it stands
    bool& flag;
    explicit Waiting(bool& f) : flag(f) { flag = true; }
    ~Waiting() { flag = false; }
  } waiting{state_->waiting};
  const auto why = co_await WaitQueue::wait(state_->queue, deadline, &state_->id);
  if (why == asio::error::operation_aborted) throw boost::system::system_error(why);
  co_return !why;
}

void Signal::notify() {
  if (state_->waiting) state_->queue->finish(state_->id, {});
}

}  // namespace probewright::wire
