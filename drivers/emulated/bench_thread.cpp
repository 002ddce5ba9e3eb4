#include "drivers/emulated/bench_thread.h"

#include <boost/asio/io_context.hpp>
#include <boost/asio/post.hpp>
#include <future>
#include <mutex>
#include <thread>

#include "drivers/wire/asio_clock.h"

namespace probewright::emulated {

struct BenchThread::Inside {
  using Work = std::packaged_task<Result<void>(Hands&)>;

  asio::io_context io{1};
  wire::AsioClock clock;
  std::unique_ptr<HostedBench> hosted;  ///< bench's thread only, once it runs
  std::mutex mutex;
  bool ended = false;  ///< guarded by the mutex
  std::string reason;  ///< guarded by the mutex
  std::thread thread;

  explicit Inside(double speed) : clock(io.get_executor(), speed) {}

  void run() {
    const auto stays = asio::make_work_guard(io);
    std::string why = "it was asked to";
    try {
      io.run();
    } catch (const std::exception& error) {
      why = error.what();
    }
    const std::lock_guard lock{mutex};
    ended = true;
    reason = why;
  }
};

BenchThread::BenchThread(std::unique_ptr<Inside> inside) : inside_(std::move(inside)) {}

Result<std::unique_ptr<BenchThread>> BenchThread::start(RunBenchOptions options, ActionObserver* observer) {
  if (const auto problem = impossible(options)) return *problem;
  auto inside = std::make_unique<Inside>(options.bench.speed);
  auto hosted = HostedBench::start(
      inside->io.get_executor(), inside->clock, std::move(options),
      [](Problem problem) { throw ProblemError(std::move(problem)); }, observer);
  if (!hosted) return hosted.error();
  inside->hosted = std::move(*hosted);
  inside->thread = std::thread{[raw = inside.get()] { raw->run(); }};
  return std::unique_ptr<BenchThread>{new BenchThread(std::move(inside))};
}

BenchThread::~BenchThread() {
  inside_->io.stop();
  inside_->thread.join();
}

Result<void> BenchThread::with_hands(const std::function<Result<void>(Hands&)>& work) {
  const auto task = std::make_shared<Inside::Work>(work);
  auto done = task->get_future();
  asio::post(inside_->io, [task, raw = inside_.get()] { (*task)(raw->hosted->bench()); });
  while (done.wait_for(std::chrono::milliseconds(100)) != std::future_status::ready) {
    const std::lock_guard lock{inside_->mutex};
    if (inside_->ended) return Problem{"bench_ended", "", {{"reason", inside_->reason}}};
  }
  return done.get();
}

}  // namespace probewright::emulated
