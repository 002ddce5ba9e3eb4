#pragma once
#include <boost/asio/any_completion_handler.hpp>
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/awaitable.hpp>
#include <deque>
#include <exception>
#include <functional>
#include <memory>
#include <optional>
#include <utility>
#include <vector>

#include "db/store.h"
#include "drivers/wire/workers.h"

namespace probewright::sequence {

namespace asio = boost::asio;

/// The line's door to the ledger: takes jobs in order and commits all that wait in one transaction and one sync, on
/// `workers`. Line thread only; the jobs themselves run on the ledger thread and touch nothing of the line.
class LedgerWriter {
 public:
  using Job = std::function<void(db::Change&)>;

  /// `store` belongs to the ledger thread from now on. `workers` must outlive the writer.
  LedgerWriter(std::unique_ptr<db::Store> store, wire::Workers& workers, asio::any_io_executor line);
  LedgerWriter(const LedgerWriter&) = delete;
  LedgerWriter& operator=(const LedgerWriter&) = delete;

  /// Resumes when the job's work is on disk. Throws ProblemError: what the job ran into (its work alone was undone), or
  /// a problem of the ledger (then trouble() says so too, and only the next start knows what is on disk). Not to be
  /// cancelled: what was asked is done.
  asio::awaitable<void> commit(Job job);
  /// The same without waiting; a failure shows in trouble().
  void submit(Job job);
  /// Resumes when nothing waits and nothing is being written.
  asio::awaitable<void> drained();

  /// What is wrong with the ledger since it failed; it stays unusable until the program opens it anew.
  const std::optional<Problem>& trouble() const { return trouble_; }

 private:
  using Done = asio::any_completion_handler<void(std::exception_ptr)>;
  struct Waiting {
    Job job;
    Done done;  ///< empty for submit()
  };
  void add(Waiting waiting);
  asio::awaitable<void> pump();
  asio::awaitable<void> write(std::vector<Waiting> group);
  void finish(Done done, const Result<void>& outcome);

  std::unique_ptr<db::Store> store_;
  wire::Workers& workers_;
  asio::any_io_executor line_;
  std::deque<Waiting> queue_;
  bool pumping_ = false;
  std::optional<Problem> trouble_;
  std::vector<Done> drain_waiters_;
};

}  // namespace probewright::sequence
