#include <gtest/gtest.h>

#include "tests/trial/memory_ledger.h"

// One run from the scan to the verdict on disk.
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
  // Electrical twice, dark, red alone, both spectra, slots of each LED alone, ambient, closed path, three pulse trains.
  EXPECT_EQ(report.captures, 13);
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
