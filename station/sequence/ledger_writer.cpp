#include "station/sequence/ledger_writer.h"

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/detached.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/use_awaitable.hpp>

namespace probewright::sequence {

LedgerWriter::LedgerWriter(std::unique_ptr<db::Store> store, wire::Workers& workers, asio::any_io_executor line)
    : store_(std::move(store)), workers_(workers), line_(std::move(line)) {}

asio::awaitable<void> LedgerWriter::commit(Job job) {
  return asio::async_initiate<const asio::use_awaitable_t<>&, void(std::exception_ptr)>(
      [this](auto handler, Job work) {
        add({std::move(work), Done{std::move(handler)}});
      },
      asio::use_awaitable, std::move(job));
}

void LedgerWriter::submit(Job job) { add({std::move(job), {}}); }

asio::awaitable<void> LedgerWriter::drained() {
  if (!pumping_) co_return;
  co_await asio::async_initiate<const asio::use_awaitable_t<>&, void(std::exception_ptr)>(
      [this](auto handler) { drain_waiters_.emplace_back(std::move(handler)); }, asio::use_awaitable);
}

void LedgerWriter::add(Waiting waiting) {
  if (trouble_) return finish(std::move(waiting.done), *trouble_);
  queue_.push_back(std::move(waiting));
  if (pumping_) return;
  pumping_ = true;
  asio::co_spawn(line_, pump(), [](const std::exception_ptr& error) {
    if (error) std::rethrow_exception(error);  // the ledger's problems are values: this is our own mistake
  });
}

asio::awaitable<void> LedgerWriter::pump() {
  while (!queue_.empty()) {
    std::vector<Waiting> group;
    while (!queue_.empty()) {
      group.push_back(std::move(queue_.front()));
      queue_.pop_front();
    }
    co_await write(std::move(group));
  }
  pumping_ = false;
  for (Done& waiter : std::exchange(drain_waiters_, {})) finish(std::move(waiter), {});
}

asio::awaitable<void> LedgerWriter::write(std::vector<Waiting> group) {
  std::vector<Job> jobs;
  for (Waiting& waiting : group) jobs.push_back(std::move(waiting.job));
  std::vector<Result<void>> outcomes;
  std::optional<Problem> stopped;
  co_await workers_.run([&] {
    outcomes = store_->commit_group(jobs);
    stopped = store_->trouble();
  });
  if (stopped) trouble_ = stopped;
  for (std::size_t i = 0; i < group.size(); ++i) {
    // Nobody waits for what submit() brought: the run hears of it by the ledger's trouble.
    if (!outcomes[i] && !group[i].done && !trouble_) trouble_ = outcomes[i].error();
    finish(std::move(group[i].done), outcomes[i]);
  }
}

void LedgerWriter::finish(Done done, const Result<void>& outcome) {
  if (!done) return;
  std::exception_ptr error;
  if (!outcome) error = std::make_exception_ptr(ProblemError{outcome.error()});
  asio::post(line_, [done = std::move(done), error = std::move(error)]() mutable { std::move(done)(error); });
}

}  // namespace probewright::sequence
