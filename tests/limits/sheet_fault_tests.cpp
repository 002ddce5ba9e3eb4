#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <set>

#include "limits/sheet.h"
#include "sample_sheet.h"
#include "station/base/problem_table.h"

namespace probewright::limits {
namespace {

/// One slip of the pen: a line of the sample is replaced, and exactly one fault must be told.
struct Slip {
  int line;
  std::string replacement;
  std::string offending;  ///< the fault's column is where this stands in the line
  std::string id;
  std::string what;
};

const std::vector<Slip>& slips() {
  static const std::vector<Slip> all{
      {1, "sheet: \" \"", "\" \"", "sheet_empty_text", "\"sheet\" says nothing"},
      {2, "revision: 0", "0", "sheet_out_of_range", "revision: 0 is outside 1 to 1000000"},
      {2, "revision: two", "two", "integer_malformed", "\"two\" is not a whole number"},
      {3, "reasons: new", "reasons", "yaml_unknown_key_near", ""},
      {3, "for model: sha256 12\nreason: x", "sha256", "sheet_model_digest",
       "\"sha256 12\" is not the digest of a model"},
      {6, "  red_centriod: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm}", "red_centriod", "sheet_unknown_check",
       "\"red_centriod\" is not a check"},
      {6, "  red_centroid: {lower: 665.0 nm, upper: 655.0 nm, U: 0.33 nm}", "655.0", "sheet_limits_reversed",
       "red_centroid: lower 665 nm is not below upper 655 nm"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 655.0 nm, U: 0.33 nm}", "655.0 nm, U", "sheet_limits_reversed",
       "red_centroid: lower 655 nm is not below upper 655 nm"},
      {6, "  red_centroid: {lower: 655.0 mA, upper: 665.0 nm, U: 0.33 nm}", "655.0 mA", "unit_mismatch",
       "\"mA\" is a current, but a length belongs here"},
      {6, "  red_centroid: {lower: 655.0, upper: 665.0 nm, U: 0.33 nm}", "655.0", "unit_missing",
       "the number has no unit"},
      {6, "  red_centroid: {lower: 655.0 nn, upper: 665.0 nm, U: 0.33 nm}", "655.0 nn", "unit_unknown",
       "there is no unit \"nn\""},
      {6, "  red_centroid: {lower: 1e999 nm, upper: 665.0 nm, U: 0.33 nm}", "1e999", "number_not_finite",
       "\"1e999 nm\" is not a finite number"},
      {6, "  red_centroid: {lower: nan nm, upper: 665.0 nm, U: 0.33 nm}", "nan nm", "number_not_finite", ""},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm}", "red_centroid", "sheet_no_uncertainty",
       "red_centroid is judged and has no U"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: -0.33 nm}", "-0.33", "sheet_not_above_zero",
       "red_centroid: U -0.33 nm is not above 0"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.05 %}", "0.05 %", "sheet_percent_of_nothing",
       "red_centroid: U 0.05 % of what?"},
      {6, "  red_centroid: {lower: 655.0 nm, uper: 665.0 nm, upper: 665.0 nm, U: 0.33 nm}", "uper",
       "yaml_unknown_key_near", "there is no key \"uper\" here"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, upper: 665.0 nm}", "upper: 665.0 nm}",
       "yaml_duplicate_key", "the key \"upper\" stands here again; it stands first in line 6"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, typical: 660 nm}", "660 nm",
       "sheet_typical_not_used", "red_centroid has two limits, where a typical value is not used"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, guard: 16}", "16", "sheet_guard_too_wide",
       "red_centroid: a guard band of 5.28 nm on each side leaves nothing of 655 nm to 665 nm"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, guard: -0.1}", "-0.1", "sheet_guard_negative",
       "red_centroid: a guard factor of -0.1 would accept what lies outside the limits"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, guard: half}", "half", "number_malformed",
       "\"half\" is not a number"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, guard: {risk: 60 %}}", "60 %",
       "sheet_risk_out_of_range", "red_centroid: a risk of 60 % is outside 0.0001 % to below 50 %"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, guard: {}}", "{}", "yaml_missing_key",
       "the key \"risk\" is missing"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, at: 23 degC}", "23 degC",
       "sheet_at_other_temperature", "readings are referred to 25 degC, not to 23 degC"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, accept: {lower: 654 nm, upper: 665 nm}}",
       "654 nm", "sheet_accept_differs",
       "red_centroid: the acceptance limit \"lower\" is 654 nm, from limits, U and guard it is 655 nm"},
      {6, "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm, accept: {lower: 655 nm}}", "{lower: 655 nm}",
       "sheet_accept_differs",
       "red_centroid: the acceptance limit \"upper\" is missing, from limits, U and guard it is 665 nm"},
      {7, "  red_drive: {nominal: 20 mA, U: 0.26 %}", "red_drive", "sheet_half_a_window",
       "red_drive has a nominal and no tolerance"},
      {7, "  red_drive: {tolerance: 2 %, U: 0.05 mA}", "red_drive", "sheet_half_a_window",
       "red_drive has a tolerance and no nominal"},
      {7, "  red_drive: {nominal: 20 mA, tolerance: 2 %, upper: 21 mA, U: 0.26 %}", "20 mA", "sheet_two_windows",
       "red_drive has limits and a nominal value with tolerance"},
      {7, "  red_drive: {nominal: 0 mA, tolerance: 2 %, U: 0.05 mA}", "2 %", "sheet_percent_of_nothing",
       "red_drive: tolerance 2 % of what?"},
      {7, "  red_drive: {nominal: 20 mA, tolerance: 0 %, U: 0.05 mA}", "0 %", "sheet_not_above_zero",
       "red_drive: tolerance 0 % is not above 0"},
      {7, "  red_drive: {U: 0.05 mA}", "red_drive", "sheet_no_limit", "red_drive has no limit"},
      {8, "  dark_current: {upper: 5.0 nA, U: 0.4 nA}", "dark_current", "sheet_no_typical",
       "dark_current has one limit and no typical value, so its margin means nothing"},
      {8, "  dark_current: {upper: 5.0 nA, typical: 5.2 nA, U: 0.4 nA}", "5.2 nA", "sheet_typical_outside",
       "dark_current: typical 5.2 nA is not inside the acceptance limit 5 nA"},
      {8, "  dark_current: {lower: 5.0 nA, typical: 5.2 nA, U: 0.4 nA, guard: 1}", "5.2 nA", "sheet_typical_outside",
       "dark_current: typical 5.2 nA is not inside the acceptance limit 5.4 nA"},
      {8, "  dark_current: {upper: 5,0 nA, typical: 0.8 nA, U: 0.4 nA}", "0 nA", "yaml_unknown_key", ""},
      {8, "  dark_current: &d {upper: 5.0 nA, typical: 0.8 nA, U: 0.4 nA}", "&d", "yaml_anchor", ""},
      {8, "  dark_current: !x {upper: 5.0 nA, typical: 0.8 nA, U: 0.4 nA}", "!x", "yaml_tag", ""},
      {8, "  dark_current: [5.0 nA]", "[", "yaml_wrong_kind", "a map of keys belongs here, but a list is written"},
      {11, "  red_half_power_centre: record onyl", "record onyl", "sheet_word_unknown",
       "red_half_power_centre: \"record onyl\" means nothing here"},
      {11, "  red_half_power_centre: must be yes", "must be yes", "sheet_not_a_yes_no_check",
       "red_half_power_centre is a number in nm and cannot be \"must be yes\""},
      {12, "  bin_mismatch: {watch: 1.4 nm, upper: 2 nm}", "2 nm", "sheet_watch_is_not_judged",
       "bin_mismatch: upper stands beside \"watch\", which judges nothing"},
      {12, "  bin_mismatch: {watch: 0 nm}", "0 nm", "sheet_not_above_zero", "bin_mismatch: watch 0 nm is not above 0"},
      {13, "  probe_present: {lower: 1, U: 1}", "{", "sheet_yes_no_has_limits",
       "probe_present answers yes or no and has no limits"},
      {15, "  by: red_center", "red_center", "sheet_bins_by",
       "bins cannot be sorted by \"red_center\": it is not a judged check with two limits here"},
      {15, "  by: dark_current", "dark_current", "sheet_bins_by", ""},
      {15, "  by: infrared_centroid", "infrared_centroid", "sheet_bins_by", ""},
      {16, "  B1: {lower: 655.0 nm, upper: 659 nm, nominal: 657.5 nm, id resistor: 10.2 kohm}", "", "sheet_bin_gap",
       "nothing from 659 nm to 660 nm, between bins B1 and B2"},
      {16, "  B1: {lower: 655.0 nm, upper: 661 nm, nominal: 657.5 nm, id resistor: 10.2 kohm}", "", "sheet_bin_overlap",
       "bins B1 and B2 both hold 660 nm to 661 nm"},
      {16, "  B1: {lower: 656.0 nm, upper: 660 nm, nominal: 657.5 nm, id resistor: 10.2 kohm}", "",
       "sheet_bins_and_window",
       "the bins reach from 656 nm to 665 nm, the limits of red_centroid from 655 nm to 665 nm"},
      {16, "  B1: {lower: 655.0 nm, upper: 660 nm, nominal: 661 nm, id resistor: 10.2 kohm}", "661 nm",
       "sheet_bin_nominal_outside", "bin B1: nominal 661 nm lies outside the bin"},
      {16, "  B1: {lower: 655.0 nm, upper: 660 nm, nominal: 657.5 nm}", "{lower", "yaml_missing_key",
       "the key \"id resistor\" is missing"},
      {17, "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 11.5 kohm}", "11.5 kohm",
       "sheet_resistors_too_close", "bin B2: 11500 ohm is less than 15 % above 10200 ohm of bin B1"},
      {17, "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 10.2 kohm}", "10.2 kohm",
       "sheet_resistors_too_close", ""},
      {17, "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 11.8 mohm}", "11.8 mohm",
       "unit_unknown", "there is no unit \"mohm\""},
      {18, "retest: {tries: 9, after: 60 s}", "9", "sheet_out_of_range", "tries: 9 is outside 0 to 5"},
      {18, "retest: {tries: 1, after: -1 s}", "-1 s", "sheet_out_of_range", "after: -1 s is outside 0 s to 24 h"},
      {18, "retest: {after: 60 s}", "{after", "yaml_missing_key", "the key \"tries\" is missing"},
      {19, "stop when: {fails in a row: 0}", "0", "sheet_out_of_range", "fails in a row: 0 is outside 1 to 1000"},
      {19, "stop when: {yield below: 85 percent of last 50}", "85 percent", "sheet_yield_rule",
       "\"85 percent of last 50\" is not a stop rule"},
      {19, "stop when: {yield below: 85 % of last 0}", "85 %", "sheet_yield_rule", ""},
  };
  return all;
}

