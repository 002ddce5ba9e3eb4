#include "station/base/catalogue.h"

#include <algorithm>
#include <array>

namespace probewright {
namespace {

using enum Dimension;
constexpr unsigned E = needs_electrical, S = needs_spectra, P = needs_pulses, C = needs_closed_path, D = needs_dark,
                   A = needs_ambient, B = needs_coded_bin;

// Slugs are for ever: rows may be added, never renamed or taken out.
// Set points go by their nominal ratio (0p4 is 0.4), saturations by their value in %.
constexpr std::array checks = std::to_array<Check>({
    {"probe_present", "probe present", "yes/no", yes_no, "", E},
    {"id_resistance", "ID resistance", "ohm", resistance, "", E},
    {"id_deviation", "ID resistor", "%", ratio, "coded value", E | B},
    {"bin_mismatch", "bin against centroid", "nm", length, "", S | B},
    {"cable_noise", "cable noise", "1", none, "", P},
    {"mains_pickup", "mains pick-up", "nA", current, "", E},
    {"red_forward_voltage", "red forward voltage", "V", voltage, "", E},
    {"infrared_forward_voltage", "infrared forward voltage", "V", voltage, "", E},
    {"red_voltage_rise", "red voltage rise", "mV", voltage, "", E},
    {"infrared_voltage_rise", "infrared voltage rise", "mV", voltage, "", E},
    {"red_reverse_leakage", "red reverse leakage", "uA", current, "", E},
    {"infrared_reverse_leakage", "infrared reverse leakage", "uA", current, "", E},
    {"red_drive", "red drive current", "mA", current, "", E},
    {"infrared_drive", "infrared drive current", "mA", current, "", E},
    {"red_warmup", "red warm-up", "mV", voltage, "", E},
    {"infrared_warmup", "infrared warm-up", "mV", voltage, "", E},
    {"red_peak", "red peak wavelength", "nm", length, "", S},
    {"infrared_peak", "infrared peak wavelength", "nm", length, "", S},
    {"red_centroid", "red centroid wavelength", "nm", length, "", S},
    {"infrared_centroid", "infrared centroid wavelength", "nm", length, "", S},
    {"red_half_power_centre", "red half-power centre", "nm", length, "", S},
    {"infrared_half_power_centre", "infrared half-power centre", "nm", length, "", S},
    {"red_width", "red width (FWHM)", "nm", length, "", S},
    {"infrared_width", "infrared width (FWHM)", "nm", length, "", S},
    {"secondary_emission", "secondary emission", "%", ratio, "red power, 800-1000 nm", S},
    {"dark_current", "dark current", "nA", current, "", D},
    {"dark_current_as_found", "dark current as found", "nA", current, "", D},
    {"red_transfer", "red transfer", "nA/mA", responsivity, "", P},
    {"infrared_transfer", "infrared transfer", "nA/mA", responsivity, "", P},
    {"closed_path_light", "light around the phantom", "%", ratio, "open path", C | P},
    {"slot_crosstalk", "slot cross-talk", "%", ratio, "the slot before", P},
    {"ambient_uptake", "ambient light taken up", "nA", current, "", A},
    {"red_modulation_deviation", "red AC/DC against set value", "%", ratio, "certificate", P},
    {"infrared_modulation_deviation", "infrared AC/DC against set value", "%", ratio, "certificate", P},
    {"ratio_deviation_0p4", "ratio at 0.4", "%", ratio, "certificate", P},
    {"ratio_deviation_1p0", "ratio at 1.0", "%", ratio, "certificate", P},
    {"ratio_deviation_1p6", "ratio at 1.6", "%", ratio, "certificate", P},
    {"ratio_slope", "slope of the ratio line", "1", none, "", P},
    {"ratio_offset", "offset of the ratio line", "1", none, "", P},
    {"ratio_nonlinearity", "non-linearity of the ratio line", "1", none, "", P},
    {"saturation_error_100", "modelled saturation error at 100 %", "%SpO2", saturation, "", S | B},
    {"saturation_error_90", "modelled saturation error at 90 %", "%SpO2", saturation, "", S | B},
    {"saturation_error_80", "modelled saturation error at 80 %", "%SpO2", saturation, "", S | B},
    {"saturation_error_70", "modelled saturation error at 70 %", "%SpO2", saturation, "", S | B},
});

}  // namespace

std::span<const Check> catalogue() { return checks; }

const Check* find_check(std::string_view slug) {
  const int index = check_index(slug);
  return index < 0 ? nullptr : &checks[static_cast<std::size_t>(index)];
}

int check_index(std::string_view slug) {
  const auto found = std::find_if(checks.begin(), checks.end(), [slug](const Check& c) { return c.slug == slug; });
  return found == checks.end() ? -1 : static_cast<int>(found - checks.begin());
}

}  // namespace probewright
