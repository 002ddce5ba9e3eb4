#pragma once
#include <memory>

#include "drivers/wire/workers.h"

namespace probewright::wire {

/// One thread that does the jobs. A job that was submitted is done, even when its coroutine is cancelled or the workers
/// are destroyed meanwhile; the destructor waits for all of them. The io_context of the awaiting coroutines must
/// outlive it.
class ThreadWorkers final : public Workers {
 public:
  ThreadWorkers();
  ~ThreadWorkers() override;
  boost::asio::awaitable<void> run(std::function<void()> job) override;

 private:
  struct Core;
  std::unique_ptr<Core> core_;
};

}  // namespace probewright::wire
