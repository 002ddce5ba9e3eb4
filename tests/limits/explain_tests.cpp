#include "limits/explain.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "limits/compare.h"
#include "sample_sheet.h"

namespace probewright::limits {
namespace {

using ::testing::ElementsAre;
using ::testing::EndsWith;
using ::testing::HasSubstr;

std::string words_for(const char* check) { return explain(*sample_sheet().find(check)).words; }

TEST(Explain, SaysEachCheckInWords) {
  EXPECT_EQ(words_for("red_centroid"),
            "judged, 655 to 665 nm; U 0.33 nm, no guard band; accepted 655 to 665 nm, where at least 50.0 % conform");
  EXPECT_EQ(words_for("saturation_error_70"),
            "judged, -1 to 1 points; U 0.195 points, guard 0.83 x U; accepted -0.83815 to 0.83815 points, where at "
            "least 95.2 % conform");
  EXPECT_EQ(words_for("dark_current"),
            "judged, up to 5 nA; U 0.4 nA, no guard band; accepted up to 5 nA, where at least 50.0 % conform; typical "
            "0.8 nA; at 25 degC");
  EXPECT_EQ(words_for("bin_mismatch"), "watched, alert when further from 0 than 1.4 nm");
  EXPECT_EQ(words_for("red_half_power_centre"), "record only");
  EXPECT_EQ(words_for("probe_present"), "judged, must be yes");
  EXPECT_THAT(words_for("secondary_emission"), HasSubstr("for a risk of 5 %"));
}

TEST(Explain, AUsableSheetEndsWithNoFault) {
  const SheetReport report = explain(joined(sample_lines()), "sample.yaml");
  ASSERT_TRUE(report.usable());
  EXPECT_THAT(
      report.notes,
      ElementsAre("bins by red_centroid: B1 655 to 660 nm (10200 ohm) B2 660 to 665 nm (11800 ohm)",
                  "1 retest after 60 s", "a nest stops at 4 fails in a row or a yield below 85 % of the last 50"));
  const std::string text = to_text(report);
  EXPECT_THAT(text, ::testing::StartsWith("AQ-20 revision 4: first production sheet"));
  EXPECT_THAT(text, EndsWith("sample.yaml: 8 checks, no fault\n"));
}

TEST(Explain, FaultsArePrintedOneALine) {
  const SheetReport report = explain(sample_with(11, "  red_half_power_centre: record onyl"), "sample.yaml");
  EXPECT_FALSE(report.usable());
  EXPECT_FALSE(report.sheet);
  EXPECT_EQ(to_text(report),
            "sample.yaml:11:26: red_half_power_centre: \"record onyl\" means nothing here (did you mean \"record "
            "only\"?)\nsample.yaml: 1 fault, the sheet cannot be used\n");
}

TEST(Explain, WarningsDoNotRefuseTheSheet) {
  const SheetReport report = explain(
      sample_with(17, "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 12 kohm}"), "sample.yaml");
  EXPECT_TRUE(report.usable());
  EXPECT_THAT(to_text(report),
              HasSubstr("note: sample.yaml:17:70: bin B2: 12000 ohm is not a value of the E96 series"));
}

std::vector<std::string> changes(const std::string& after) {
  std::vector<std::string> lines;
  for (const Change& c : compare(sample_sheet(), sheet_of(after)).changes)
    lines.push_back(c.subject + ", " + c.what + ": " + c.before + " -> " + c.after + ", " + std::string{words(c.move)});
  return lines;
}

TEST(Compare, TheSameSheetHasNoDifference) {
  EXPECT_THAT(changes(joined(sample_lines())), ::testing::IsEmpty());
  EXPECT_EQ(to_text(compare(sample_sheet(), sample_sheet())),
            "AQ-20 revision 4 to AQ-20 revision 4\n  no difference\n");
}

TEST(Compare, SaysWhichWayALimitMoves) {
  EXPECT_THAT(changes(sample_with(8, "  dark_current: {upper: 4.0 nA, typical: 0.8 nA, U: 0.4 nA, at: 25 degC}")),
              ElementsAre("dark_current, upper limit: 5 nA -> 4 nA, tighter",
                          "dark_current, upper acceptance limit: 5 nA -> 4 nA, tighter"));
  EXPECT_THAT(changes(sample_with(7, "  red_drive: {nominal: 20 mA, tolerance: 3 %, U: 0.26 %}")),
              ElementsAre("red_drive, lower limit: 19.6 mA -> 19.4 mA, looser",
                          "red_drive, upper limit: 20.4 mA -> 20.6 mA, looser",
                          "red_drive, lower acceptance limit: 19.6 mA -> 19.4 mA, looser",
                          "red_drive, upper acceptance limit: 20.4 mA -> 20.6 mA, looser"));
}

TEST(Compare, ASmallerGuardIsLooserThroughItsAcceptanceLimits) {
  EXPECT_THAT(changes(sample_with(
                  9, "  saturation_error_70: {lower: -1.0 points, upper: 1.0 points, U: 0.195 points, guard: 0.5}")),
              ElementsAre("saturation_error_70, guard: 0.83 x U -> 0.5 x U, judges as before",
                          "saturation_error_70, lower acceptance limit: -0.83815 points -> -0.9025 points, looser",
                          "saturation_error_70, upper acceptance limit: 0.83815 points -> 0.9025 points, looser"));
}

TEST(Compare, ALargerDeclaredUncertaintyIsLooserWithoutGuard) {
  EXPECT_THAT(changes(sample_with(8, "  dark_current: {upper: 5.0 nA, typical: 0.8 nA, U: 0.6 nA, at: 25 degC}")),
              ElementsAre("dark_current, U: 0.4 nA -> 0.6 nA, looser"));
}

TEST(Compare, ChecksThatComeGoOrChangeTheirUse) {
  EXPECT_THAT(changes(sample_with(8, "  dark_current: record only")),
              ElementsAre("dark_current, use: judged -> record only, looser"));
  EXPECT_THAT(changes(sample_with(11, "  red_peak: {lower: 600 nm, upper: 700 nm, U: 1 nm}")),
              ElementsAre("red_peak, use: not named -> judged, tighter",
                          "red_half_power_centre, use: record only -> not named, judges as before"));
}

TEST(Compare, BinsRetestAndStopRule) {
  EXPECT_THAT(changes(sample_with(17, "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662 nm, id resistor: 12.1 kohm}")),
              ElementsAre("bin B2, bin: 660 to 665 nm, nominal 662.5 nm, 11800 ohm -> 660 to 665 nm, nominal 662 nm, "
                          "12100 ohm, moved"));
  EXPECT_THAT(changes(sample_with(18, "retest: {tries: 2, after: 90 s}")),
              ElementsAre("retest, tries: 1 -> 2, looser", "retest, rest: 60 s -> 90 s, tighter"));
  EXPECT_THAT(changes(sample_with(19, "stop when: {yield below: 80 % of last 50}")),
              ElementsAre("stop when, fails in a row: 4 -> none, looser",
                          "stop when, yield below: 85 % of last 50 -> 80 % of last 50, looser"));
}

TEST(Compare, CountsAtTheEnd) {
  const std::string text =
      to_text(compare(sample_sheet(), sheet_of(sample_with(18, "retest: {tries: 2, after: 90 s}"))));
  EXPECT_THAT(text, EndsWith("1 tighter, 1 looser, 0 moved, 0 that judge as before\n"));
}

}  // namespace
}  // namespace probewright::limits
