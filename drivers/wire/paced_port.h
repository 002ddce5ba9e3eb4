#pragma once
#include "drivers/wire/forwarding_port.h"
#include "drivers/wire/line_clock.h"

namespace probewright::wire {

/// Sends no faster than a serial line would: write_all ends when the last byte would have left. For emulated devices
/// on a pseudo-terminal, which has no baud rate of its own. Reads are passed on as they are. The clock must outlive it.
class PacedPort final : public ForwardingPort {
 public:
  /// `bytes_per_s`: baud / 10 for 8N1, times the bench's speed; above 0.
  PacedPort(std::unique_ptr<Port> port, LineClock& clock, double bytes_per_s);
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override;

 private:
  LineClock& clock_;
  double bytes_per_s_;
  std::size_t piece_;
  SteadyTime free_at_{Duration::min()};  // when what was sent so far has left
};

}  // namespace probewright::wire
