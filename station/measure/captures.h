#pragma once
#include <array>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "station/measure/bands.h"

// Raw data as the devices sent it, one struct per kind; CAPTURES.md gives the byte format that the ledger keeps.
// No certificate has been applied to any of it. Optional fields are empty where they were not asked for.
namespace probewright::measure {

/// Forward voltage of one LED at one current.
struct ForwardVoltage {
  double set_mA = 0.0;
  double delivered_mA = 0.0;
  double voltage_V = 0.0;
  bool at_compliance = false;  ///< the source could not drive that current: the LED is open
  bool operator==(const ForwardVoltage&) const = default;
};

/// What the adapter tells of one LED.
struct LedElectrical {
  std::optional<ForwardVoltage> at_drive;    ///< in the standard drive, warm
  std::optional<ForwardVoltage> at_quarter;  ///< at a quarter of it
  std::optional<double> first_voltage_V;     ///< 5 ms after the drive was set
  std::optional<double> warm_voltage_V;      ///< at the end of the warm-up
  std::optional<double> reverse_leakage_uA;
  bool operator==(const LedElectrical&) const = default;
};

/// Replies of the adapter and the phantom about the probe's electrical state. A run may take them in several captures:
/// see add_capture.
struct ElectricalCapture {
  std::optional<bool> present_phantom;  ///< a probe sits in the nest
  std::optional<bool> present_adapter;  ///< a probe is plugged in
  std::optional<double> id_resistance_ohm;
  bool id_open = false;  ///< asked, and nothing (or more than the adapter can tell) was found
  PerBand<LedElectrical> led;
  std::optional<double> mains_pickup_nA;
  double temperature_C = 0.0;  ///< phantom's thermometer, uncorrected
  bool operator==(const ElectricalCapture&) const = default;
};

/// Dark current: each value is a mean over `averaged_s`.
struct DarkCapture {
  double connected_nA = 0.0;
  double open_nA = 0.0;          ///< input open: the adapter's own offset
  double connected_sd_nA = 0.0;  ///< standard deviation of the mean, as the adapter tells it
  double open_sd_nA = 0.0;
  double bias_V = 0.0;
  double averaged_s = 0.0;
  double temperature_C = 0.0;
  bool operator==(const DarkCapture&) const = default;
};

constexpr std::size_t spectrometer_pixels = 1024;

/// One LED's spectrum and the dark frame of the same exposure.
struct SpectrumCapture {
  Band band = Band::red;
  std::array<std::uint16_t, spectrometer_pixels> light{};  ///< counts, mean over the frames
  std::array<std::uint16_t, spectrometer_pixels> dark{};   ///< the same with the spectrometer's shutter closed
  bool pixel_was_full = false;                             ///< the phantom saw a full pixel in any light or dark frame
  double exposure_s = 0.0;
  int frames = 1;
  double drive_mA = 0.0;
  double temperature_C = 0.0;
  bool operator==(const SpectrumCapture&) const = default;
};

/// The red LED lit alone: its secondary emission, and whether it is the red one at all.
struct RedAloneCapture {
  SpectrumCapture spectrum;  ///< band red; drive_mA is the red LED's, the infrared one is off
  bool operator==(const RedAloneCapture&) const = default;
};

/// A train of slot samples at one set point. All four trains have the same length.
struct PulseCapture {
  double set_point_ratio = 0.0;  ///< nominal R
  double modulator_Hz = 0.0;
  double cycle_s = 0.0;
  std::uint32_t first_cycle = 0;                            ///< number of the first cycle kept
  std::vector<std::int32_t> red, dark_a, infrared, dark_b;  ///< converter codes, 24 bit signed
  PerBand<double> drive_mA;
  double temperature_C = 0.0;
  bool operator==(const PulseCapture&) const = default;
};

/// Slot samples with the opaque blade in the phantom's path, LEDs in their drive, modulator at rest. All four trains
/// have the same length.
struct ClosedPathCapture {
  double cycle_s = 0.0;
  std::uint32_t first_cycle = 0;
  std::vector<std::int32_t> red, dark_a, infrared, dark_b;
  PerBand<double> drive_mA;
  double temperature_C = 0.0;
  bool operator==(const ClosedPathCapture&) const = default;
};

/// Slot samples with one LED lit alone: what appears in the other one's slot is cross-talk. All four trains have the
/// same length.
struct AloneSlotsCapture {
  Band lit = Band::red;
  double cycle_s = 0.0;
  std::uint32_t first_cycle = 0;
  std::vector<std::int32_t> red, dark_a, infrared, dark_b;
  PerBand<double> drive_mA;  ///< 0 for the LED that is off
  double temperature_C = 0.0;
  bool operator==(const AloneSlotsCapture&) const = default;
};

/// Dark slots (both of each cycle) with the phantom's lamp on, and without it. The LEDs may be driven or not, but
/// alike in both. Pairs of trains have the same length.
struct AmbientCapture {
  double lamp_level = 0.0;  ///< of full, above 0
  double flicker_Hz = 0.0;  ///< of the lamp; 0: none
  double cycle_s = 0.0;
  std::vector<std::int32_t> lit_a, lit_b;      ///< dark slots of consecutive cycles with the lamp on
  std::vector<std::int32_t> unlit_a, unlit_b;  ///< the same with the lamp off
  double temperature_C = 0.0;
  bool operator==(const AmbientCapture&) const = default;
};

/// All captures of one run.
struct Captures {
  std::optional<ElectricalCapture> electrical;
  std::optional<DarkCapture> dark;
  std::optional<SpectrumCapture> red_spectrum, infrared_spectrum;
  std::vector<PulseCapture> pulses;  ///< at most one per set point
  std::optional<RedAloneCapture> red_alone;
  std::optional<ClosedPathCapture> closed_path;
  std::optional<AmbientCapture> ambient;
  PerBand<std::optional<AloneSlotsCapture>> alone_slots;  ///< by the LED that is lit

  const std::optional<SpectrumCapture>& spectrum(Band band) const {
    return band == Band::red ? red_spectrum : infrared_spectrum;
  }
  /// The pulse capture at this nominal ratio, or nullptr.
  const PulseCapture* pulse(double ratio) const;
};

}  // namespace probewright::measure
