#include "drivers/wire/wait_queue.h"

#include <boost/asio/as_tuple.hpp>
#include <boost/asio/async_result.hpp>
#include <boost/asio/error.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/prefer.hpp>
#include <boost/asio/use_awaitable.hpp>

namespace probewright::wire {

using boost::system::error_code;

WaitQueue::Id WaitQueue::add(SteadyTime moment, asio::any_io_executor executor, Handler handler) {
  const Id id{moment, ++sequence_};
  if (closed_) return id;
  auto tracked = asio::prefer(executor, asio::execution::outstanding_work.tracked);
  const bool first = waits_.emplace(id, Wait{std::move(tracked), std::move(handler)}).first == waits_.begin();
  if (first && changed_) changed_();
  return id;
}

void WaitQueue::complete(Wait wait, error_code why) {
  asio::post(wait.executor, [handler = std::move(wait.handler), why]() mutable { std::move(handler)(why); });
}

bool WaitQueue::finish(const Id& id, error_code why) {
  const auto found = waits_.find(id);
  if (found == waits_.end()) return false;
  const bool first = found == waits_.begin();
  Wait wait = std::move(found->second);
  waits_.erase(found);
  complete(std::move(wait), why);
  if (first && changed_) changed_();
  return true;
}

std::optional<SteadyTime> WaitQueue::earliest() const {
  if (waits_.empty() || waits_.begin()->first.moment == never) return std::nullopt;
  return waits_.begin()->first.moment;
}

void WaitQueue::release_first() {
  if (!waits_.empty()) finish(Id{waits_.begin()->first}, asio::error::timed_out);
}

void WaitQueue::close() {
  closed_ = true;
  changed_ = nullptr;
  const auto forgotten = std::move(waits_);  // destroying a handler unwinds its coroutine, which may end other waits
  waits_.clear();
}

asio::awaitable<error_code> WaitQueue::wait(std::shared_ptr<WaitQueue> queue, SteadyTime moment, Id* id) {
  const auto begin = [queue, moment, id](auto handler) {
    auto executor = asio::get_associated_executor(handler);
    auto slot = asio::get_associated_cancellation_slot(handler);
    const Id made = queue->add(moment, executor, std::move(handler));
    if (id) *id = made;
    if (!slot.is_connected()) return;
    slot.assign([weak = std::weak_ptr{queue}, made](asio::cancellation_type) {
      if (const auto alive = weak.lock()) alive->finish(made, asio::error::operation_aborted);
    });
  };
  constexpr auto token = asio::as_tuple(asio::use_awaitable);
  const auto [why] = co_await asio::async_initiate<decltype(token), void(error_code)>(begin, token);
  co_return why;
}

}  // namespace probewright::wire
