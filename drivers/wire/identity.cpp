#include "drivers/wire/identity.h"

#include <cmath>

#include "station/base/numbers.h"

namespace probewright::wire {
namespace {

constexpr std::string_view mark = "-emulated-x";

/// Speeds are told with a resolution of a thousandth by one of the devices.
bool same_speed(double a, double b) { return std::abs(a - b) < 0.001; }

}  // namespace

bool read_firmware(std::string_view text, Identity& identity) {
  const auto at = text.find(mark);
  identity.firmware = text.substr(0, at);
  identity.emulated = at != std::string_view::npos;
  identity.speed = 1.0;
  if (!identity.emulated) return true;
  const auto speed = parse_double(text.substr(at + mark.size()));
  if (!speed || !(*speed > 0.0)) return false;
  identity.speed = *speed;
  return true;
}

std::optional<Problem> stranger(const Identity& found, const Expected& expected, std::string_view model, double speed,
                                const std::string& device) {
  const auto differs = [&](std::string_view id, std::string_view what, const std::string& is, const std::string& want) {
    return Problem{id, device, {{"what", std::string{what}}, {"found", is}, {"expected", want}}};
  };
  if (found.model != model) return differs("device_stranger", "model", found.model, std::string{model});
  if (found.serial != expected.serial) return differs("device_stranger", "serial", found.serial, expected.serial);
  if (!expected.firmware.empty() && found.firmware != expected.firmware)
    return differs("device_wrong_firmware", "firmware", found.firmware, expected.firmware);
  if (found.certificate != expected.certificate)
    return differs("device_wrong_certificate", "certificate number", found.certificate, expected.certificate);
  if (found.due != expected.due)
    return differs("device_wrong_certificate", "last day of the certificate", found.due, expected.due);
  if (expected.emulated && !found.emulated) return Problem{"device_not_emulated", device};
  if (!expected.emulated && found.emulated) return Problem{"device_is_emulated", device};
  if (!same_speed(found.speed, speed))
    return differs("device_speed_mismatch", "speed", shortest(found.speed), shortest(speed));
  return std::nullopt;
}

}  // namespace probewright::wire
