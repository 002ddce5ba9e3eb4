#include "drivers/emulated/truth.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>

#include "drivers/emulated/colour_windows.h"
#include "drivers/emulated/front_end.h"
#include "drivers/emulated/model_nominals.h"
#include "drivers/emulated/modulator.h"

namespace probewright::emulated {
namespace {

constexpr double none = std::numeric_limits<double>::quiet_NaN();

/// The LED whose light has a colour, if either one does.
const Led* shining(const Probe& probe, LedColour colour) {
  for (const Led* led : {&probe.red, &probe.infrared}) {
    if (led->colour == colour && shines(*led)) return led;
  }
  return nullptr;
}

void add_line(LedTruth& truth, const Led* led, Window window) {
  if (led == nullptr) {
    truth.peak_nm = truth.centroid_nm = truth.whole_centroid_nm = truth.half_power_centre_nm = truth.width_nm = none;
    return;
  }
  truth.peak_nm = led->line.peak_nm;
  truth.centroid_nm = centroid_above_nm(led->line, centroid_threshold, window.low_nm, window.high_nm);
  truth.whole_centroid_nm = led->line.centroid_nm();
  truth.half_power_centre_nm = led->line.half_centre_nm();
  truth.width_nm = led->line.fwhm_nm();
}

void add_voltages(LedTruth& truth, const Led& led) {
  if (!conducts(led)) {
    truth.forward_voltage_V = FrontEnd::compliance_V;
    truth.voltage_rise_mV = truth.warmup_mV = none;
    return;
  }
  const Warmth warm{led.heating.die_rise_K, led.heating.package_rise_K};
  const double drive = led.standard_drive_mA;
  truth.drive_mA = drive;
  truth.forward_voltage_V = forward_voltage_V(led, drive, 0.0);
  const Warmth quarter = mean_warmth(led.heating, warm, 0.25, 0.020);
  truth.voltage_rise_mV =
      1e3 * (truth.forward_voltage_V - forward_voltage_V(led, 0.25 * drive, excess_K(led, 25.0, quarter)));
  const Warmth early = warmed(led.heating, {}, 1.0, 0.005);
  truth.warmup_mV = 1e3 * (forward_voltage_V(led, drive, excess_K(led, 25.0, early)) - truth.forward_voltage_V);
}

LedTruth led_truth(const Probe& probe, LedColour colour) {
  const bool red = colour == LedColour::red;
  const Led& led = red ? probe.red : probe.infrared;
  LedTruth truth;
  add_line(truth, shining(probe, colour), red ? red_window : infrared_window);
  add_voltages(truth, led);
  truth.reverse_leakage_uA = probe.wiring == Wiring::antiparallel ? 0.0 : reverse_leakage_uA(led, 5.0);
  truth.transfer_nA_per_mA = shines(led) ? led.transfer_nA_per_mA * photocurrent_share(probe.photodiode) : 0.0;
  return truth;
}

/// Share of the power between 800 and 1000 nm of what is driven as red: a red LED's both lines, Simpson's rule on
/// 0.5 nm.
double secondary_share(const Probe& probe) {
  if (!shines(probe.red)) return none;
  const double secondary_power = probe.red.colour == LedColour::red ? probe.secondary_power : 0.0;
  const double red = (1.0 - secondary_power) / probe.red.line.area_nm();
  const double secondary = secondary_power / probe.secondary_line.area_nm();
  constexpr int intervals = 400;
  constexpr double step_nm = 200.0 / intervals;
  double sum = 0.0;
  for (int i = 0; i <= intervals; ++i) {
    const double weight = i == 0 || i == intervals ? 1.0 : (i % 2 == 1 ? 4.0 : 2.0);
    const double wavelength = 800.0 + step_nm * i;
    sum += weight * (red * probe.red.line.at(wavelength) + secondary * probe.secondary_line.at(wavelength));
  }
  return sum * step_nm / 3.0;
}

/// AC and DC of one slot from those of both LEDs' light.
struct Wave {
  double ac = 0.0, dc = 0.0;
  double modulation() const { return ac / dc; }
};
Wave mixed(const Wave& own, const Wave& other, double share) {
  return {own.ac + share * other.ac, own.dc + share * other.dc};
}

double percent_off(double value, double nominal) { return 100.0 * (value / nominal - 1.0); }

Wave wave_of(const Led& led, const Probe& probe, const Depths& depths) {
  if (!shines(led)) return {};
  const double light_nA = led.standard_drive_mA * led.transfer_nA_per_mA;
  const double through = 1.0 - probe.direct_light;
  const double red_depth = (1.0 - probe.secondary_current) * depths.red + probe.secondary_current * depths.infrared;
  return {light_nA * through * (led.colour == LedColour::red ? red_depth : depths.infrared), light_nA};
}

RatioTruth ratio_truth(const Probe& probe, const StoredSetPoint& point) {
  const bool seen = photocurrent_share(probe.photodiode) != 0.0;
  const Wave red = wave_of(probe.red, probe, point.depths), infrared = wave_of(probe.infrared, probe, point.depths);
  RatioTruth truth;
  truth.nominal = point.nominal_ratio;
  truth.red_modulation = seen && shines(probe.red) ? mixed(red, infrared, probe.slot_crosstalk).modulation() : none;
  truth.infrared_modulation =
      seen && shines(probe.infrared) ? mixed(infrared, red, probe.slot_crosstalk).modulation() : none;
  truth.ratio = truth.red_modulation / truth.infrared_modulation;
  truth.ratio_deviation_percent = percent_off(truth.ratio, point.nominal_ratio);
  truth.red_modulation_deviation_percent = percent_off(truth.red_modulation, point.depths.red);
  truth.infrared_modulation_deviation_percent = percent_off(truth.infrared_modulation, point.depths.infrared);
  return truth;
}

/// Variance of one slot's reading, nA^2: the amplifier's and the photons'.
double slot_variance_nA2(double current_nA) {
  constexpr double electron_nC = 1.602176634e-10, slot_s = 439e-6;
  const double photons = electron_nC * std::abs(current_nA) / (FrontEnd::settled_share * slot_s);
  return FrontEnd::slot_noise_nA * FrontEnd::slot_noise_nA + photons;
}

/// The dark under a slot is the mean of the dark slots before and after it. A contact that opens takes the
/// light away for a share of the slots.
double cable_noise_of(const Probe& probe, const Led& led) {
  constexpr double gap_s = 0.004, to_dark_s = 439e-6, mains_Hz = 50.0;
  const double light_nA = led.standard_drive_mA * led.transfer_nA_per_mA;
  const double dark_nA = dark_current_nA(probe.photodiode, 25.0, 5.0);
  const double own = std::hypot(FrontEnd::drive_noise, probe.contact_noise) * light_nA;
  const double lost = std::min(1.0, probe.contact.gaps_per_s * gap_s);
  const double mains = probe.mains_pickup_nA * (1.0 - std::cos(2.0 * std::numbers::pi * mains_Hz * to_dark_s));
  const double variance = slot_variance_nA2(light_nA + dark_nA) + 0.5 * slot_variance_nA2(dark_nA) + own * own +
                          mains * mains + lost * (1.0 - lost) * light_nA * light_nA;
  return std::sqrt(variance) / light_nA;
}

double coded_ohm(const Probe& probe) {
  for (const BinNominals& bin : all_bins()) {
    if (bin.name == probe.coded_bin) return bin.id_ohm;
  }
  return probe.id_ohm;
}

}  // namespace

Truth truth_of(const Probe& probe) {
  Truth truth;
  truth.probe = probe;
  truth.red = led_truth(probe, LedColour::red);
  truth.infrared = led_truth(probe, LedColour::infrared);
  truth.secondary_emission_percent = 100.0 * secondary_share(probe);
  truth.dark_current_nA = std::min(dark_current_nA(probe.photodiode, 25.0, 5.0), adapter_certificate::full_scale_nA);
  truth.id_resistance_ohm = probe.id_ohm;
  truth.id_deviation_percent = percent_off(probe.id_ohm, coded_ohm(probe));
  const double share = photocurrent_share(probe.photodiode);
  const bool light = share != 0.0 && (shines(probe.red) || shines(probe.infrared));
  truth.closed_path_light_percent = light ? 100.0 * probe.direct_light : none;
  truth.slot_crosstalk_percent = light ? 100.0 * probe.slot_crosstalk : none;
  truth.ambient_uptake_nA = share * probe.ambient_nA;
  truth.mains_pickup_nA = probe.mains_pickup_nA;
  const bool seen = light && shines(probe.red) && shines(probe.infrared);
  truth.cable_noise = seen ? std::max(cable_noise_of(probe, probe.red), cable_noise_of(probe, probe.infrared)) : none;
  for (std::size_t i = 0; i < stored_set_points.size(); ++i) {
    truth.ratios[i] = ratio_truth(probe, stored_set_points[i]);
  }
  return truth;
}

}  // namespace probewright::emulated