Problems faults_of(const std::string& text) {
  const auto sheet = read_sheet(text, "sample.yaml");
  return sheet ? Problems{} : sheet.error();
}

std::string all_text(const Problems& faults) {
  std::string text;
  for (const Problem& fault : faults) text += fault.text() + "\n";
  return text;
}

TEST(SheetFaults, EachSlipIsOneFaultWithItsPlace) {
  for (const Slip& slip : slips()) {
    SCOPED_TRACE("line " + std::to_string(slip.line) + ": " + slip.replacement);
    const Problems faults = faults_of(sample_with(slip.line, slip.replacement));
    // A misspelt key is missing under its right name too, so such a slip may be two faults.
    const auto named = std::find_if(faults.begin(), faults.end(), [&](const Problem& f) { return f.id == slip.id; });
    ASSERT_NE(named, faults.end()) << all_text(faults);
    if (!slip.id.starts_with("yaml_unknown_key")) EXPECT_EQ(faults.size(), 1u) << all_text(faults);
    if (!slip.what.empty()) EXPECT_EQ(named->what(), slip.what);
    if (slip.offending.empty()) continue;
    const std::string column = std::to_string(slip.replacement.find(slip.offending) + 1);
    EXPECT_EQ(named->where, "sample.yaml:" + std::to_string(slip.line) + ":" + column);
  }
}

