#pragma once
#include <array>
#include <map>
#include <string>

#include "drivers/emulated/probe.h"

namespace probewright::emulated {

/// What a perfect station would read of one LED: nest at 25 C, standard drive, warm. What cannot be read of a faulty
/// probe is not a number. Wavelengths are of the line that stands in this colour's window while both LEDs are driven,
/// all else is of the LED that is driven as this colour.
struct LedTruth {
  double peak_nm = 0.0;
  double centroid_nm = 0.0;        ///< above 1 % of the peak, inside the line's window
  double whole_centroid_nm = 0.0;  ///< of the whole line, for comparison
  double half_power_centre_nm = 0.0;
  double width_nm = 0.0;           ///< FWHM
  double forward_voltage_V = 0.0;  ///< the compliance where no current flows
  double voltage_rise_mV = 0.0;    ///< standard drive minus 20 ms at a quarter of it
  double drive_mA = 0.0;
  double reverse_leakage_uA = 0.0;  ///< at 5 V; 0 where the wiring allows no separate measurement
  double warmup_mV = 0.0;           ///< 5 ms after switching on from cold, minus warm
  double transfer_nA_per_mA = 0.0;  ///< through the nominal phantom, its blade out
};

/// What a perfect station would read at one stored set point of the nominal phantom; not a number where an LED or the
/// detector gives nothing.
struct RatioTruth {
  double nominal = 0.0;
  double ratio = 0.0;
  double red_modulation = 0.0;  ///< AC over DC
  double infrared_modulation = 0.0;
  double ratio_deviation_percent = 0.0;           ///< of the nominal
  double red_modulation_deviation_percent = 0.0;  ///< of the stored depth
  double infrared_modulation_deviation_percent = 0.0;
};

/// The defined measurands of a probe, computed from its parameters by this folder's own formulas. The station never
/// sees this.
struct Truth {
  Probe probe;
  LedTruth red, infrared;
  double secondary_emission_percent = 0.0;  ///< 800 to 1000 nm over the whole power of what is driven as red
  double dark_current_nA = 0.0;             ///< at 25 C and 5 V
  double id_resistance_ohm = 0.0;           ///< infinite when it is missing
  double id_deviation_percent = 0.0;        ///< of the coded value
  double closed_path_light_percent = 0.0;
  double slot_crosstalk_percent = 0.0;
  double ambient_uptake_nA = 0.0;  ///< lamp at full level
  double mains_pickup_nA = 0.0;
  /// Root mean square of one slot's light less the dark beside it, about the pulse and without the lines of flicker,
  /// over the mean: what the cable makes and what a perfect adapter cannot help. The noisier band.
  double cable_noise = 0.0;
  std::array<RatioTruth, 3> ratios{};
};

Truth truth_of(const Probe& probe);

/// The truth file: one JSON object, `{"format": 1, "emulated": true, "seed": ..., "probes": {serial: {...}}}`, every
/// fault, parameter and measurand of each probe. What is not a number or infinite is null.
std::string truth_json(std::uint64_t seed, const std::map<std::string, Truth>& probes);

}  // namespace probewright::emulated
