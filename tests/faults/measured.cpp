#include "tests/faults/measured.h"

#include <algorithm>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::faults {
namespace {

constexpr double none = std::numeric_limits<double>::quiet_NaN();

double of_led(const emulated::LedTruth& led, std::string_view what) {
  if (what == "forward_voltage") return led.forward_voltage_V;
  if (what == "voltage_rise") return led.voltage_rise_mV;
  if (what == "reverse_leakage") return led.reverse_leakage_uA;
  if (what == "drive") return led.drive_mA;
  if (what == "warmup") return led.warmup_mV;
  if (what == "peak") return led.peak_nm;
  if (what == "centroid") return led.centroid_nm;
  if (what == "half_power_centre") return led.half_power_centre_nm;
  if (what == "width") return led.width_nm;
  if (what == "transfer") return led.transfer_nA_per_mA;
  return none;
}

/// The deviation that is largest over the set points, with its sign, as the check is defined.
double largest(const emulated::Truth& truth, double emulated::RatioTruth::*deviation) {
  double most = 0.0;
  for (const emulated::RatioTruth& ratio : truth.ratios)
    if (!(std::abs(ratio.*deviation) <= std::abs(most))) most = ratio.*deviation;
  return most;
}

}  // namespace

double truth_of(const emulated::Truth& truth, std::string_view check) {
  if (check == "red_modulation_deviation")
    return largest(truth, &emulated::RatioTruth::red_modulation_deviation_percent);
  if (check == "infrared_modulation_deviation")
    return largest(truth, &emulated::RatioTruth::infrared_modulation_deviation_percent);
  for (const auto& [led, band] : {std::pair{&truth.red, std::string_view{"red_"}}, {&truth.infrared, "infrared_"}})
    if (check.starts_with(band)) return of_led(*led, check.substr(band.size()));
  if (check == "probe_present") return 1.0;
  if (check == "id_resistance") return truth.id_resistance_ohm;
  if (check == "id_deviation") return truth.id_deviation_percent;
  if (check == "mains_pickup") return truth.mains_pickup_nA;
  if (check == "secondary_emission") return truth.secondary_emission_percent;
  if (check == "dark_current" || check == "dark_current_as_found") return truth.dark_current_nA;  // at 25 C the same
  if (check == "closed_path_light") return truth.closed_path_light_percent;
  if (check == "slot_crosstalk") return truth.slot_crosstalk_percent;
  if (check == "ambient_uptake") return truth.ambient_uptake_nA;
  if (check == "ratio_deviation_0p4") return truth.ratios[0].ratio_deviation_percent;
  if (check == "ratio_deviation_1p0") return truth.ratios[1].ratio_deviation_percent;
  if (check == "ratio_deviation_1p6") return truth.ratios[2].ratio_deviation_percent;
  return none;
}

std::string words_of(const Table& table) {
  std::string words;
  for (const Check& check : catalogue()) {
    const auto found = table.find(std::string{check.slug});
    if (found == table.end()) continue;
    const Moments& m = found->second;
    words += std::string{check.slug} + ": bias " + fixed(m.bias(), 5) + ", sd " + fixed(m.sd(), 5) + " " +
             std::string{check.unit} + " (" + std::to_string(m.count()) + ")\n";
  }
  return words;
}

}  // namespace probewright::faults