TEST(SheetFaults, FaultsBetweenBinsStandAtTheLaterBin) {
  const Problems gap =
      faults_of(sample_with(16, "  B1: {lower: 655.0 nm, upper: 659 nm, nominal: 657.5 nm, id resistor: 10.2 kohm}"));
  ASSERT_EQ(gap.size(), 1u);
  EXPECT_EQ(gap[0].where, "sample.yaml:17:15");
}

TEST(SheetFaults, ABinUpsideDownIsToldOnce) {
  const Problems faults =
      faults_of(sample_with(16, "  B1: {lower: 660.0 nm, upper: 655 nm, nominal: 657.5 nm, id resistor: 10.2 kohm}"));
  ASSERT_FALSE(faults.empty());
  EXPECT_EQ(faults[0].id, "sheet_bin_reversed");
  EXPECT_EQ(faults[0].where, "sample.yaml:16:15");
  EXPECT_EQ(faults[0].what(), "bin B1: lower 660 nm is not below upper 655 nm");
  EXPECT_EQ(faults.size(), 1u) << all_text(faults);
}

TEST(SheetFaults, NearestWordsAreNamed) {
  const auto check = faults_of(sample_with(11, "  red_half_power_center: record only"));
  ASSERT_EQ(check.size(), 1u);
  EXPECT_EQ(check[0].remedy(), "did you mean \"red_half_power_centre\"?");
  const auto word = faults_of(sample_with(11, "  red_half_power_centre: record onyl"));
  ASSERT_EQ(word.size(), 1u);
  EXPECT_EQ(word[0].remedy(), "did you mean \"record only\"?");
  const auto key = faults_of(joined(sample_lines()) + "retests: {tries: 1}\n");
  ASSERT_EQ(key.size(), 1u);
  EXPECT_EQ(key[0].text(), "sample.yaml:20:1: there is no key \"retests\" here (did you mean \"retest\"?)");
  const auto far = faults_of(sample_with(11, "  colour: record only"));
  ASSERT_EQ(far.size(), 1u);
  EXPECT_EQ(far[0].remedy(), "see the list of checks");
}

