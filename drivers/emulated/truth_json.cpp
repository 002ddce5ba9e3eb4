#include <nlohmann/json.hpp>

#include "drivers/emulated/truth.h"
#include "station/base/numbers.h"

namespace probewright::emulated {
namespace {

using Json = nlohmann::ordered_json;

Json line_json(const LineShape& line) {
  return {{"peak_nm", line.peak_nm}, {"width_nm", line.width_nm}, {"skew", line.skew}};
}

Json led_parameters(const Led& led) {
  return {{"colour", led.colour == LedColour::red ? "red" : "infrared"},
          {"circuit", to_text(led.circuit)},
          {"line", line_json(led.line)},
          {"transfer_nA_per_mA", led.transfer_nA_per_mA},
          {"optical_power", led.optical_power},
          {"forward_V", led.forward_V},
          {"standard_drive_mA", led.standard_drive_mA},
          {"diode_V", led.diode_V},
          {"series_ohm", led.series_ohm},
          {"reverse_leakage_uA", led.reverse_leakage_uA},
          {"centroid_nm_per_K", led.temperature.centroid_nm_per_K},
          {"fwhm_nm_per_K", led.temperature.fwhm_nm_per_K},
          {"light_per_K", led.temperature.light_per_K},
          {"forward_V_per_K", led.temperature.forward_V_per_K},
          {"die_rise_K", led.heating.die_rise_K},
          {"die_time_s", led.heating.die_time_s},
          {"package_rise_K", led.heating.package_rise_K},
          {"package_time_s", led.heating.package_time_s}};
}

Json parameters(const Probe& probe) {
  return {{"wiring", to_text(probe.wiring)},
          {"red", led_parameters(probe.red)},
          {"infrared", led_parameters(probe.infrared)},
          {"secondary_power", probe.secondary_power},
          {"secondary_line", line_json(probe.secondary_line)},
          {"secondary_current", probe.secondary_current},
          {"dark_nA_25C", probe.photodiode.dark_nA_25C},
          {"dark_doubling_K", probe.photodiode.doubling_K},
          {"dark_slope_per_V", probe.photodiode.slope_per_V},
          {"dark_surface_nA", probe.photodiode.surface_nA},
          {"detector_circuit", to_text(probe.photodiode.circuit)},
          {"id_ohm", probe.id_ohm},
          {"coded_bin", probe.coded_bin},
          {"mains_pickup_nA", probe.mains_pickup_nA},
          {"contact_noise", probe.contact_noise},
          {"contact_gaps_per_s", probe.contact.gaps_per_s},
          {"direct_light", probe.direct_light},
          {"slot_crosstalk", probe.slot_crosstalk},
          {"ambient_nA", probe.ambient_nA}};
}

Json faults(const Probe& probe) {
  Json list = Json::array();
  for (const PlantedFault& planted : probe.faults) {
    list.push_back({{"fault", slug_of(planted.fault)}, {"severity", planted.severity}});
  }
  return list;
}

/// Measurands by the slugs of the check catalogue; values that have no check carry their own names.
void add_led(Json& to, const std::string& colour, const LedTruth& led) {
  to[colour + "_peak"] = led.peak_nm;
  to[colour + "_centroid"] = led.centroid_nm;
  to[colour + "_centroid_of_whole_line"] = led.whole_centroid_nm;
  to[colour + "_half_power_centre"] = led.half_power_centre_nm;
  to[colour + "_width"] = led.width_nm;
  to[colour + "_forward_voltage"] = led.forward_voltage_V;
  to[colour + "_voltage_rise"] = led.voltage_rise_mV;
  to[colour + "_drive"] = led.drive_mA;
  to[colour + "_reverse_leakage"] = led.reverse_leakage_uA;
  to[colour + "_warmup"] = led.warmup_mV;
  to[colour + "_transfer"] = led.transfer_nA_per_mA;
}

std::string slug_of(double ratio) {
  std::string text = fixed(ratio, 1);
  text[text.find('.')] = 'p';
  return text;
}

Json measurands(const Truth& truth) {
  Json to = Json::object();
  to["id_resistance"] = truth.id_resistance_ohm;
  to["id_deviation"] = truth.id_deviation_percent;
  add_led(to, "red", truth.red);
  add_led(to, "infrared", truth.infrared);
  to["secondary_emission"] = truth.secondary_emission_percent;
  to["dark_current"] = truth.dark_current_nA;
  to["closed_path_light"] = truth.closed_path_light_percent;
  to["slot_crosstalk"] = truth.slot_crosstalk_percent;
  to["ambient_uptake"] = truth.ambient_uptake_nA;
  to["mains_pickup"] = truth.mains_pickup_nA;
  to["cable_noise"] = truth.cable_noise;
  for (const RatioTruth& ratio : truth.ratios) {
    const std::string slug = slug_of(ratio.nominal);
    to["ratio_" + slug] = ratio.ratio;
    to["ratio_deviation_" + slug] = ratio.ratio_deviation_percent;
    to["red_modulation_deviation_" + slug] = ratio.red_modulation_deviation_percent;
    to["infrared_modulation_deviation_" + slug] = ratio.infrared_modulation_deviation_percent;
  }
  return to;
}

}  // namespace

std::string truth_json(std::uint64_t seed, const std::map<std::string, Truth>& probes) {
  Json file = {{"format", 1}, {"emulated", true}, {"seed", seed}, {"probes", Json::object()}};
  for (const auto& [serial, truth] : probes) {
    file["probes"][serial] = {{"model", truth.probe.model},
                              {"faults", faults(truth.probe)},
                              {"measurands", measurands(truth)},
                              {"parameters", parameters(truth.probe)}};
  }
  return file.dump(1) + "\n";
}

}  // namespace probewright::emulated
