#include "station/sequence/ledger_writer.h"

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/detached.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/use_awaitable.hpp>

#include "db/error.h"

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
  if (trouble_) return finish(std::move(waiting.done), std::make_exception_ptr(ProblemError{*trouble_}));
  queue_.push_back(std::move(waiting));
  if (pumping_) return;
  pumping_ = true;
  asio::co_spawn(line_, pump(), [](const std::exception_ptr& error) {
    if (error) std::rethrow_exception(error);  // pump() catches all that the ledger throws: this is our own mistake
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
  for (Done& waiter : std::exchange(drain_waiters_, {})) finish(std::move(waiter), nullptr);
}

asio::awaitable<void> LedgerWriter::write(std::vector<Waiting> group) {
  std::vector<Job> jobs;
  for (Waiting& waiting : group) jobs.push_back(std::move(waiting.job));
  std::vector<std::exception_ptr> outcomes(group.size());
  std::exception_ptr lost;
  try {
    co_await workers_.run([&] { outcomes = store_->commit_group(jobs); });
  } catch (...) {
    lost = std::current_exception();
  }
  if (lost) note_trouble(lost);
  for (std::size_t i = 0; i < group.size(); ++i) {
    const std::exception_ptr error = lost ? lost : outcomes[i];
    if (error && !lost && !group[i].done) note_trouble(error);  // nobody waits for it: the run must hear of it
    finish(std::move(group[i].done), error);
  }
}

void LedgerWriter::note_trouble(const std::exception_ptr& error) {
  if (trouble_) return;
  try {
    std::rethrow_exception(error);
  } catch (const ProblemError& known) {
    trouble_ = known.problem();
  } catch (const std::exception& unknown) {
    trouble_ = Problem{"ledger_unknown_trouble", "ledger", {{"what", unknown.what()}}};
  }
}

void LedgerWriter::finish(Done done, std::exception_ptr error) {
  if (!done) return;
  asio::post(line_, [done = std::move(done), error = std::move(error)]() mutable { std::move(done)(error); });
}

}  // namespace probewright::sequence
