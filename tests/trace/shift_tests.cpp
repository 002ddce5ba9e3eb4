#include "station/trace/shift.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "db/queries/seal.h"
#include "tests/made/ledger.h"

namespace probewright::trace {
namespace {

using made::centroid;
using made::dark_current;
using testing::ElementsAre;

/// The early shift of 2026-12-01, 06:00 to 14:00 in Amsterdam (05:00 to 13:00 UTC), written run by run; each test
/// counts it by hand. The day before, 00003 had failed.
class ShiftTest : public testing::Test {
 protected:
  ShiftTest() {
    at("2026-11-30T10:00:00Z");
    run({.serial = "AQ20-048-00003", .verdict = "fail", .readings = {dark_current(6.0)}});
    at("2026-12-01T05:00:00Z");
    ledger.entry("sign_in", "Imre Vasko", Body::Object{{"person", "Imre Vasko"}, {"role", "operator"}});
    ledger.entry("lot_opened", "Imre Vasko",
                 Body::Object{{"first_serial", "AQ20-048-00001"},
                              {"last_serial", "AQ20-048-00050"},
                              {"lot", "AQ20-W48-07"},
                              {"model", "AQ-20"},
                              {"quantity", 50},
                              {"sheet", "AQ-20 revision 4"}});
    at("2026-12-01T05:10:00Z");  // 06:10 in the plant
    run({.serial = "AQ20-048-00001", .cycle_s = 24.0, .readings = {centroid(660.0), dark_current(0.8)}});
    run({.serial = "AQ20-048-00002",
         .verdict = "fail",
         .nest = 2,
         .likely_cause = "leaky_detector",
         .likely_cause_words = "a leaky detector",
         .rework = "RW-05 clean the window",
         .cycle_s = 26.0,
         .readings = {centroid(661.0), dark_current(6.0)}});
    at("2026-12-01T05:20:00Z");
    run({.serial = "AQ20-048-00002", .nest = 2, .cycle_s = 25.0, .readings = {centroid(661.0), dark_current(4.4)}});
    run({.serial = "AQ20-048-00003", .cycle_s = 22.0, .readings = {centroid(662.0), dark_current(4.0)}});
    at("2026-12-01T07:05:00Z");  // 08:05: nothing ended from 07:00 to 08:00
    run({.serial = "AQ20-048-00004", .verdict = "void", .nest = 2, .cycle_s = 3.0, .readings = {}});
    run({.serial = "AQ20-048-00005",
         .verdict = "fail",
         .likely_cause = "soiled_window",
         .likely_cause_words = "a soiled window",
         .readings = {centroid(670.0), dark_current(7.0)}});
    run({.serial = "AQ20-048-00006",
         .verdict = "fail",
         .likely_cause = "leaky_detector",
         .likely_cause_words = "a leaky detector",
         .readings = {centroid(660.0), dark_current(9.0)}});
    run({.serial = "AQ20-048-00006", .verdict = "void", .readings = {}});
    run({.serial = "AQ20-REF-1", .purpose = "reference", .lot = "", .operator_name = "Dalia Oduya"});
    run({.serial = "AQ20-CHA-1",
         .verdict = "fail",
         .purpose = "challenge",
         .lot = "",
         .operator_name = "Dalia Oduya",
         .readings = {dark_current(9.0)}});
    open_ = run({.serial = "AQ20-048-00007", .verdict = ""});
    at("2026-12-01T13:00:00Z");  // the late shift begins
    ledger.close(open_, {.verdict = "void"});
    run({.serial = "AQ20-048-00001", .verdict = "fail", .readings = {dark_current(9.0)}});
    ledger.entry("lot_closed", "Maren Quill", Body::Object{{"lot", "AQ20-W48-07"}});
  }

