#pragma once
#include <boost/asio/awaitable.hpp>
#include <functional>
#include <optional>
#include <string_view>

#include "drivers/adapter/values.h"
#include "drivers/wire/frame.h"
#include "drivers/wire/identity.h"
#include "drivers/wire/le.h"
#include "drivers/wire/link.h"
#include "station/base/entropy.h"

namespace probewright::adapter {

namespace asio = boost::asio;

struct Settings {
  wire::LinkSettings link;         ///< link.device names the adapter in messages: "adapter of nest 1"
  wire::Expected expected;         ///< from the station file and the certificate
  DriveCeiling ceiling;            ///< the model's maximum; 0: that LED is never driven
  std::uint32_t slot_ns = 439000;  ///< set on connecting
};

/// Drives one probe adapter as WIRE.md says. Line thread only.
///
/// Every function waits its turn, sends under a new sequence number, and returns what the device answered. They throw
///   wire::DeviceLost (a ProblemError, device_lost)   port gone, or no right answer after all tries; not connected
///   wire::DeviceReset (a DeviceLost, device_reset)   the device forgot its settings: the run is void
///   ProblemError device_refused, device_fault        the device's error reply, in words; not tried again
///   system_error(operation_aborted)                  the awaiting coroutine was cancelled
class Driver {
 public:
  /// `clock` and `entropy` (for the first sequence and capture numbers) must outlive the driver.
  Driver(Settings settings, wire::PortSource source, wire::LineClock& clock, Entropy& entropy);

  /// Opens the line, stops a running capture, switches the drive off, refuses a stranger (problems of wire::stranger,
  /// and device_wrong_protocol), and sets the slot timing. Nothing to do when connected.
  asio::awaitable<void> connect();
  bool connected() const { return link_.ready(); }
  /// Spawn once per driver: finds the device again whenever it is lost. Never returns; ends by cancellation.
  asio::awaitable<void> keep_connected();
  /// Why the device is not there, in words; nothing while it is.
  const std::optional<Problem>& trouble() const { return link_.trouble(); }
  const wire::LineCounts& counts() const { return link_.counts(); }
  /// Of the device last connected.
  const wire::Identity& identity() const { return identity_; }
  std::uint32_t slot_ns() const { return slot_ns_; }

  /// The ceiling for the model of the next run. Does not touch the drive in force: switch it off before.
  void set_ceiling(DriveCeiling ceiling) { settings_.ceiling = ceiling; }
  /// Sets both LEDs. Throws ProblemError drive_above_ceiling before any byte is sent.
  asio::awaitable<void> drive(Drive drive);
  /// Switches both LEDs off, however the run ended: tried twice as often as other requests. True when the device
  /// confirmed it; false when it is lost (its watchdog then does it). Throws only operation_aborted: a coroutine that
  /// was cancelled must reset its cancellation state before it awaits this.
  asio::awaitable<bool> drive_off();
  /// Waits `physical` time (over the speed) while it keeps the device's watchdog fed, and makes sure at the end that
  /// the drive is still as set. Throws ProblemError drive_lost when it is not.
  asio::awaitable<void> dwell_driven(Duration physical);
  /// Makes sure that the drive is still as set, now. Throws ProblemError drive_lost, wire::DeviceReset.
  asio::awaitable<void> require_drive();

  asio::awaitable<void> set_timing(std::uint32_t slot_ns);
  /// Voltage of an LED as it is driven now. t = 20 ms.
  asio::awaitable<ForwardVoltage> forward_voltage(Led led);
  /// Voltage at another drive, applied for the 20 ms. Throws drive_above_ceiling as drive() does.
  asio::awaitable<ForwardVoltage> forward_voltage_at(Led led, std::uint32_t drive_uA);
  asio::awaitable<ReverseLeakage> reverse_leakage(Led led, std::uint16_t reverse_mV);
  asio::awaitable<DarkCurrent> dark_current(std::uint16_t bias_mV, std::uint16_t time_ms, Input input);
  asio::awaitable<IdResistance> id_resistance();
  /// Root mean square at 50 and 60 Hz together, in pA.
  asio::awaitable<std::uint32_t> mains_pickup_pA(std::uint16_t time_ms);
  asio::awaitable<Presence> presence();
  asio::awaitable<SelfProof> self_proof(Proof what);
  /// Also compares the boot number. Feeds the watchdog, as every request does.
  asio::awaitable<State> state();

  /// Takes `cycles` cycles: 32 to 65536, a multiple of 32 (else ProblemError capture_length, before any byte is sent).
  /// A capture with a missing or damaged block is stopped and asked for anew, a bounded number of times. Afterwards
  /// the device must be the same and the drive as set, else DeviceReset or ProblemError drive_lost.
  asio::awaitable<Capture> capture(std::uint32_t cycles);

 private:
  struct Request {
    std::uint8_t type = 0;
    Bytes payload{};
    Duration busy{0};        ///< device time before the reply
    std::size_t reply = 32;  ///< bytes to expect, for the time that they take
  };
  /// Reads a reply's payload to its end; throws wire::Miss when it is not what was asked.
  template <class T>
  using Read = std::function<T(wire::LeReader&)>;

  template <class T>
  asio::awaitable<T> ask(Request request, Read<T> read);
  template <class T>
  asio::awaitable<T> ask_in_turn(Request request, Read<T> read);
  template <class T>
  asio::awaitable<T> ask_once(const Request& request, const Read<T>& read);
  asio::awaitable<Bytes> reply_to(const Request& request);
  asio::awaitable<wire::Frame> next_frame(SteadyTime deadline);
  asio::awaitable<void> set_in_turn(std::uint8_t type, Bytes payload);
  Problem refused(std::uint8_t type, std::uint8_t code, std::uint32_t detail) const;

  asio::awaitable<void> connect_in_turn();
  asio::awaitable<void> introduce();
  asio::awaitable<void> stop_capture_once(Duration busy);
  asio::awaitable<State> state_once();
  asio::awaitable<void> make_sure();
  asio::awaitable<void> check_drive_in_turn();
  asio::awaitable<Capture> capture_once(std::uint32_t cycles);
  asio::awaitable<void> start_capture(std::uint32_t cycles);
  asio::awaitable<wire::Frame> next_of_capture(SteadyTime deadline);
  asio::awaitable<ForwardVoltage> ask_forward_voltage(Led led, std::uint32_t drive_uA);
  void require_below_ceiling(Drive drive) const;

  Settings settings_;
  wire::Link link_;
  wire::FrameReader frames_;
  wire::Identity identity_;
  std::uint16_t sequence_;
  std::uint16_t capture_number_;
  std::uint32_t slot_ns_ = 0;
  Drive drive_;
  // An exchange that has not ended well: look at the boot number before the next, and stop what may still run.
  bool unsure_ = false;
  Duration unsure_busy_{0};  ///< device time of the work that may still be going on
  bool capture_may_run_ = false;
};

}  // namespace probewright::adapter
