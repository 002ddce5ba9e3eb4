#pragma once
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>

#include "station/base/problem.h"

namespace probewright::wire {

/// A device as it names itself, and what the station expects of it.
struct Identity {
  std::string maker, model, serial;
  std::string firmware;  ///< without the mark of an emulated device
  std::string certificate, due;
  bool emulated = false;
  double speed = 1.0;  ///< 1 on a real device
  std::uint32_t boot = 0;
  bool operator==(const Identity&) const = default;
};

struct Expected {
  std::string serial;       ///< "PH-01"
  std::string certificate;  ///< "PHC-2026-0101"
  std::string due;          ///< "2027-06-30"
  std::string firmware;     ///< "1.0.0"; empty: any
  bool emulated = false;    ///< whether the line is meant to run on an emulated bench
};

/// Splits "1.0.0-emulated-x20" into firmware, emulated and speed; a firmware without the mark is a real device's.
/// Fields of `identity` are set; false when the mark is there but its speed is no number above 0.
bool read_firmware(std::string_view text, Identity& identity);

/// Refuses a device that is not the one of the documents, in words. `model` is what the device must call itself,
/// `speed` that of the line's clock. Problems: device_stranger, device_wrong_certificate, device_wrong_firmware,
/// device_not_emulated, device_is_emulated, device_speed_mismatch.
std::optional<Problem> stranger(const Identity& found, const Expected& expected, std::string_view model, double speed,
                                const std::string& device);

}  // namespace probewright::wire
