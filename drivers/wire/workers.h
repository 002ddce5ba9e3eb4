#pragma once
#include <boost/asio/awaitable.hpp>
#include <functional>

namespace probewright::wire {

/// Runs a blocking job away from the line thread and resumes the awaiting coroutine on its own executor.
/// Production: one thread (ThreadWorkers). Trials: a handler posted on the same io_context after a seeded virtual
/// delay (TrialWorkers), so that a whole shift is one thread and one order. An exception of the job is rethrown at
/// the co_await. Jobs of one Workers run one at a time, in order of submission.
class Workers {
 public:
  virtual ~Workers() = default;
  virtual boost::asio::awaitable<void> run(std::function<void()> job) = 0;
};

}  // namespace probewright::wire
