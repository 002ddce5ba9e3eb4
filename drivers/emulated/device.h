#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/awaitable.hpp>
#include <compare>
#include <cstdint>
#include <exception>
#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"

namespace probewright::emulated {

namespace asio = boost::asio;

enum class DeviceKind { phantom, adapter };

/// One device of the bench: "nest2-adapter".
struct DeviceId {
  int nest = 1;
  DeviceKind kind = DeviceKind::phantom;
  auto operator<=>(const DeviceId&) const = default;
};
std::string_view to_text(DeviceKind kind);
std::string to_text(const DeviceId& device);
std::optional<DeviceId> parse_device(std::string_view text);

/// What a device calls itself.
struct DeviceIdentity {
  std::string maker, serial, firmware;  ///< firmware with the mark of an emulated device
  std::string certificate, due;
};

/// Something that a device did for the station: how long it was busy with it, the bytes on the line included, in device
/// seconds. The sum over a run's longest path is the device floor.
struct Action {
  DeviceId device;
  std::string what;      ///< the header of the message's first unit, or the name of the request
  double start_s = 0.0;  ///< device seconds since the bench began
  double busy_s = 0.0;
  SteadyTime began{};  ///< the same on the line's clock
};

/// Is told every action when it ends. Must outlive the bench. Line thread only.
class ActionObserver {
 public:
  virtual ~ActionObserver() = default;
  virtual void done(const Action& action) = 0;
};

/// Device time: seconds since the bench began, running `speed` times as fast as the line's clock.
class DeviceClock {
 public:
  explicit DeviceClock(wire::LineClock& clock, double speed)
      : clock_(clock), epoch_(clock.steady_now()), speed_(speed) {}
  double now_s() const { return seconds(clock_.steady_now() - epoch_) * speed_; }
  SteadyTime moment(double time_s) const { return epoch_ + from_seconds(time_s / speed_); }
  asio::awaitable<void> wait_until_s(double time_s) const { return clock_.wait_until(moment(time_s)); }
  double speed() const { return speed_; }
  wire::LineClock& line() const { return clock_; }

 private:
  wire::LineClock& clock_;
  SteadyTime epoch_;
  double speed_;
};

/// Device seconds that `bytes` take on a line of `baud`, ten bits each.
inline double line_seconds(std::size_t bytes, int baud) { return 10.0 * static_cast<double>(bytes) / baud; }

/// Sends `bytes`; a station that does not read for a second loses the rest, as on a line without flow control.
/// Throws PortLost. The bytes must live until the await ends.
asio::awaitable<void> send_or_drop(wire::Port& port, wire::LineClock& clock, std::span<const std::byte> bytes);

/// Handler for spawned device coroutines: an exception that nobody expected ends the io_context's run() with it; a
/// cancelled coroutine is none.
void end_of_coroutine(std::exception_ptr exception);

/// The number that a device chooses anew when it starts: 1 to 2147483647.
std::uint32_t boot_number(std::uint64_t seed, const DeviceId& device, int start);

}  // namespace probewright::emulated
