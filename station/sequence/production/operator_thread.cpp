#include "station/sequence/production/operator_thread.h"

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/asio/post.hpp>
#include <thread>

#include "drivers/wire/asio_clock.h"

namespace probewright::sequence::production {

/// In the order in which it may go: the thread is joined first, the context goes last.
struct OperatorThread::Inside {
  asio::io_context io{1};
  wire::AsioClock clock{io.get_executor()};
  std::function<void()> ended;
  EmulatedOperator person;
  std::exception_ptr failure;  ///< the operator's thread; read after it was joined
  std::thread thread;

  Inside(ProbeHandler& handler, std::function<void(LineRequest)> ask, std::function<void()> ended_,
         OperatorSettings settings, std::vector<Piece> pieces)
      : ended(std::move(ended_)), person(clock, handler, std::move(ask), std::move(settings), std::move(pieces)) {}

  void run() {
    asio::co_spawn(io, person.work(), [this](const std::exception_ptr& error) {
      failure = error;
      ended();
      io.stop();
    });
    io.run();
  }
};

OperatorThread::OperatorThread(ProbeHandler& handler, std::function<void(LineRequest)> ask, std::function<void()> ended,
                               OperatorSettings settings, std::vector<Piece> pieces)
    : inside_(std::make_unique<Inside>(handler, std::move(ask), std::move(ended), std::move(settings),
                                       std::move(pieces))) {}

OperatorThread::~OperatorThread() {
  stop();
  if (inside_->thread.joinable()) inside_->thread.join();
}

void OperatorThread::start() {
  inside_->thread = std::thread{[in = inside_.get()] { in->run(); }};
}

void OperatorThread::hear(LineEvent event) {
  asio::post(inside_->io, [in = inside_.get(), event = std::move(event)] { in->person.hear(event); });
}

void OperatorThread::stop() {
  asio::post(inside_->io, [in = inside_.get()] { in->person.stop(); });
}

const Work& OperatorThread::wait() {
  if (inside_->thread.joinable()) inside_->thread.join();
  if (inside_->failure) std::rethrow_exception(inside_->failure);
  return inside_->person.done();
}

}  // namespace probewright::sequence::production
