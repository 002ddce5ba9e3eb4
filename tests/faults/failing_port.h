#pragma once
#include <memory>

#include "drivers/wire/forwarding_port.h"
#include "station/sequence/line_services.h"

namespace probewright::faults {

/// Fails at one read or write, or from then on, over all ports of a line; counts how many there were.
struct PortFailure {
  enum class How {
    lost,  ///< the port is gone
    late   ///< the deadline passes at once
  };
  std::int64_t at = 0;  ///< counted from 1; 0: never
  bool from_then_on = false;
  How how = How::lost;
  std::int64_t calls = 0;

  bool strikes() {
    ++calls;
    return at > 0 && (from_then_on ? calls >= at : calls == at);
  }
  void strike(const std::string& name) const {
    if (how == How::lost) throw wire::PortLost(name, "it failed as planned");
    throw wire::DeadlinePassed(name);
  }
};

class FailingPort final : public wire::ForwardingPort {
 public:
  FailingPort(std::unique_ptr<wire::Port> port, std::shared_ptr<PortFailure> failure)
      : ForwardingPort(std::move(port)), failure_(std::move(failure)) {}
  wire::asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override {
    if (failure_->strikes()) failure_->strike(name());
    return inner().read_some(into, deadline);
  }
  wire::asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    if (failure_->strikes()) failure_->strike(name());
    return inner().write_all(bytes, deadline);
  }

 private:
  std::shared_ptr<PortFailure> failure_;
};

/// Puts it between a line and its ports.
inline sequence::PortOpener failing_ports(sequence::PortOpener ports, std::shared_ptr<PortFailure> failure) {
  return [ports = std::move(ports), failure](const sequence::DevicePlace& place, int nest, sequence::DeviceKind kind) {
    const wire::PortSource source = ports(place, nest, kind);
    // Captures go by value into a coroutine of its own: the source may be gone when it resumes.
    const auto open = [](wire::PortSource inner,
                         std::shared_ptr<PortFailure> of) -> wire::asio::awaitable<std::unique_ptr<wire::Port>> {
      if (of->strikes()) throw wire::PortLost("a port", "it does not open, as planned");
      auto port = co_await inner();
      co_return std::make_unique<FailingPort>(std::move(port), std::move(of));
    };
    return [open, source, failure] { return open(source, failure); };
  };
}

}  // namespace probewright::faults
