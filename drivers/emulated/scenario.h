#pragma once
#include <cstdint>
#include <limits>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/emulated/device.h"
#include "station/base/result.h"

namespace probewright::emulated {

/// Which way bytes go on a device's line.
enum class Way { to_device, from_device };

/// What can go wrong with the bench rather than with a probe. What each means stands in SCENARIO.md.
enum class BenchFault {
  // on a line
  byte_lost,
  byte_changed,
  byte_doubled,
  bytes_paused,
  bytes_split,
  noise_bytes,
  // of what a device says
  reply_late,
  reply_missing,
  // of a device
  restart,
  restart_in_capture,
  cable_pulled,
  wrong_certificate,
  // of a nest
  lid_opened,
  band_drift,
  set_point_error,
  gain_error,
  wrong_temperature,
  mains_flicker,
  // of the room
  warm_room,
};
std::span<const BenchFault> all_bench_faults();
/// "byte_lost": the name in a scenario, on the control socket and in tables of trials.
std::string_view slug_of(BenchFault fault);

/// One fault: what, where, when, how much. Times are device seconds; in a scenario they count from the start of the
/// bench, in what hands cause they count from then on.
struct ScenarioFault {
  BenchFault fault = BenchFault::byte_lost;

  std::optional<int> nest;           ///< empty: every nest
  std::optional<DeviceKind> device;  ///< empty: both devices, where the fault is one of a device
  std::optional<Way> way;            ///< faults of a line; empty: both

  double at_s = 0.0;                                         ///< when it happens, or from when on it may
  double per_byte = 0.0;                                     ///< how likely with each byte; 0: once, at `at_s`
  double per_reply = 0.0;                                    ///< how likely with each message
  double per_minute = 0.0;                                   ///< how often a minute of device time, at random moments
  double until_s = std::numeric_limits<double>::infinity();  ///< a rate ends then
  std::optional<double> for_s;                               ///< how long it lasts each time; empty: for good
  double over_s = 0.0;                                       ///< how long it takes to come to its full size
  int count = 1;                                             ///< once: so many bytes or messages, one after the other

  double by_s = 0.0;              ///< how late; how long the pause; how long after the capture began
  int bytes = 8;                  ///< of noise
  double red = 0.0;               ///< relative change of the red band
  double infrared = 0.0;          ///< relative change of the infrared band
  double gain = 0.0;              ///< relative error of the amplifier
  double shown_K = 0.0;           ///< error of the thermometer
  double room_degC = 25.0;        ///< of a warm room
  double level = 0.0;             ///< of room light in the nest, the phantom's lamp at full level being 1
  double depth = 0.3;             ///< of its flicker
  std::vector<double> harmonics;  ///< of its flicker, relative to the fundamental
  std::string certificate;        ///< number that the device then tells; empty: one of the year before
};

/// A day at the bench, written down: what goes wrong, where and when.
struct Scenario {
  std::string name;
  std::optional<std::uint64_t> seed;  ///< of its own; empty: the bench's
  std::vector<ScenarioFault> faults;
};

/// Reads a scenario file (SCENARIO.md) strictly; all faults of the text at once. Beyond the YAML:
/// scenario_unknown_fault, scenario_device, scenario_bound, scenario_when, number and unit problems.
ResultOrFaults<Scenario> read_scenario(std::string_view text, std::string_view file);

/// Reads one fault as it stands in a scenario's list: "reply_late: {device: nest1-phantom, by: 800 ms}". Errors: as
/// above.
ResultOrFaults<ScenarioFault> read_scenario_fault(std::string_view text);

/// The same from a file. Errors: file_unreadable, file_too_large as well.
ResultOrFaults<Scenario> read_scenario_file(const std::string& path);

/// Every name, separated by ", ".
std::string known_bench_faults();

}  // namespace probewright::emulated
