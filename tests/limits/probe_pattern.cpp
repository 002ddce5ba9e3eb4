#include "probe_pattern.h"

#include <gtest/gtest.h>

#include <fstream>
#include <sstream>

#include "sample_sheet.h"

using namespace probewright::limits;
using namespace probewright::limits::diagnosis;

namespace {

std::string text_of(const std::string& name) {
  std::ifstream file(std::string{PW_SOURCE_DIR} + "/" + name, std::ios::binary);
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

}  // namespace

const Rules& probe_rules() {
  static const Rules rules = [] {
    const std::string name = "configs/diagnosis/probes.yaml";
    auto read = read_rules(text_of(name), name);
    if (read) return *std::move(read);
    for (const auto& fault : read.error()) ADD_FAILURE() << fault.text();
    return Rules{};
  }();
  return rules;
}

const Sheet& probe_sheet() {
  static const Sheet sheet = sheet_of(text_of("configs/sheets/aq-20.yaml"));
  return sheet;
}

ProbeReadings& ProbeReadings::with(const std::map<std::string, double>& changed) {
  for (const auto& [check, value] : changed) {
    EXPECT_TRUE(values.contains(check)) << check;
    values[check] = value;
  }
  return *this;
}

ProbeReadings& ProbeReadings::without(const std::vector<std::string>& checks, const std::string& reason) {
  for (const std::string& check : checks) {
    EXPECT_EQ(values.erase(check), 1u) << check;
    missing[check] = reason;
  }
  return *this;
}

std::vector<JudgedValue> ProbeReadings::judged() const {
  std::vector<JudgedValue> readings;
  const auto half_of_declared = [](const std::string& check) {
    return 0.5 * probe_sheet().find(check)->expanded_uncertainty;
  };
  for (const auto& [check, value] : values)
    readings.push_back({judge(probe_sheet(), check, value, half_of_declared(check)), value, half_of_declared(check)});
  for (const auto& [check, reason] : missing)
    readings.push_back({judge(probe_sheet(), check, {}, 0.0, reason), {}, 0.0});
  return readings;
}

ProbeReadings nominal_probe() {
  return {{{"probe_present", 1.0},
           {"id_deviation", 0.0},
           {"bin_mismatch", 0.0},
           {"cable_noise", 5e-5},
           {"mains_pickup", 0.2},
           {"red_forward_voltage", 1.95},
           {"infrared_forward_voltage", 1.30},
           {"red_voltage_rise", 101.0},
           {"infrared_voltage_rise", 101.0},
           {"red_reverse_leakage", 0.02},
           {"infrared_reverse_leakage", 0.02},
           {"red_drive", 20.0},
           {"infrared_drive", 20.0},
           {"red_warmup", 7.9},
           {"infrared_warmup", 4.0},
           {"red_peak", 661.5},
           {"red_centroid", 660.0},
           {"infrared_centroid", 940.3},
           {"red_width", 19.07},
           {"infrared_width", 46.08},
           {"secondary_emission", 0.02},
           {"dark_current", 0.8},
           {"red_transfer", 100.0},
           {"infrared_transfer", 150.0},
           {"closed_path_light", 0.1},
           {"slot_crosstalk", 0.02},
           {"ambient_uptake", 60.0},
           {"red_modulation_deviation", 0.0},
           {"infrared_modulation_deviation", 0.0},
           {"ratio_deviation_0p4", 0.0},
           {"ratio_deviation_1p0", 0.0},
           {"ratio_deviation_1p6", 0.0},
           {"saturation_error_100", 0.0},
           {"saturation_error_90", 0.0},
           {"saturation_error_80", 0.0},
           {"saturation_error_70", 0.0}},
          {}};
}

Diagnosis diagnosed(const ProbeReadings& readings) {
  return likely_causes(probe_rules(), probe_sheet(), readings.judged());
}

std::string first_cause(const Diagnosis& diagnosis) {
  if (const LikelyCause* first = diagnosis.first()) return first->slug;
  return diagnosis.answer == Diagnosis::Answer::nothing_wrong ? "nothing_wrong" : "none_of_known";
}
