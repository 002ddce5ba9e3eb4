#include "drivers/emulated/led.h"

#include <algorithm>
#include <cmath>

namespace probewright::emulated {

std::string_view to_text(LedCircuit circuit) {
  switch (circuit) {
    case LedCircuit::whole:
      return "whole";
    case LedCircuit::open:
      return "open";
    case LedCircuit::shorted:
      return "shorted";
    case LedCircuit::reversed:
      return "reversed";
  }
  return "whole";
}

double excess_K(const Led& led, double nest_degC, Warmth warmth) {
  return nest_degC - 25.0 + warmth.total_K() - led.heating.standard_rise_K();
}

LineShape line_at(const Led& led, double excess) {
  return line_of(led.line.centroid_nm() + led.temperature.centroid_nm_per_K * excess,
                 led.line.fwhm_nm() + led.temperature.fwhm_nm_per_K * excess, led.line.skew);
}

double light_at(const Led& led, double excess) { return std::max(0.0, 1.0 + led.temperature.light_per_K * excess); }

double forward_voltage_V(const Led& led, double drive_mA, double excess) {
  if (led.circuit == LedCircuit::shorted) return 1e-3 * lead_ohm * drive_mA;
  const double diode_V = led.diode_V * std::log(drive_mA / led.standard_drive_mA);
  const double series_V = 1e-3 * led.series_ohm * (drive_mA - led.standard_drive_mA);
  return led.forward_V + diode_V + series_V + led.temperature.forward_V_per_K * excess;
}

double reverse_leakage_uA(const Led& led, double reverse_V) {
  constexpr double saturating = 0.6, thermal_V = 0.0257;
  if (led.circuit == LedCircuit::open) return 0.0;
  if (led.circuit == LedCircuit::shorted) return std::min(most_leakage_uA, 1e6 * reverse_V / lead_ohm);
  if (led.circuit == LedCircuit::reversed) {
    const double forward_uA = 1e3 * led.standard_drive_mA * std::exp((reverse_V - led.forward_V) / led.diode_V);
    return std::min(most_leakage_uA, forward_uA);
  }
  return led.reverse_leakage_uA *
         (saturating * -std::expm1(-reverse_V / thermal_V) + (1.0 - saturating) * reverse_V / 5.0);
}

}  // namespace probewright::emulated
