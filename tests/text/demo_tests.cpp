#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "station/text/berth_lines.h"
#include "station/text/demo_folder.h"
#include "station/text/demo_summary.h"

namespace probewright::text {
namespace {

using sequence::RunVerdict;
using testing::HasSubstr;
using testing::Not;

TEST(StationText, IsReadBackAsTheSame) {
  sequence::StationFile station{
      "Quay-1", "Europe/Amsterdam", true, 12.5, 921600, "/tmp/it's here/ports", "/tmp/it's here: #1/ledger.db", {}};
  station.nests.push_back({1, {"nest1-phantom", "PHC-2026-0101"}, {"nest1-adapter", "ADC-2026-0101"}});
  station.nests.push_back({16, {"nest16-phantom", "PHC-2026-0116"}, {"nest16-adapter", "ADC-2026-0116"}});
  const auto read = sequence::read_station_file(station_text(station), "made.yaml");
  ASSERT_TRUE(read) << read.error().front().text();
  EXPECT_EQ(read->station, station.station);
  EXPECT_EQ(read->zone, station.zone);
  EXPECT_EQ(read->emulated, true);
  EXPECT_EQ(read->speed, 12.5);
  EXPECT_EQ(read->baud, 921600u);
  EXPECT_EQ(read->ports_in, station.ports_in);
  EXPECT_EQ(read->ledger, station.ledger);
  ASSERT_EQ(read->nests.size(), 2u);
  EXPECT_EQ(read->nests[1].nest, 16);
  EXPECT_EQ(read->nests[1].adapter.port, "nest16-adapter");
  EXPECT_EQ(read->nests[1].phantom.certificate, "PHC-2026-0116");
}

/// Four probes: two with a fault, of which one was found; a healthy one that passed after a void, one left out.
class Summary : public ::testing::Test {
 protected:
  Summary() {
    parts.lot_name = "AQ20-W48-07";
    parts.lot = {{"S1", "AQ-20", "id_wrong", 1.0},
                 {"S2", "AQ-20", "shield_open", 1.0},
                 {"S3", "AQ-20", "", 1.0},
                 {"S4", "AQ-20", "", 1.0}};
    add(0, RunVerdict::fail, {"id_deviation"});
    add(1, RunVerdict::pass, {});
    add(2, RunVerdict::void_run, {});
    add(2, RunVerdict::pass, {});
    result.runs[0].likely_cause = "ID resistor of another value";
    result.work.left_out = {{3, "S4 does not belong to lot X (put it back)"}};
    result.work.blunders = {{sequence::production::Mistake::lid_opened, 2, 1, true, false, {"the lid was opened"}}};
    result.folder.path = "/tmp/it's here";
    result.seal_entry = 9;
    result.seal = std::string(64, 'a');
  }
  void add(std::size_t piece, RunVerdict verdict, std::vector<std::string> failing) {
    DemoRun run;
    run.piece = piece;
    run.outcome.serial = parts.lot[piece].serial;
    run.outcome.nest = 1;
    run.outcome.verdict = verdict;
    run.outcome.failing = std::move(failing);
    run.outcome.cycle = std::chrono::milliseconds(150);
    result.runs.push_back(std::move(run));
  }
  DemoOptions options;
  DemoParts parts;
  DemoResult result;
};

TEST_F(Summary, TellsYieldFaultsFoundMistakesAndCounts) {
  options.speed = 20.0;
  const std::string text = demo_text(options, parts, result);
  EXPECT_THAT(text, HasSubstr("first-pass yield  66.7 % (2 of 3)"));
  EXPECT_THAT(text, HasSubstr("a run 3.00 s of device time"));
  EXPECT_THAT(text, HasSubstr("2 of the tested probes had a fault planted in them, 1 of these failed; 0 of 1 healthy"));
  EXPECT_THAT(text, HasSubstr("ID resistor; likely cause: ID resistor of another value"));
  EXPECT_THAT(text, HasSubstr("S3 lid_opened: the lid was opened"));
  EXPECT_THAT(text, HasSubstr("1 not tested, S4: it does not belong to lot X"));
  EXPECT_THAT(text, HasSubstr("ledger verify '/tmp/it'\\''s here/ledger.db' --entry 9 --seal aaaa"));
  EXPECT_TRUE(text.ends_with("\n2 passed, 1 failed, 1 void\n")) << text;
}

TEST_F(Summary, AnEmptyOneDividesByNothing) {
  result.runs.clear();
  result.work = {};
  const std::string text = demo_text(options, parts, result);
  EXPECT_THAT(text, HasSubstr("first-pass yield  none"));
  EXPECT_THAT(text, Not(HasSubstr("nan")));
  EXPECT_TRUE(text.ends_with("0 passed, 0 failed, 0 void\n"));
}

TEST(BerthLine, SaysWhatTheNestDoesInOneLine) {
  sequence::BerthView berth;
  berth.nest = {2, sequence::NestState::running, "testing S1", "S1", "red spectrum", 4, 8};
  berth.progress = 0.5;
  EXPECT_EQ(berth_line(berth), "nest 2  testing    S1                =====.....  4/8 red spectrum");
  berth.nest = {2, sequence::NestState::empty, "scan a probe", "", "", 0, 0};
  EXPECT_EQ(berth_line(berth), "nest 2  empty      scan a probe");
  berth.last = sequence::LastRun{};
  berth.last->serial = "S1";
  berth.last->verdict = RunVerdict::fail;
  berth.last->what_to_do = "put it on the red tray";
  EXPECT_THAT(berth_line(berth), HasSubstr("FAIL  put it on the red tray"));
  berth.last->recorded = false;
  EXPECT_THAT(berth_line(berth), HasSubstr("NOT ON RECORD"));
}

}  // namespace
}  // namespace probewright::text
