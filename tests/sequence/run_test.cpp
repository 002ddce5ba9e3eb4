#include <gtest/gtest.h>

#include "tests/sequence/memory_ledger.h"

// One run from the scan to the verdict on disk, and that a seed is all there is to it.
namespace probewright {
namespace {

using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

TEST(Run, AHealthyProbePassesAndIsOnDiskWhenTold) {
  MemoryLedger ledger;
  {
    Trial station{ledger.options(1)};
    ASSERT_FALSE(station.start_problem()) << station.start_problem()->text();
    std::int64_t told_at_entry = 0;
    station.on_event = [&](const sequence::LineEvent& event) {
      if (std::holds_alternative<sequence::RunEnded>(event)) told_at_entry = station.seal().entry;
    };
    const trial::Told told = station.test("AQ20-048-00001");
    ASSERT_TRUE(told.outcome) << (told.problem ? told.problem->text() : "hung");
    EXPECT_EQ(told.outcome->verdict, RunVerdict::pass) << told.outcome->cause_words;
    EXPECT_EQ(told.outcome->readings.size(), trial::demonstration().models.at("AQ-20").value.routine.size());
    EXPECT_EQ(told.outcome->closing_entry, told_at_entry) << "the verdict was told before its entry was on disk";
    EXPECT_EQ(station.bench().drive(1), emulated::AdapterDevice::Drive{}) << "an LED is still on";
    EXPECT_TRUE(station.finish());
  }
  const db::VerifyReport report = ledger.verify();
  EXPECT_TRUE(report.ok()) << report.first_fault->what;
  EXPECT_EQ(report.runs, 1);
  EXPECT_EQ(report.open_runs, 0);
  EXPECT_EQ(report.captures, 5);  // electrical, dark, two spectra, one pulse train
}

db::Seal seal_after(std::uint64_t seed) {
  MemoryLedger ledger;
  Trial station{ledger.options(seed)};
  station.test("AQ20-048-00001");
  station.test("AQ20-048-00002");
  EXPECT_TRUE(station.finish());
  return station.seal();
}

// The frame's first promise: a seed is the whole shift, to the last hash.
TEST(Run, OneSeedGivesOneSealAHundredTimes) {
  const db::Seal first = seal_after(7);
  EXPECT_GT(first.entry, 4);
  for (int i = 1; i < 100; ++i) ASSERT_EQ(seal_after(7), first) << "time " << i;
  EXPECT_NE(seal_after(8).hash, first.hash);
}

TEST(Run, TheSameSerialIsCountedAsAnotherTry) {
  MemoryLedger ledger;
  Trial station{ledger.options(1)};
  const auto first = station.test("AQ20-048-00003"), second = station.test("AQ20-048-00003");
  ASSERT_TRUE(first.outcome && second.outcome);
  EXPECT_NE(first.outcome->run, second.outcome->run);
}

}  // namespace
}  // namespace probewright
