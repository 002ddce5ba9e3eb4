#include "drivers/wire/trial_workers.h"

#include <algorithm>
#include <boost/asio/any_completion_handler.hpp>
#include <boost/asio/async_result.hpp>
#include <boost/asio/use_awaitable.hpp>
#include <exception>
#include <stdexcept>

#include "drivers/wire/wait_queue.h"

namespace probewright::wire {

TrialWorkers::TrialWorkers(LineClock& clock, std::uint64_t seed, Duration shortest, Duration longest)
    : clock_(clock), entropy_(seed), shortest_(shortest), longest_(longest) {
  if (shortest < Duration{0} || longest < shortest) throw std::invalid_argument("times of trial jobs");
}

Duration TrialWorkers::draw() {
  const auto span = static_cast<std::uint64_t>((longest_ - shortest_).count()) + 1;
  return shortest_ + Duration{static_cast<Duration::rep>(entropy_.next() % span)};
}

asio::awaitable<void> TrialWorkers::run(std::function<void()> job) {
  free_at_ = std::max(free_at_, clock_.steady_now()) + draw();
  const auto begin = [queue = clock_.waits(), moment = free_at_, &job](auto handler) {
    const auto executor = asio::get_associated_executor(handler);
    asio::any_completion_handler<void(std::exception_ptr)> done{std::move(handler)};
    queue->add(moment, executor, [work = std::move(job), done = std::move(done)](boost::system::error_code) mutable {
      std::exception_ptr thrown;
      try {
        work();
      } catch (...) {
        thrown = std::current_exception();
      }
      work = nullptr;
      std::move(done)(std::move(thrown));
    });
  };
  co_await asio::async_initiate<const asio::use_awaitable_t<>, void(std::exception_ptr)>(begin, asio::use_awaitable);
}

}  // namespace probewright::wire
