#include "drivers/emulated/led.h"

#include <algorithm>
#include <cmath>

namespace probewright::emulated {

double excess_K(const Led& led, double nest_degC, Warmth warmth) {
  return nest_degC - 25.0 + warmth.total_K() - led.heating.standard_rise_K();
}

LineShape line_at(const Led& led, double excess) {
  return line_of(led.line.centroid_nm() + led.temperature.centroid_nm_per_K * excess,
                 led.line.fwhm_nm() + led.temperature.fwhm_nm_per_K * excess, led.line.skew);
}

double light_at(const Led& led, double excess) { return std::max(0.0, 1.0 + led.temperature.light_per_K * excess); }

double forward_voltage_V(const Led& led, double drive_mA, double excess) {
  const double diode_V = led.diode_V * std::log(drive_mA / led.standard_drive_mA);
  const double series_V = 1e-3 * led.series_ohm * (drive_mA - led.standard_drive_mA);
  return led.forward_V + diode_V + series_V + led.temperature.forward_V_per_K * excess;
}

double reverse_leakage_uA(const Led& led, double reverse_V) {
  constexpr double saturating = 0.6, thermal_V = 0.0257;
  return led.reverse_leakage_uA *
         (saturating * -std::expm1(-reverse_V / thermal_V) + (1.0 - saturating) * reverse_V / 5.0);
}

}  // namespace probewright::emulated
