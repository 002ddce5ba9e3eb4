#pragma once
#include <memory>
#include <utility>

#include "drivers/wire/port.h"

namespace probewright::wire {

/// Which way bytes go, seen from the end that holds the port: a driver's port writes `out` and reads `in`.
enum class Direction { out, in };

/// Passes everything on to the port that it owns. Base of ports that watch or change the traffic. It must outlive its
/// reads and writes (its coroutines run in it): close() ends them.
class ForwardingPort : public Port {
 public:
  explicit ForwardingPort(std::unique_ptr<Port> inner) : inner_(std::move(inner)) {}
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override {
    return inner_->read_some(into, deadline);
  }
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    return inner_->write_all(bytes, deadline);
  }
  const std::string& name() const override { return inner_->name(); }
  void close() override { inner_->close(); }

 protected:
  Port& inner() { return *inner_; }

 private:
  std::unique_ptr<Port> inner_;
};

}  // namespace probewright::wire