  void at(std::string_view utc) { ledger.clock().put(utc); }
  db::RunId run(const made::Run& wanted) { return ledger.run(wanted); }
  ShiftFacts facts(std::string_view from, std::string_view to, const std::string& lot = "") {
    auto reader = ledger.reader();
    ShiftQuestion question;
    question.period = Period{parse_utc(from).value(), parse_utc(to).value()};
    question.lot = lot;
    question.zone = Zone::read("Europe/Amsterdam").value();
    return shift_facts(reader, question);
  }
  ShiftFacts early() { return facts("2026-12-01T05:00:00Z", "2026-12-01T13:00:00Z"); }

  made::Folder folder;
  made::Ledger ledger{folder.file("ledger.db")};
  db::RunId open_;
};

// 00001 passed; 00002 failed, then passed; 00003 passed, but had failed the day before; 00004 void; 00005 failed; 00006
// failed, and the void after it changes nothing. Passed 1, 2, 3; first time only 1.
TEST_F(ShiftTest, ProbesAreCountedByTheirLastVerdict) {
  EXPECT_EQ(early().probes, (ShiftCounts{3, 2, 1, 1}));
  EXPECT_EQ(early().probes.tested(), 6);
  EXPECT_DOUBLE_EQ(first_pass_yield(early().probes).value(), 1.0 / 5.0);
}

TEST_F(ShiftTest, RunsOfProductionAreToldApartFromOthers) {
  const ShiftFacts told = early();
  EXPECT_EQ(told.runs, (RunCounts{3, 3, 2}));
  EXPECT_EQ(told.sent_to_rework, 1);
  ASSERT_EQ(told.other_purposes.size(), 2u);
  EXPECT_EQ(told.other_purposes[0].purpose, "challenge");
  EXPECT_EQ(told.other_purposes[0].runs, (RunCounts{0, 1, 0}));
  EXPECT_EQ(told.other_purposes[1].purpose, "reference");
  EXPECT_EQ(told.other_purposes[1].runs, (RunCounts{1, 0, 0}));
}

// A run belongs where it ended: the one that was open at 13:00 is void in the late shift.
TEST_F(ShiftTest, ARunBelongsToTheShiftInWhichItEnded) {
  EXPECT_EQ(early().left_open, 1);
  const ShiftFacts late = facts("2026-12-01T13:00:00Z", "2026-12-01T21:00:00Z");
  EXPECT_EQ(late.left_open, 0);
  EXPECT_EQ(late.runs, (RunCounts{0, 1, 1}));
  EXPECT_EQ(late.probes, (ShiftCounts{0, 1, 1, 1})) << "00001 had passed at first, and failed now";
}

// Dark current failed 00002, 00005 and 00006: twice a leaky detector, once a soiled window.
TEST_F(ShiftTest, FailingChecksComeWithTheirCommonestCause) {
  const ShiftFacts told = early();
  ASSERT_EQ(told.failing.size(), 2u);
  EXPECT_EQ(told.failing[0].check, "dark_current");
  EXPECT_EQ(told.failing[0].runs, 3);
  EXPECT_EQ(told.failing[0].likely_cause, "leaky_detector");
  EXPECT_EQ(told.failing[0].likely_cause_words, "a leaky detector");
  EXPECT_EQ(told.failing[0].runs_with_that_cause, 2);
  EXPECT_EQ(told.failing[1].check, "red_centroid");
  EXPECT_EQ(told.failing[1].runs, 1);
  EXPECT_EQ(told.failing[1].likely_cause, "soiled_window");
}

// Nest 1: 24 s and 22 s; the runs of 00005 and 00006 tell no cycle. Nest 2: 26 s and 25 s; the void's 3 s is no cycle.
TEST_F(ShiftTest, NestsHaveTheirRunsAndCycles) {
  const ShiftFacts told = early();
  ASSERT_EQ(told.nests.size(), 2u);
  EXPECT_EQ(told.nests[0].nest, 1);
  EXPECT_EQ(told.nests[0].runs, (RunCounts{2, 2, 1}));
  EXPECT_DOUBLE_EQ(*told.nests[0].mean_cycle_s, 23.0);
  EXPECT_DOUBLE_EQ(*told.nests[0].longest_cycle_s, 24.0);
  EXPECT_EQ(told.nests[0].commonest_failing_check, "dark_current");
  EXPECT_EQ(told.nests[1].runs, (RunCounts{1, 1, 1}));
  EXPECT_DOUBLE_EQ(*told.nests[1].mean_cycle_s, 25.5);
}

TEST_F(ShiftTest, PeopleAreThoseWhoSignedInOrOperated) {
  const ShiftFacts told = early();
  ASSERT_EQ(told.people.size(), 2u);
  EXPECT_EQ(told.people[0].name, "Imre Vasko");
  EXPECT_EQ(told.people[0].role, "operator");
  EXPECT_EQ(told.people[0].runs, 8);
  EXPECT_EQ(told.people[1].name, "Dalia Oduya");
  EXPECT_EQ(told.people[1].role, "") << "she never signed in";
  EXPECT_EQ(told.people[1].runs, 2);
  const ShiftFacts late = facts("2026-12-01T13:00:00Z", "2026-12-01T21:00:00Z");
  ASSERT_EQ(late.people.size(), 1u);
  EXPECT_EQ(late.people[0].role, "operator") << "from the sign-in of the shift before";
}

TEST_F(ShiftTest, LotsComeWithSheetQuantityAndState) {
  const ShiftFacts told = early();
  ASSERT_EQ(told.lots.size(), 1u);
  EXPECT_EQ(told.lots[0].lot, "AQ20-W48-07");
  EXPECT_EQ(told.lots[0].model, "AQ-20");
  EXPECT_EQ(told.lots[0].sheet_revisions, "4");
  EXPECT_EQ(told.lots[0].quantity, 50);
  EXPECT_TRUE(told.lots[0].closed);
  EXPECT_EQ(told.lots[0].runs, (RunCounts{3, 3, 2}));
  EXPECT_EQ(facts("2026-12-01T05:00:00Z", "2026-12-01T13:00:00Z", "AQ20-W48-08").runs.all(), 0);
  EXPECT_EQ(facts("2026-12-01T05:00:00Z", "2026-12-01T13:00:00Z", "AQ20-W48-07").runs, told.runs);
}

TEST_F(ShiftTest, HoursAreThePlantsAndNoneIsLeftOut) {
  std::vector<std::pair<std::string, int>> hours;
  for (const Stretch& stretch : early().stretches) hours.emplace_back(stretch.begin, stretch.runs.all());
  EXPECT_THAT(hours, ElementsAre(std::pair<std::string, int>{"2026-12-01 06:00", 4},
                                 std::pair<std::string, int>{"2026-12-01 07:00", 0},
                                 std::pair<std::string, int>{"2026-12-01 08:00", 4}));
}

TEST_F(ShiftTest, TwoDaysAndMoreAreCountedByTheDay) {
  at("2026-12-04T10:00:00Z");
  run({.serial = "AQ20-048-00020"});
  std::vector<std::string> days;
  for (const Stretch& stretch : facts("2026-11-30T00:00:00Z", "2026-12-05T00:00:00Z").stretches)
    days.push_back(stretch.begin);
  EXPECT_THAT(days, ElementsAre("2026-11-30", "2026-12-01", "2026-12-02", "2026-12-03", "2026-12-04"));
}

// Margins of dark current, by (4.8 - x) / 4: 1, -0.3, 0.1, 0.2, -0.55, -1.05; six of them, so the smallest is the low
// one. Of the centroid, by 1 - |x - 660| / 4: 1, 0.75, 0.75, 0.5, -1.5, 1.
TEST_F(ShiftTest, SeriesComeNearestToTheirLimitsFirst) {
  const ShiftFacts told = early();
  ASSERT_EQ(told.series.size(), 2u);
  EXPECT_EQ(told.series[0].check, "red_centroid");
  EXPECT_NEAR(told.series[0].low_margin, -1.5, 1e-12);
  EXPECT_EQ(told.series[1].check, "dark_current");
  EXPECT_NEAR(told.series[1].low_margin, -1.05, 1e-12);
  EXPECT_THAT(told.series[1].values, ElementsAre(0.8, 6.0, 4.4, 4.0, 7.0, 9.0));
  EXPECT_EQ(told.series[1].upper, 4.8);
  EXPECT_EQ(told.series[1].lower, std::nullopt);
  EXPECT_FALSE(told.series[1].limits_changed);
}

TEST_F(ShiftTest, LimitsThatChangeAreNoticed) {
  at("2026-12-02T10:00:00Z");
  db::ReadingRow other = dark_current(1.0);
  other.acceptance_upper = 4.6;
  run({.serial = "AQ20-048-00030", .readings = {dark_current(1.0)}});
  run({.serial = "AQ20-048-00031", .readings = {other}});
  const ShiftFacts told = facts("2026-12-02T00:00:00Z", "2026-12-03T00:00:00Z");
  ASSERT_EQ(told.series.size(), 1u);
  EXPECT_TRUE(told.series[0].limits_changed);
  EXPECT_EQ(told.series[0].upper, 4.6);
}

// Ten margins 0.1 ... 1.0 and one wild probe: a tenth of 11 runs is one, so the second smallest.
TEST_F(ShiftTest, OneWildProbeDoesNotMakeACheckNear) {
  at("2026-12-02T10:00:00Z");
  for (int i = 1; i <= 10; ++i)
    run({.serial = "AQ20-049-0000" + std::to_string(i), .readings = {dark_current(4.8 - 0.4 * i)}});
  run({.serial = "AQ20-049-00011", .verdict = "fail", .readings = {dark_current(99.0)}});
  EXPECT_NEAR(facts("2026-12-02T00:00:00Z", "2026-12-03T00:00:00Z").series.at(0).low_margin, 0.1, 1e-12);
}

TEST_F(ShiftTest, TheSealIsThatOfTheWholeLedger) {
  auto reader = ledger.reader();
  EXPECT_EQ(early().seal, db::newest_seal(reader));
  EXPECT_EQ(early().station, "Quay-1");
  EXPECT_TRUE(early().emulated);
}

TEST_F(ShiftTest, AShiftWithoutRunsIsEmpty) {
  const ShiftFacts told = facts("2026-12-05T05:00:00Z", "2026-12-05T13:00:00Z");
  EXPECT_EQ(told.probes, ShiftCounts{});
  EXPECT_EQ(first_pass_yield(told.probes), std::nullopt);
  EXPECT_TRUE(told.nests.empty() && told.people.empty() && told.lots.empty() && told.series.empty());
  EXPECT_TRUE(told.stretches.empty());
}

TEST_F(ShiftTest, EntriesCanBeAskedForByNumber) {
  auto reader = ledger.reader();
  ShiftQuestion question;
  const ShiftFacts whole = shift_facts(reader, question);
  EXPECT_EQ(whole.runs, (RunCounts{3, 5, 3}));
  EXPECT_EQ(whole.entries, (db::EntryRange{1, whole.seal.entry}));
  question.entries = db::EntryRange{early().entries};
  EXPECT_EQ(shift_facts(reader, question).runs, early().runs);
  question.entries = db::EntryRange{1, 1};
  EXPECT_EQ(shift_facts(reader, question).runs.all(), 0);
}

// A clock that was set back by 40 minutes: the second run is told as before the first, and both are found.
TEST_F(ShiftTest, AClockThatWasSetBackLosesNoRun) {
  at("2026-12-03T10:00:00Z");
  run({.serial = "AQ20-050-00001"});
  at("2026-12-03T09:20:00Z");
  run({.serial = "AQ20-050-00002"});
  at("2026-12-03T11:00:00Z");
  run({.serial = "AQ20-050-00003"});
  EXPECT_EQ(facts("2026-12-03T09:15:00Z", "2026-12-03T09:45:00Z").runs.all(), 1);
  EXPECT_EQ(facts("2026-12-03T09:45:00Z", "2026-12-03T10:15:00Z").runs.all(), 1);
  EXPECT_EQ(facts("2026-12-03T09:15:00Z", "2026-12-03T10:15:00Z").runs.all(), 2);
}

}  // namespace
}  // namespace probewright::trace
