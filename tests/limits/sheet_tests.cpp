#include "limits/sheet.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>
#include <sstream>

#include "limits/e_series.h"
#include "limits/fixed_number.h"
#include "limits/reader/parts.h"
#include "sample_sheet.h"
#include "tests/support/reference.h"

namespace probewright::limits {
namespace {

using ::testing::ElementsAre;
using ::testing::HasSubstr;
using ::testing::IsEmpty;

std::string file_text(const std::string& path) {
  std::ifstream file{path};
  std::stringstream text;
  text << file.rdbuf();
  return text.str();
}

Sheet demo_sheet() { return sheet_of(file_text(PW_SOURCE_DIR "/configs/sheets/aq-20.yaml")); }

TEST(Sheet, ReadsHeadAndFloor) {
  const Sheet sheet = sample_sheet();
  EXPECT_EQ(sheet.name, "AQ-20");
  EXPECT_EQ(sheet.revision, 4);
  EXPECT_EQ(sheet.reason, "first production sheet with guarded saturation error");
  EXPECT_FALSE(sheet.for_model);
  EXPECT_EQ(sheet.retest, (Retest{1, 60.0}));
  EXPECT_EQ(sheet.stop_when, (StopWhen{4, 85.0, 50}));
  EXPECT_THAT(sheet.warnings, IsEmpty());
}

TEST(Sheet, ReadsLimitsInTheUnitOfTheCheck) {
  const Sheet sheet = sample_sheet();
  EXPECT_EQ(sheet.find("red_centroid")->limits, (Limits{655.0, 665.0}));
  EXPECT_EQ(sheet.find("dark_current")->limits, (Limits{std::nullopt, 5.0}));
  EXPECT_EQ(sheet.find("dark_current")->typical, 0.8);
  EXPECT_EQ(sheet.find("dark_current")->at_degC, 25.0);
  EXPECT_EQ(sheet.find("saturation_error_70")->expanded_uncertainty, 0.195);
  EXPECT_EQ(sheet.find("bin_mismatch")->watch_beyond, 1.4);
  EXPECT_EQ(sheet.find("bin_mismatch")->use, Use::watch);
  EXPECT_EQ(sheet.find("red_half_power_centre")->use, Use::record_only);
  EXPECT_TRUE(sheet.find("probe_present")->must_be_yes);
  EXPECT_EQ(sheet.find("infrared_drive"), nullptr);
}

TEST(Sheet, ScalesUnits) {
  const Sheet sheet = sheet_of(sample_with(8, "  dark_current: {upper: 0.005 uA, typical: 800 pA, U: 400 pA}"));
  const CheckRule& rule = *sheet.find("dark_current");
  EXPECT_EQ(rule.limits.upper, 5.0);
  EXPECT_EQ(rule.typical, 0.8);
  EXPECT_EQ(rule.expanded_uncertainty, 0.4);
}

TEST(Sheet, NominalAndToleranceAreFixedNumbers) {
  const CheckRule rule = *sample_sheet().find("red_drive");
  EXPECT_EQ(rule.limits, (Limits{19.6, 20.4}));  // exactly what a person computes by hand
  EXPECT_EQ(rule.expanded_uncertainty, 0.052);
  EXPECT_EQ(rule.nominal, (Nominal{20.0, 2.0, true}));
}

TEST(Sheet, ToleranceMayStandInTheUnitOfTheCheck) {
  const Sheet sheet = sheet_of(sample_with(7, "  red_drive: {nominal: 20 mA, tolerance: 400 uA, U: 52 uA}"));
  EXPECT_EQ(sheet.find("red_drive")->limits, (Limits{19.6, 20.4}));
  EXPECT_EQ(sheet.find("red_drive")->nominal, (Nominal{20.0, 0.4, false}));
}

TEST(Sheet, PercentOfACheckInPercentIsItsOwnUnit) {
  const Sheet sheet = sheet_of(sample_with(12, "  id_deviation: {nominal: 0 %, tolerance: 1.5 %, U: 0.16 %}"));
  EXPECT_EQ(sheet.find("id_deviation")->limits, (Limits{-1.5, 1.5}));
  EXPECT_EQ(sheet.find("id_deviation")->expanded_uncertainty, 0.16);
}

TEST(Sheet, BareNumbersForAChecksWithoutUnit) {
  const Sheet sheet = sheet_of(sample_with(12, "  cable_noise: {upper: 2e-4, typical: 4.5e-5, U: 1e-5}"));
  EXPECT_EQ(sheet.find("cable_noise")->limits.upper, 2e-4);
}

TEST(Sheet, ChecksStandInCatalogueOrder) {
  std::vector<int> places;
  for (const CheckRule& rule : sample_sheet().checks) places.push_back(check_index(rule.check));
  EXPECT_TRUE(std::is_sorted(places.begin(), places.end()));
  EXPECT_EQ(places.size(), 8u);
}

TEST(Sheet, ReadsBinsInRisingOrder) {
  auto lines = sample_lines();
  std::swap(lines[15], lines[16]);
  const Sheet sheet = sheet_of(joined(lines));
  ASSERT_TRUE(sheet.bins);
  EXPECT_EQ(sheet.bins->by, "red_centroid");
  ASSERT_EQ(sheet.bins->bins.size(), 2u);
  EXPECT_EQ(sheet.bins->bins[0], (Bin{"B1", 655.0, 660.0, 657.5, 10200.0}));
  EXPECT_EQ(sheet.bins->bins[1], (Bin{"B2", 660.0, 665.0, 662.5, 11800.0}));
}

TEST(Sheet, ReadsTheModelsDigest) {
  const std::string hex = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";
  const Sheet sheet = sheet_of("for model: sha256 " + hex + "\n" + joined(sample_lines()));
  ASSERT_TRUE(sheet.for_model);
  EXPECT_EQ(to_hex(*sheet.for_model), hex);
}

TEST(Sheet, AResistorOutsideE96IsAWarning) {
  const Sheet sheet =
      sheet_of(sample_with(17, "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 12 kohm}"));
  ASSERT_EQ(sheet.warnings.size(), 1u);
  EXPECT_EQ(sheet.warnings[0].id, "sheet_resistor_not_e96");
  EXPECT_EQ(sheet.warnings[0].where, "sample.yaml:17:70");
  EXPECT_THAT(sheet.warnings[0].what(), HasSubstr("12000 ohm"));
}

// Source: IEC 60063:2015, table of the E96 series.
TEST(ESeries, AgreesWithIec60063) {
  const auto table = reference::load("iec60063_e96.csv");
  std::vector<bool> is_value(1000, false);
  for (const double value : table.numbers("value")) is_value[static_cast<std::size_t>(value)] = true;
  for (int digits = 100; digits < 1000; ++digits)
    for (const double decade : {0.01, 1.0, 10.0, 1000.0}) {
      const double resistance_ohm = fixed_number(digits * decade);
      EXPECT_EQ(is_e96(resistance_ohm), is_value[static_cast<std::size_t>(digits)]) << resistance_ohm;
    }
  EXPECT_FALSE(is_e96(10250.0));
  EXPECT_FALSE(is_e96(0.0));
  EXPECT_FALSE(is_e96(-10200.0));
}

TEST(Sheet, TellsRoutineChecksThatItDoesNotName) {
  const std::vector<std::string> routine{"red_centroid", "infrared_centroid", "red_drive", "id_deviation"};
  const Problems faults = faults_against_routine(sample_sheet(), routine);
  ASSERT_EQ(faults.size(), 2u);
  EXPECT_EQ(faults[0].id, "sheet_lacks_check");
  EXPECT_EQ(faults[0].text(),
            "sample.yaml: the sheet does not name infrared_centroid, which the routine runs "
            "(add limits for it, or \"record only\")");
  EXPECT_THAT(faults[1].what(), HasSubstr("id_deviation"));
}

TEST(Sheet, MayNameMoreThanTheRoutineRuns) {
  const std::vector<std::string> routine{"red_centroid", "bin_mismatch"};
  EXPECT_THAT(faults_against_routine(sample_sheet(), routine), IsEmpty());
  EXPECT_THAT(judged_checks(sample_sheet(), routine), ElementsAre("red_centroid"));
}

TEST(Sheet, TellsBinsThatTheModelTellsDifferently) {
  const std::vector<ModelBin> same{{"B1", 657.5, 10200.0}, {"B2", 662.5, 11800.0}};
  EXPECT_THAT(faults_against_bins(sample_sheet(), same), IsEmpty());
  const std::vector<ModelBin> other{{"B1", 657.5, 10000.0}, {"B3", 662.5, 11800.0}};
  const Problems faults = faults_against_bins(sample_sheet(), other);
  ASSERT_EQ(faults.size(), 3u);
  EXPECT_EQ(faults[0].id, "sheet_bin_differs");
  EXPECT_EQ(faults[0].what(), "bin B1 is 657.5, 10200 ohm on the sheet and 657.5, 10000 ohm in the model");
  EXPECT_EQ(faults[1].id, "sheet_bin_only_here");
  EXPECT_EQ(faults[2].id, "sheet_bin_only_in_model");
}

TEST(DemoSheet, LoadsWithoutFaultOrWarning) {
  const Sheet sheet = demo_sheet();
  EXPECT_EQ(sheet.name, "AQ-20");
  EXPECT_THAT(sheet.warnings, IsEmpty());
  EXPECT_EQ(sheet.checks.size(), catalogue().size());  // it says something of every check
}

TEST(DemoSheet, UsesTheGuardsOfTheDemonstration) {
  const Sheet sheet = demo_sheet();
  for (const CheckRule& rule : sheet.checks) {
    const bool guarded = rule.check.starts_with("saturation_error") || rule.check == "secondary_emission";
    const bool half = rule.check.starts_with("ratio_deviation");
    const Guard wanted = guarded ? Guard{Guard::Kind::factor, 0.83} : half ? Guard{Guard::Kind::factor, 0.5} : Guard{};
    if (rule.use == Use::judged) EXPECT_EQ(rule.guard, wanted) << rule.check;
  }
}

TEST(DemoSheet, BinsFillTheRedWindow) {
  const Sheet sheet = demo_sheet();
  ASSERT_TRUE(sheet.bins);
  EXPECT_EQ(sheet.bins->bins.size(), 5u);
  EXPECT_EQ(sheet.bins->bins.front().lower, 655.0);
  EXPECT_EQ(sheet.bins->bins.back().upper, 665.0);
}

}  // namespace
}  // namespace probewright::limits
