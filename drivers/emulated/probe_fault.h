#pragma once
#include <cstdint>
#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace probewright::emulated {

struct Probe;

/// What can be wrong with a probe. Where a fault sits in one LED there is one for each: "red" and "infrared" mean the
/// LED that is driven as such.
enum class ProbeFault {
  red_led_open,
  infrared_led_open,
  red_led_short,
  infrared_led_short,
  leds_swapped,
  leds_reversed,
  red_led_wrong_bin,
  infrared_led_wrong_bin,
  secondary_emission,
  red_die_attach,
  infrared_die_attach,
  red_led_weak,
  infrared_led_weak,
  detector_open,
  detector_short,
  detector_reversed,
  detector_leaky,
  shield_open,
  housing_light_leak,
  direct_light_shunt,
  slot_crosstalk,
  id_wrong,
  id_missing,
  id_other_bin,
  cable_intermittent,
  red_series_resistance,
  infrared_series_resistance,
};

/// A fault in a probe. `severity` is above 0 and at most 1; what 1 means stands in README.md. A hard fault is there or
/// not: any severity counts as 1.
struct PlantedFault {
  ProbeFault fault = ProbeFault::red_led_open;
  double severity = 1.0;
  bool operator==(const PlantedFault&) const = default;
};

std::span<const ProbeFault> all_faults();
/// "red_led_open": the name in the truth file and on the control socket.
std::string_view slug_of(ProbeFault fault);
std::optional<ProbeFault> parse_fault(std::string_view slug);
/// "led_open": the same for both LEDs. Faults of one cause stand together in all_faults().
std::string_view cause_of(ProbeFault fault);
bool is_hard(ProbeFault fault);
/// Every slug, separated by ", ".
std::string known_faults();

/// The probe with a fault more. What a fault leaves to chance is drawn from (seed, serial, fault) alone. A severity of
/// 0 leaves the probe as it is; below 0, above 1 or not a number is our own mistake: std::invalid_argument.
Probe with_fault(Probe probe, PlantedFault planted, std::uint64_t seed);

}  // namespace probewright::emulated