TEST(SheetFaults, ASheetThatJudgesNothingIsRefused) {
  const auto faults =
      faults_of("sheet: AQ-20\nrevision: 1\nreason: x\ndecision: y\nchecks:\n  red_peak: record only\n");
  ASSERT_EQ(faults.size(), 1u);
  EXPECT_EQ(faults[0].id, "sheet_judges_nothing");
  EXPECT_EQ(faults[0].where, "sample.yaml:6:3");
}

TEST(SheetFaults, BinsWithoutABinAreRefused) {
  auto lines = sample_lines();
  lines.erase(lines.begin() + 15, lines.begin() + 17);
  const auto faults = faults_of(joined(lines));
  ASSERT_EQ(faults.size(), 1u) << all_text(faults);
  EXPECT_EQ(faults[0].id, "sheet_no_bins");
}

TEST(SheetFaults, EveryMissingKeyIsTold) {
  const auto faults = faults_of("revision: 1\n");
  std::vector<std::string> whats;
  for (const Problem& fault : faults) whats.push_back(fault.what());
  EXPECT_THAT(whats,
              ::testing::UnorderedElementsAre("the key \"sheet\" is missing", "the key \"reason\" is missing",
                                              "the key \"decision\" is missing", "the key \"checks\" is missing"));
}

TEST(SheetFaults, TenFaultsAreTenReports) {
  auto lines = sample_lines();
  lines[1] = "revision: 0";
  lines[5] = "  red_centroid: {lower: 665.0 nm, upper: 655.0 nm, U: 0.33 nm}";
  lines[6] = "  red_drive: {nominal: 20 nm, tolerance: 2 %, U: 0.26 %}";
  lines[7] = "  dark_current: {upper: 5.0 nA, U: 0.4 nA}";
  lines[8] = "  saturation_error_70: {lower: -1.0 points, upper: 1.0 points, U: 0.195 points, guard: 6}";
  lines[9] = "  secondary_emision: {upper: 0.30 %, typical: 0.02 %, U: 0.05 %}";
  lines[10] = "  red_half_power_centre: record onyl";
  lines[12] = "  probe_present: {upper: 1}";
  lines[16] = "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 11 kohm}";
  lines[18] = "stop when: {yield below: eighty}";
  const auto faults = faults_of(joined(lines));
  EXPECT_EQ(faults.size(), 10u) << all_text(faults);
  for (std::size_t i = 1; i < faults.size(); ++i) {
    const auto line = [&](std::size_t at) {
      return std::stoi(faults[at].where.substr(faults[at].where.find(':') + 1));
    };
    EXPECT_LT(line(i - 1), line(i));  // in the order of the file, each line once
  }
}

// Whoever adds a fault to the reader must add its slip here.
TEST(SheetFaults, EveryFaultOfTheTableIsTried) {
  std::set<std::string> tried{"sheet_bin_reversed", "sheet_judges_nothing", "sheet_no_bins", "sheet_resistor_not_e96"};
  for (const Slip& slip : slips()) tried.insert(slip.id);
  const std::set<std::string> told_elsewhere{"sheet_lacks_check", "sheet_bin_only_here", "sheet_bin_only_in_model",
                                             "sheet_bin_differs", "sheet_for_other_model"};
  for (const ProblemRow& row : problem_table()) {
    const std::string id{row.id};
    if (id.starts_with("sheet_") && !told_elsewhere.contains(id)) EXPECT_TRUE(tried.contains(id)) << id;
  }
}

TEST(SheetFaults, AlteredTextNeverCrashesTheReader) {
  const std::string whole = joined(sample_lines());
  for (std::size_t at = 0; at < whole.size(); ++at) {
    std::string text = whole;
    if (at % 3 == 0)
      text.resize(at);
    else if (at % 3 == 1)
      text.erase(at, 1);
    else
      text[at] = ':';
    const auto sheet = read_sheet(text, "altered.yaml");
    if (!sheet) EXPECT_FALSE(sheet.error().empty());
  }
}

}  // namespace
}  // namespace probewright::limits
