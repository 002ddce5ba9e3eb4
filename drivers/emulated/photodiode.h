#pragma once
#include <string_view>

namespace probewright::emulated {

/// How the detector is connected.
enum class DetectorCircuit { whole, open, shorted, reversed };
std::string_view to_text(DetectorCircuit circuit);

/// The detector of a probe.
struct Photodiode {
  double dark_nA_25C = 0.8;   ///< at 25 C and 5 V bias
  double doubling_K = 10.0;   ///< temperature rise that doubles the dark current, this part's own
  double slope_per_V = 0.02;  ///< relative growth of the dark current with bias, near 5 V
  double surface_nA = 0.0;    ///< leak over its surface at 5 V: in proportion to the bias, whatever the temperature
  DetectorCircuit circuit = DetectorCircuit::whole;
};

/// Dark current in nA at the temperature of the nest and a bias >= 0 in V that is meant to be in reverse; none without
/// bias. A shorted detector lets through what its leads do. A reversed one conducts, at which the adapter's bias supply
/// folds back: it then works without bias.
double dark_current_nA(const Photodiode& diode, double nest_degC, double bias_V);

/// The share of the photocurrent that arrives at the adapter, and its sign.
double photocurrent_share(const Photodiode& diode);

/// Responsivity of a silicon photodiode in A/W, 600 to 1050 nm: a smooth curve with about 0.43 at 660, 0.59 at 940 and
/// 0.34 at 1050 nm (common data-sheet values).
double silicon_responsivity_A_per_W(double wavelength_nm);

}  // namespace probewright::emulated
