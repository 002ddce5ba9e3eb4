#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/awaitable.hpp>
#include <deque>
#include <memory>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"
#include "station/base/digest.h"

namespace probewright::emulated {

/// Sends what several coroutines have to say over one port, in the order in which it was put in. The coroutine that
/// sends lives only while there is something to send. Line thread only.
class Outbox : public std::enable_shared_from_this<Outbox> {
 public:
  Outbox(boost::asio::any_io_executor executor, wire::LineClock& clock, std::shared_ptr<wire::Port> port)
      : executor_(std::move(executor)), clock_(clock), port_(std::move(port)) {}
  void put(Bytes bytes);
  /// Forgets what was not sent.
  void clear() { waiting_.clear(); }
  /// The port is gone; what is put in from now on is forgotten.
  bool lost() const { return lost_; }

 private:
  static boost::asio::awaitable<void> send_all(std::shared_ptr<Outbox> self);

  boost::asio::any_io_executor executor_;
  wire::LineClock& clock_;
  std::shared_ptr<wire::Port> port_;
  std::deque<Bytes> waiting_;
  bool sending_ = false, lost_ = false;
};

}  // namespace probewright::emulated
