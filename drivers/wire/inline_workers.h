#pragma once
#include <boost/asio/awaitable.hpp>
#include <functional>
#include <utility>

#include "drivers/wire/workers.h"

namespace probewright::wire {

/// Does each job at once, on the thread that asks: for a line whose time stands still meanwhile.
class InlineWorkers final : public Workers {
 public:
  boost::asio::awaitable<void> run(std::function<void()> job) override { return at_once(std::move(job)); }

 private:
  static boost::asio::awaitable<void> at_once(std::function<void()> job) {
    job();
    co_return;
  }
};

}  // namespace probewright::wire
