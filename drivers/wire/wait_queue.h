#pragma once
#include <boost/asio/any_completion_handler.hpp>
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/awaitable.hpp>
#include <boost/system/error_code.hpp>
#include <cstdint>
#include <functional>
#include <map>
#include <memory>
#include <optional>

#include "station/base/times.h"

namespace probewright::wire {

namespace asio = boost::asio;

/// The waits of one line, ordered by (moment, sequence): what a clock counts down and what ports are woken through.
/// A wait ends exactly once: its moment comes (release_first), somebody ends it (finish), it is cancelled through its
/// slot, or the queue closes. Its handler is always posted, never called at once. Shared by the clock and everything
/// that waits on it, so that no order of destruction matters. Line thread only.
class WaitQueue : public std::enable_shared_from_this<WaitQueue> {
 public:
  using Handler = asio::any_completion_handler<void(boost::system::error_code)>;
  struct Id {
    SteadyTime moment;
    std::uint64_t sequence = 0;
    auto operator<=>(const Id&) const = default;
  };
  /// A moment that never comes: such a wait ends by finish or cancellation alone.
  static constexpr SteadyTime never{Duration::max()};

  /// The handler is called on `executor` with timed_out when the moment has come. The wait counts as work of it.
  Id add(SteadyTime moment, asio::any_io_executor executor, Handler handler);
  /// Ends a wait with `why`; false when it is over already.
  bool finish(const Id& id, boost::system::error_code why);
  /// The earliest moment waited for, if any wait has one.
  std::optional<SteadyTime> earliest() const;
  /// Ends the first wait (with timed_out).
  void release_first();
  std::size_t size() const { return waits_.size(); }
  /// Called after every change of earliest(); the clock's own.
  void on_change(std::function<void()> changed) { changed_ = std::move(changed); }
  /// Forgets all waits without calling their handlers; add() does so from then on.
  void close();

  /// Waits in a coroutine; gives timed_out, what finish() said, or operation_aborted. `id` (may be null) is set
  /// before the coroutine is suspended and must live until the wait ends.
  static asio::awaitable<boost::system::error_code> wait(std::shared_ptr<WaitQueue> queue, SteadyTime moment, Id* id);

 private:
  struct Wait {
    asio::any_io_executor executor;  // tracks work: run() goes on while somebody waits
    Handler handler;
  };
  static void complete(Wait wait, boost::system::error_code why);

  std::map<Id, Wait> waits_;
  std::uint64_t sequence_ = 0;
  std::function<void()> changed_;
  bool closed_ = false;
};

}  // namespace probewright::wire
