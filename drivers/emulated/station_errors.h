#pragma once
#include <array>
#include <cstdint>

#include "drivers/emulated/modulator.h"

namespace probewright::emulated {

/// How the devices of one nest differ from their certificates. All zero: the certificates are exactly true.
struct StationErrors {
  double wavelength_offset_nm = 0.0;   ///< true minus certificate, at 800 nm
  double wavelength_stretch = 0.0;     ///< relative, about 800 nm
  double response_slope_per_nm = 0.0;  ///< of the relative response, about 800 nm
  double thermometer_K = 0.0;          ///< shown minus true
  std::array<Depths, 3> set_points{};  ///< relative error of each stored depth
  double red_transmission = 0.0;       ///< relative, of the phantom
  double infrared_transmission = 0.0;
  double source_gain = 0.0;  ///< relative: current that flows against the current that was set
  double sense_gain = 0.0;   ///< relative: current that is reported against the current that flows
  double voltage_offset_V = 0.0;
  double converter_gain = 0.0;   ///< relative, photocurrent to codes
  double resistance_gain = 0.0;  ///< relative, ID resistor
};

/// The errors of nest `nest`, drawn from the seed within what a calibration leaves open.
StationErrors draw_station_errors(std::uint64_t seed, int nest);

}  // namespace probewright::emulated
