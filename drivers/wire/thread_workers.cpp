#include "drivers/wire/thread_workers.h"

#include <boost/asio/any_completion_handler.hpp>
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/async_result.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/prefer.hpp>
#include <boost/asio/use_awaitable.hpp>
#include <condition_variable>
#include <deque>
#include <exception>
#include <mutex>
#include <thread>

namespace probewright::wire {

namespace asio = boost::asio;

struct ThreadWorkers::Core {
  struct Task {
    std::function<void()> job;
    asio::any_io_executor executor;  // tracks work: the line's run() goes on while a job is out
    asio::any_completion_handler<void(std::exception_ptr)> handler;
  };

  void submit(Task task) {
    {
      const std::lock_guard lock{mutex};
      tasks.push_back(std::move(task));
    }
    changed.notify_one();
  }

  void stop() {
    {
      const std::lock_guard lock{mutex};
      stopping = true;
    }
    changed.notify_one();
    thread.join();
  }

  void work() {
    while (true) {
      std::unique_lock lock{mutex};
      changed.wait(lock, [this] { return stopping || !tasks.empty(); });
      if (tasks.empty()) return;
      Task task = std::move(tasks.front());
      tasks.pop_front();
      lock.unlock();
      finish(std::move(task));
    }
  }

  static void finish(Task task) {
    std::exception_ptr thrown;
    try {
      task.job();
    } catch (...) {
      thrown = std::current_exception();
    }
    task.job = nullptr;  // what the job holds goes on the worker's thread, before the coroutine hears of its end
    asio::post(task.executor,
               [handler = std::move(task.handler), thrown]() mutable { std::move(handler)(std::move(thrown)); });
  }

  std::mutex mutex;
  std::condition_variable changed;
  std::deque<Task> tasks;
  bool stopping = false;
  std::thread thread{[this] { work(); }};  // last: it uses all the others
};

ThreadWorkers::ThreadWorkers() : core_(std::make_unique<Core>()) {}

ThreadWorkers::~ThreadWorkers() { core_->stop(); }

asio::awaitable<void> ThreadWorkers::run(std::function<void()> job) {
  const auto begin = [core = core_.get(), &job](auto handler) {
    auto executor = asio::prefer(asio::get_associated_executor(handler), asio::execution::outstanding_work.tracked);
    core->submit({std::move(job), std::move(executor), std::move(handler)});
  };
  co_await asio::async_initiate<const asio::use_awaitable_t<>, void(std::exception_ptr)>(begin, asio::use_awaitable);
}

}  // namespace probewright::wire
