#pragma once
#include <array>
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/base/digest.h"

namespace probewright::phantom {

constexpr std::size_t pixels = 1024;

enum class Shutter { open, closed };

struct SpectrometerSetting {
  std::uint32_t exposure_us = 20000;  ///< of one frame, 1000 to 2000000
  int frames = 1;                     ///< averaged, 1 to 64
  Shutter shutter = Shutter::open;    ///< the spectrometer's own
  bool operator==(const SpectrometerSetting&) const = default;
};

/// One reading of the spectrometer, as the device sent it.
struct Spectrum {
  std::uint32_t number = 0;  ///< since power-on
  SpectrometerSetting setting;
  bool any_pixel_full = false;  ///< in any frame
  double temperature_degC = 0.0;
  std::array<std::uint16_t, pixels> counts{};  ///< mean over the frames, offset included
  bool operator==(const Spectrum&) const = default;
};

/// What the modulator does.
struct Modulation {
  int set_point = 0;                             ///< number of a stored pair of depths; 0: the depths below
  double rate_Hz = 5.0;                          ///< 0.5 to 10
  double red_depth = 0.0, infrared_depth = 0.0;  ///< amplitude over mean, 0 to 0.1; only with set point 0
};

/// A stored pair of depths.
struct SetPoint {
  int number = 0;
  double ratio = 0.0;  ///< nominal
  double red_depth = 0.0, infrared_depth = 0.0;
  bool operator==(const SetPoint&) const = default;
};

struct Presence {
  bool present = false;          ///< a probe sits in the nest
  std::uint32_t insertions = 0;  ///< since power-on
  bool operator==(const Presence&) const = default;
};

struct NestState {
  Presence probe;
  bool lid_closed = false;
};

}  // namespace probewright::phantom
