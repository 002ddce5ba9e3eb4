#pragma once
#include <cstdint>
#include <vector>

namespace probewright::adapter {

enum class Led : std::uint8_t { red = 1, infrared = 2 };

/// What is never exceeded, whatever asks for it: the model's maximum.
struct DriveCeiling {
  std::uint32_t red_uA = 0, infrared_uA = 0;
};

struct Drive {
  std::uint32_t red_uA = 0, infrared_uA = 0;  ///< 0: off
  bool operator==(const Drive&) const = default;
};

struct ForwardVoltage {
  std::uint32_t drive_uA = 0;      ///< as asked for; 0: as driven
  std::uint32_t delivered_nA = 0;  ///< mean current in the slot
  std::int32_t voltage_uV = 0;     ///< mean over 20 ms
  std::int32_t first_uV = 0;       ///< 5 ms after the drive was last changed; only when asked for as driven
  bool at_compliance = false;      ///< the source could not drive that current
  bool no_drive = false;           ///< asked for as driven, and not driven
};

struct ReverseLeakage {
  std::uint32_t leakage_pA = 0;
  bool not_separate = false;  ///< the wiring (antiparallel) allows no separate measurement
};

enum class Input : std::uint8_t { open = 0, connected = 1 };

struct DarkCurrent {
  std::int32_t current_pA = 0;  ///< mean
  std::uint32_t sd_pA = 0;      ///< standard deviation of that mean
};

struct IdResistance {
  bool open = false;  ///< over 4 Mohm
  std::uint32_t resistance_milliohm = 0;
};

struct Presence {
  bool present = false;          ///< a probe is plugged in
  std::uint32_t insertions = 0;  ///< since power-on
  bool operator==(const Presence&) const = default;
};

enum class Proof : std::uint8_t { reference_resistor = 1, current_source = 2, dummy_load = 3 };

struct SelfProof {
  std::int32_t value = 0;  ///< milliohm, nA or uV, in the order of Proof
  std::uint8_t flags = 0;
};

struct State {
  std::uint32_t boot = 0, uptime_ms = 0;
  std::uint16_t watchdog_trips = 0;
  Drive drive;
  std::uint16_t capture = 0;  ///< number of the one that runs, or 0
  std::int32_t temperature_mdegC = 0;
};

/// Converter codes (24 bit, signed) of the four slots of one cycle, at 1/8, 3/8, 5/8 and 7/8 of it.
struct Cycle {
  std::int32_t red = 0, dark_after_red = 0, infrared = 0, dark_after_infrared = 0;
  bool operator==(const Cycle&) const = default;
};

/// A whole capture; nothing in it is interpolated.
struct Capture {
  std::vector<Cycle> cycles;
  std::uint32_t slot_ns = 0;  ///< a cycle is four slots
  Drive drive;                ///< in force at its end
  int asked_again = 0;        ///< captures thrown away before this one
};

}  // namespace probewright::adapter
