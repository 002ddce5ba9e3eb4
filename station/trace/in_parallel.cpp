#include "station/trace/in_parallel.h"

#include <algorithm>
#include <atomic>
#include <chrono>
#include <condition_variable>
#include <exception>
#include <mutex>
#include <thread>
#include <vector>

namespace probewright::trace {
namespace {

/// What the threads share.
class Shared {
 public:
  Shared(std::size_t items, const std::function<void(std::size_t, std::size_t)>& work, const std::stop_token& stop)
      : items_(items), work_(work), stop_(stop) {}

  void run(std::size_t worker) {
    try {
      for (std::size_t item; !ended_ && !stop_.stop_requested() && (item = next_.fetch_add(1)) < items_; ++done_)
        work_(worker, item);
    } catch (...) {
      const std::lock_guard lock(mutex_);
      if (!error_) error_ = std::current_exception();
      ended_ = true;
    }
    const std::lock_guard lock(mutex_);
    ++finished_;
    wake_.notify_one();
  }
  /// True when `threads` threads have finished; waits a moment for it.
  bool finished(std::size_t threads) {
    std::unique_lock lock(mutex_);
    return wake_.wait_for(lock, std::chrono::milliseconds(100), [&] { return finished_ == threads; });
  }
  std::size_t done() const { return done_; }
  const std::exception_ptr& error() const { return error_; }

 private:
  std::size_t items_;
  const std::function<void(std::size_t, std::size_t)>& work_;
  const std::stop_token& stop_;
  std::atomic<std::size_t> next_{0}, done_{0};
  std::atomic<bool> ended_{false};
  std::mutex mutex_;
  std::condition_variable wake_;
  std::size_t finished_ = 0;
  std::exception_ptr error_;
};

}  // namespace

std::size_t workers_for(int threads) {
  return threads > 0 ? static_cast<std::size_t>(threads) : std::max(1u, std::thread::hardware_concurrency());
}

bool in_parallel(int threads, std::size_t items, const std::function<void(std::size_t, std::size_t)>& work,
                 const std::function<void(std::size_t, std::size_t)>& progress, const std::stop_token& stop) {
  Shared shared(items, work, stop);
  const std::size_t count = std::min(workers_for(threads), std::max<std::size_t>(items, 1));
  {
    std::vector<std::jthread> all;
    for (std::size_t i = 0; i < count; ++i) all.emplace_back([&shared, i] { shared.run(i); });
    while (!shared.finished(count))
      if (progress) progress(shared.done(), items);
  }
  if (shared.error()) std::rethrow_exception(shared.error());
  if (progress) progress(shared.done(), items);
  return shared.done() == items;
}

}  // namespace probewright::trace
