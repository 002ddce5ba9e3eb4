#pragma once
#include "drivers/emulated/line_shape.h"
#include "drivers/emulated/self_heating.h"

namespace probewright::emulated {

/// What temperature does to an LED, per kelvin.
struct LedTemperature {
  double centroid_nm_per_K = 0.0;
  double fwhm_nm_per_K = 0.0;
  double light_per_K = 0.0;  ///< relative
  double forward_V_per_K = 0.0;
};

/// One LED of a probe. All values hold for a nest at 25 C in the model's standard drive, warmed up.
struct Led {
  LineShape line;
  double transfer_nA_per_mA = 0.0;  ///< photocurrent in the slot per drive, through the nominal phantom
  double optical_power = 1.0;       ///< relative to the nominal LED, as the spectrometer sees it
  double forward_V = 0.0;           ///< at the standard drive
  double standard_drive_mA = 20.0;  ///< the current in the slot
  double diode_V = 0.0514;          ///< emission coefficient times thermal voltage: V per e-fold of current
  double series_ohm = 0.0;          ///< lead, bond and bulk resistance
  double reverse_leakage_uA = 0.0;  ///< at 5 V reverse
  LedTemperature temperature;
  Heating heating;
};

/// Kelvin by which the LED differs from its reference state: nest at 25 C, standard drive, warm.
double excess_K(const Led& led, double nest_degC, Warmth warmth);

/// The line at that excess.
LineShape line_at(const Led& led, double excess);
/// Light relative to the reference state, for the same current.
double light_at(const Led& led, double excess);
/// Forward voltage in V at `drive_mA` > 0 and that excess: ideal diode with series resistance.
double forward_voltage_V(const Led& led, double drive_mA, double excess);
/// Reverse leakage in uA at `reverse_V` >= 0: a leak that saturates plus a surface path in proportion.
double reverse_leakage_uA(const Led& led, double reverse_V);

}  // namespace probewright::emulated
