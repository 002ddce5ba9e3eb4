#include "station/base/catalogue.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <set>
#include <string>

#include "station/base/units.h"

namespace probewright {
namespace {

struct Row {
  const char* slug;
  const char* unit;
  const char* needs;  // one letter each, as in the table of the design
};

// The agreed table, copied by hand: a slug that changes would orphan every reading ever stored under it.
constexpr Row agreed[] = {
    {"probe_present", "yes/no", "E"},
    {"id_resistance", "ohm", "E"},
    {"id_deviation", "%", "EB"},
    {"bin_mismatch", "nm", "SB"},
    {"cable_noise", "1", "P"},
    {"mains_pickup", "nA", "E"},
    {"red_forward_voltage", "V", "E"},
    {"infrared_forward_voltage", "V", "E"},
    {"red_voltage_rise", "mV", "E"},
    {"infrared_voltage_rise", "mV", "E"},
    {"red_reverse_leakage", "uA", "E"},
    {"infrared_reverse_leakage", "uA", "E"},
    {"red_drive", "mA", "E"},
    {"infrared_drive", "mA", "E"},
    {"red_warmup", "mV", "E"},
    {"infrared_warmup", "mV", "E"},
    {"red_peak", "nm", "S"},
    {"infrared_peak", "nm", "S"},
    {"red_centroid", "nm", "S"},
    {"infrared_centroid", "nm", "S"},
    {"red_half_power_centre", "nm", "S"},
    {"infrared_half_power_centre", "nm", "S"},
    {"red_width", "nm", "S"},
    {"infrared_width", "nm", "S"},
    {"secondary_emission", "%", "S"},
    {"dark_current", "nA", "D"},
    {"dark_current_as_found", "nA", "D"},
    {"red_transfer", "nA/mA", "P"},
    {"infrared_transfer", "nA/mA", "P"},
    {"closed_path_light", "%", "CP"},
    {"slot_crosstalk", "%", "P"},
    {"ambient_uptake", "nA", "A"},
    {"red_modulation_deviation", "%", "P"},
    {"infrared_modulation_deviation", "%", "P"},
    {"ratio_deviation_0p4", "%", "P"},
    {"ratio_deviation_1p0", "%", "P"},
    {"ratio_deviation_1p6", "%", "P"},
    {"ratio_slope", "1", "P"},
    {"ratio_offset", "1", "P"},
    {"ratio_nonlinearity", "1", "P"},
    {"saturation_error_100", "%SpO2", "SB"},
    {"saturation_error_90", "%SpO2", "SB"},
    {"saturation_error_80", "%SpO2", "SB"},
    {"saturation_error_70", "%SpO2", "SB"},
};

unsigned flag(char letter) {
  switch (letter) {
    case 'E':
      return needs_electrical;
    case 'S':
      return needs_spectra;
    case 'P':
      return needs_pulses;
    case 'C':
      return needs_closed_path;
    case 'D':
      return needs_dark;
    case 'A':
      return needs_ambient;
    case 'B':
      return needs_coded_bin;
    default:
      return 0;
  }
}

TEST(Catalogue, HoldsTheAgreedChecksInOrder) {
  ASSERT_EQ(catalogue().size(), std::size(agreed));
  for (std::size_t i = 0; i < std::size(agreed); ++i) {
    const Check& check = catalogue()[i];
    EXPECT_EQ(check.slug, agreed[i].slug) << "place " << i;
    EXPECT_EQ(check.unit, agreed[i].unit) << check.slug;
    unsigned needs = 0;
    for (const char* letter = agreed[i].needs; *letter != '\0'; ++letter) needs |= flag(*letter);
    EXPECT_EQ(check.needs, needs) << check.slug;
  }
}

TEST(Catalogue, SlugsAndNamesAreUnique) {
  std::set<std::string_view> slugs, names;
  for (const Check& check : catalogue()) {
    EXPECT_TRUE(slugs.insert(check.slug).second) << check.slug;
    EXPECT_TRUE(names.insert(check.shown_as).second) << check.shown_as;
    EXPECT_TRUE(std::all_of(check.slug.begin(), check.slug.end(), [](char c) {
      return (c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == '_';
    })) << check.slug;
  }
}

TEST(Catalogue, EveryUnitMeasuresWhatTheCheckIs) {
  for (const Check& check : catalogue()) {
    const auto dimension = dimension_of(check.unit);
    ASSERT_TRUE(dimension.has_value()) << check.slug;
    EXPECT_EQ(*dimension, check.dimension) << check.slug;
    EXPECT_EQ(check.unit == "%", !check.of.empty()) << check.slug << ": \"%\" always says of what";
  }
}

TEST(Catalogue, FindsBySlug) {
  EXPECT_EQ(check_index("probe_present"), 0);
  EXPECT_EQ(check_index("saturation_error_70"), 43);
  EXPECT_EQ(check_index("red_centroid "), -1);
  EXPECT_EQ(check_index(""), -1);
  ASSERT_NE(find_check("dark_current"), nullptr);
  EXPECT_EQ(find_check("dark_current")->unit, "nA");
  EXPECT_EQ(find_check("dark"), nullptr);
}

}  // namespace
}  // namespace probewright
