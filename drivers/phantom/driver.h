#pragma once
#include <boost/asio/awaitable.hpp>
#include <functional>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/phantom/values.h"
#include "drivers/wire/identity.h"
#include "drivers/wire/line_reader.h"
#include "drivers/wire/link.h"
#include "station/base/entropy.h"

namespace probewright::phantom {

namespace asio = boost::asio;

struct Settings {
  wire::LinkSettings link;            ///< link.device names the phantom in messages: "phantom of nest 1"
  wire::Expected expected;            ///< from the station file and the certificate
  std::vector<double> wavelength_nm;  ///< the certificate's polynomial, 1 to 4 coefficients
};

/// Drives one optical phantom as WIRE.md says. Line thread only.
///
/// Every function waits its turn, sends, and returns what the device answered; settings count only when read back.
/// They throw
///   wire::DeviceLost (a ProblemError, device_lost)   port gone, or no right answer after all tries; not connected
///   wire::DeviceReset (a DeviceLost, device_reset)   the device forgot its settings: the run is void
///   ProblemError device_refused, device_fault        the device said no (its number and words), not tried again
///   system_error(operation_aborted)                  the awaiting coroutine was cancelled; the next request fences
class Driver {
 public:
  /// `clock` and `entropy` (for nonces) must outlive the driver.
  Driver(Settings settings, wire::PortSource source, wire::LineClock& clock, Entropy& entropy);

  /// Opens the line, switches checksums on, fences, and refuses a stranger (problems of wire::stranger, and
  /// device_wrong_wavelengths). Leaves the device in its reset settings. Nothing to do when connected.
  asio::awaitable<void> connect();
  bool connected() const { return link_.ready(); }
  /// Spawn once per driver: finds the device again whenever it is lost. Never returns; ends by cancellation.
  asio::awaitable<void> keep_connected();
  /// Why the device is not there, in words; nothing while it is.
  const std::optional<Problem>& trouble() const { return link_.trouble(); }
  const wire::LineCounts& counts() const { return link_.counts(); }
  /// Of the device last connected.
  const wire::Identity& identity() const { return identity_; }

  /// All settings back to their reset values (modulator, lamps and blade off), settled.
  asio::awaitable<void> reset();
  /// 0 good, else the number of what failed.
  asio::awaitable<int> self_test();

  /// Sets exposure, frames and shutter, where they are not so already.
  asio::awaitable<void> set_spectrometer(SpectrometerSetting setting);
  /// The same, then takes a spectrum. Device time: exposure x frames + 2 ms.
  asio::awaitable<Spectrum> spectrum(SpectrometerSetting setting);

  /// Starts the modulator.
  asio::awaitable<void> modulate(Modulation modulation);
  /// Stops it: it stands still at the mean transmission.
  asio::awaitable<void> stop_modulator();
  asio::awaitable<bool> settled();
  /// Until the optics have settled (150 ms after the last change).
  asio::awaitable<void> wait_settled();
  asio::awaitable<std::vector<SetPoint>> set_points();

  /// Puts the blade in (true) or out of the light's path to the detector.
  asio::awaitable<void> set_opaque(bool opaque);
  /// Lamp on at `level` (0 to 1 of full), flickering at 0, 100 or 120 Hz.
  asio::awaitable<void> lamp_on(double level, int flicker_Hz);
  asio::awaitable<void> lamp_off();
  asio::awaitable<void> set_line_lamp(bool on);
  asio::awaitable<std::vector<double>> line_lamp_nm();

  asio::awaitable<double> temperature_degC();
  asio::awaitable<bool> lid_closed();
  asio::awaitable<Presence> presence();
  /// Presence and lid in one message, for the idle nest.
  asio::awaitable<NestState> nest_state();

 private:
  /// One message and what is known of its answer.
  struct Request {
    std::string message;
    Duration busy{0};         ///< device time before the answer
    std::size_t answer = 64;  ///< bytes to expect, for the time that they take
    bool block = false;       ///< the answer is a block
  };
  template <class T>
  using Read = std::function<T(std::string_view)>;

  template <class T>
  asio::awaitable<T> ask(Request request, Read<T> read);
  template <class T>
  asio::awaitable<T> ask_in_turn(Request request, Read<T> read);
  template <class T>
  asio::awaitable<T> ask_once(const Request& request, const Read<T>& read);
  asio::awaitable<void> change(std::string message, std::vector<std::string> want, Duration busy = Duration{0});
  asio::awaitable<void> change_in_turn(std::string message, std::vector<std::string> want, Duration busy);
  asio::awaitable<void> set_spectrometer_in_turn(SpectrometerSetting setting);
  asio::awaitable<std::string> answer_to(const Request& request);
  asio::awaitable<std::string> next_line(wire::LineReader& reader, SteadyTime deadline);

  asio::awaitable<void> connect_in_turn();
  asio::awaitable<void> switch_checksums_on();
  asio::awaitable<void> introduce();
  asio::awaitable<void> make_sure(const std::string& message);
  asio::awaitable<void> fence();
  asio::awaitable<void> empty_error_queue(const std::string& message);
  Problem refused(const std::string& message, int number, const std::string& words) const;
  std::string nonce();

  Settings settings_;
  wire::Link link_;
  Entropy& entropy_;
  wire::Identity identity_;
  std::optional<SpectrometerSetting> spectrometer_;  ///< as last read back
  std::optional<std::uint32_t> last_spectrum_;
  // An exchange that has not ended well: fence before the next.
  bool unsure_ = true;
  std::string unsure_message_;
  Duration unsure_busy_{0};  ///< device time of the work that may still be going on
};

}  // namespace probewright::phantom
