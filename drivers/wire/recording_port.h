#pragma once
#include "drivers/wire/forwarding_port.h"
#include "station/base/clock.h"

namespace probewright::wire {

/// Takes what went over a port. Line thread only; must not throw.
class TrafficSink {
 public:
  virtual ~TrafficSink() = default;
  /// `bytes` live for the call only. Written bytes are told before they are sent, read ones when they were read.
  virtual void bytes(Direction direction, SteadyTime at, std::span<const std::byte> bytes) = 0;
  /// The port is gone, as a read or write was told.
  virtual void lost(SteadyTime at, const std::string& why) {
    static_cast<void>(at);
    static_cast<void>(why);
  }
};

/// Tells a sink every byte both ways, with the time. Clock and sink must outlive it.
class RecordingPort final : public ForwardingPort {
 public:
  RecordingPort(std::unique_ptr<Port> port, const Clock& clock, TrafficSink& sink)
      : ForwardingPort(std::move(port)), clock_(clock), sink_(sink) {}
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override;

 private:
  const Clock& clock_;
  TrafficSink& sink_;
};

}  // namespace probewright::wire
