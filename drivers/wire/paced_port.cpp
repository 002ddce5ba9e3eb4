#include "drivers/wire/paced_port.h"

#include <algorithm>
#include <stdexcept>

namespace probewright::wire {
namespace {

/// About 2 ms' worth, so that neither timers nor receivers are bothered for single bytes.
std::size_t piece_for(double bytes_per_s) {
  return std::max<std::size_t>(16, static_cast<std::size_t>(bytes_per_s * 0.002));
}

}  // namespace

PacedPort::PacedPort(std::unique_ptr<Port> port, LineClock& clock, double bytes_per_s)
    : ForwardingPort(std::move(port)), clock_(clock), bytes_per_s_(bytes_per_s), piece_(piece_for(bytes_per_s)) {
  if (!(bytes_per_s > 0.0)) throw std::invalid_argument("a paced port needs a rate above 0");
}

asio::awaitable<void> PacedPort::write_all(std::span<const std::byte> bytes, SteadyTime deadline) {
  // Moments are counted on from each other, not from the clock, so that late timers do not slow the line down.
  free_at_ = std::max(free_at_, clock_.steady_now());
  while (!bytes.empty()) {
    const auto part = bytes.first(std::min(bytes.size(), piece_));
    free_at_ = free_at_ + from_seconds(static_cast<double>(part.size()) / bytes_per_s_);
    if (free_at_ > deadline) {
      co_await clock_.wait_until(deadline);
      throw DeadlinePassed(name());
    }
    co_await clock_.wait_until(free_at_);
    co_await inner().write_all(part, deadline);
    bytes = bytes.subspan(part.size());
  }
}

}  // namespace probewright::wire
