#include "drivers/emulated/photodiode.h"

#include <cmath>

namespace probewright::emulated {

std::string_view to_text(DetectorCircuit circuit) {
  switch (circuit) {
    case DetectorCircuit::whole:
      return "whole";
    case DetectorCircuit::open:
      return "open";
    case DetectorCircuit::shorted:
      return "shorted";
    case DetectorCircuit::reversed:
      return "reversed";
  }
  return "whole";
}

double photocurrent_share(const Photodiode& diode) {
  if (diode.circuit == DetectorCircuit::whole) return 1.0;
  return diode.circuit == DetectorCircuit::reversed ? -1.0 : 0.0;
}

double dark_current_nA(const Photodiode& diode, double nest_degC, double bias_V) {
  constexpr double thermal_V = 0.0257, short_ohm = 100.0;
  if (diode.circuit == DetectorCircuit::shorted) return 1e9 * bias_V / short_ohm;
  if (diode.circuit != DetectorCircuit::whole) return 0.0;
  const double temperature_factor = std::exp2((nest_degC - 25.0) / diode.doubling_K);
  const double bias_factor = -std::expm1(-bias_V / thermal_V) * (1.0 + diode.slope_per_V * (bias_V - 5.0));
  return diode.dark_nA_25C * temperature_factor * bias_factor + diode.surface_nA * bias_V / 5.0;
}

double silicon_responsivity_A_per_W(double wavelength_nm) {
  // Below the band edge a photon gives nearly one electron (0.81 A/W per um times an efficiency); towards it the
  // silicon turns transparent: a logistic fall.
  const double photons = 6.52e-4 * wavelength_nm;
  const double edge = 1.0 / (1.0 + std::exp((wavelength_nm - 1050.0) / 33.0));
  return photons * edge;
}

}  // namespace probewright::emulated
