#pragma once
#include <boost/asio/awaitable.hpp>
#include <cstddef>
#include <span>
#include <stdexcept>
#include <string>

#include "station/base/times.h"

namespace probewright::wire {

namespace asio = boost::asio;

/// The deadline of an exchange passed. What had come in by then stays in the port for the next read.
class DeadlinePassed : public std::runtime_error {
 public:
  explicit DeadlinePassed(const std::string& port) : std::runtime_error(port + ": deadline passed"), port_(port) {}
  const std::string& port() const { return port_; }

 private:
  std::string port_;
};

/// The port is gone: unplugged, closed by the other side, an I/O error. It must be opened anew.
class PortLost : public std::runtime_error {
 public:
  PortLost(const std::string& port, const std::string& why)
      : std::runtime_error(port + ": " + why), port_(port), why_(why) {}
  const std::string& port() const { return port_; }
  const std::string& why() const { return why_; }

 private:
  std::string port_, why_;
};

/// Bytes to and from one device. A driver owns its port. Line thread only.
class Port {
 public:
  virtual ~Port() = default;
  /// Waits until `deadline` for at least one byte; returns how many now stand at the front of `into`.
  /// Throws DeadlinePassed or PortLost. Bytes that come too late wait for the next call.
  virtual asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) = 0;
  /// Sends all of `bytes`, which must live until the await ends. Throws as above.
  virtual asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) = 0;
  /// Name for messages, e.g. the device path.
  virtual const std::string& name() const = 0;
  /// Ends every read and write that waits (they throw PortLost); the port is unusable afterwards.
  virtual void close() = 0;
};

}  // namespace probewright::wire
