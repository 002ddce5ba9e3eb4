#pragma once
#include <string_view>

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

enum class LedColour { red, infrared };

/// What the adapter finds at an LED's pins. One that is driven the wrong way round is `reversed`.
enum class LedCircuit { whole, open, shorted, reversed };
std::string_view to_text(LedCircuit circuit);

/// One LED of a probe. All values hold for a nest at 25 C in the model's standard drive, warmed up.
struct Led {
  LedColour colour = LedColour::red;  ///< of its light, whatever it is driven as
  LedCircuit circuit = LedCircuit::whole;
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
/// Whether it gives light, and whether current flows at all, when it is driven.
inline bool shines(const Led& led) { return led.circuit == LedCircuit::whole; }
inline bool conducts(const Led& led) { return shines(led) || led.circuit == LedCircuit::shorted; }
/// Forward voltage in V at `drive_mA` > 0 and that excess: ideal diode with series resistance. A shorted one shows the
/// drop of its leads; one that does not conduct has none.
double forward_voltage_V(const Led& led, double drive_mA, double excess);
inline constexpr double lead_ohm = 0.5;  ///< both leads of the cable
/// Reverse leakage in uA at `reverse_V` >= 0: a leak that saturates plus a surface path in proportion. What conducts
/// there (shorted or reversed) draws all that the adapter's source gives.
inline constexpr double most_leakage_uA = 1000.0;
double reverse_leakage_uA(const Led& led, double reverse_V);

}  // namespace probewright::emulated
