#pragma once
#include <boost/asio/io_context.hpp>
#include <map>
#include <memory>
#include <optional>
#include <string>

#include "drivers/wire/link.h"
#include "drivers/wire/recording.h"
#include "drivers/wire/virtual_clock.h"

namespace probewright::wire {

/// Plays recorded lines back into drivers: what the devices said comes at its recorded moment, and what the drivers
/// send is held against what they sent then. For a line on `clock`, whose time begins at 0. Line thread only.
class ReplayLine {
 public:
  /// io and clock must outlive it.
  ReplayLine(asio::io_context& io, VirtualClock& clock, std::vector<LineRecording> lines);
  ~ReplayLine();
  ReplayLine(const ReplayLine&) = delete;
  ReplayLine& operator=(const ReplayLine&) = delete;

  /// The port of a device of the recording; one that it has not cannot be opened (port_missing).
  PortSource source(const std::string& device);
  /// Where the line first did something else than in the recording: problem replay_differs, with device, moment, why.
  const std::optional<Problem>& difference() const { return difference_; }

 private:
  struct Device;
  struct Connection;
  static asio::awaitable<std::unique_ptr<Port>> open(ReplayLine* self, std::string device);
  static asio::awaitable<void> say(std::shared_ptr<Connection> connection);
  static asio::awaitable<void> hear(std::shared_ptr<Connection> connection);
  void differs(const std::string& device, Duration at, const std::string& why);
  void compare(Device& device, std::span<const std::byte> bytes);

  asio::io_context& io_;
  VirtualClock& clock_;
  std::map<std::string, std::shared_ptr<Device>> devices_;
  std::optional<Problem> difference_;
  std::shared_ptr<ReplayLine*> self_;
};

}  // namespace probewright::wire
