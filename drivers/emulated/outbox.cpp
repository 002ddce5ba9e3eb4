#include "drivers/emulated/outbox.h"

#include <boost/asio/co_spawn.hpp>

#include "drivers/emulated/device.h"

namespace probewright::emulated {

void Outbox::put(Bytes bytes) {
  if (lost_) return;
  waiting_.push_back(std::move(bytes));
  if (sending_) return;
  sending_ = true;
  asio::co_spawn(executor_, send_all(shared_from_this()), end_of_coroutine);
}

asio::awaitable<void> Outbox::send_all(std::shared_ptr<Outbox> self) {
  try {
    while (!self->waiting_.empty()) {
      const Bytes bytes = std::move(self->waiting_.front());
      self->waiting_.pop_front();
      co_await send_or_drop(*self->port_, self->clock_, bytes);
    }
  } catch (const wire::PortLost&) {
    self->lost_ = true;
    self->waiting_.clear();
  }
  self->sending_ = false;
}

}  // namespace probewright::emulated
