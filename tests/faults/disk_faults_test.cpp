#include <gtest/gtest.h>

#include <iostream>
#include <map>

#include "db/queries/runs_of_serial.h"
#include "tests/trial/memory_ledger.h"

// The station dies, or its disk fails, at every point of two runs in turn. What must hold afterwards: whatever was told
// is on the disk with the same verdict; the chain agrees; what was open is closed at the next start by the rule; the
// station is ready, or says why not; both LEDs are off.
namespace probewright {
namespace {

using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

constexpr std::uint64_t seed = 5;
const std::array serials = {"AQ20-048-00001", "AQ20-048-00002"};

struct Ended {
  std::map<std::int64_t, RunVerdict> told;  ///< verdicts told, by run
  bool not_recorded = false;
  bool dark = true;
  bool ready_at_end = false;
  std::string words_at_end;
};

/// Two runs on this ledger, or as far as they go.
Ended two_runs(MemoryLedger& ledger) {
  Ended ended;
  Trial station{ledger.options(seed)};
  if (station.start_problem()) {
    ended.words_at_end = station.start_problem()->text();
    return ended;
  }
  for (const char* serial : serials) {
    if (station.line().views().front().state == sequence::NestState::not_ready && ended.not_recorded) break;
    const trial::Told told = station.test(serial);
    EXPECT_FALSE(told.hung && !ended.not_recorded) << "hung";
    if (told.outcome) ended.told[told.outcome->run] = told.outcome->verdict;
    ended.not_recorded |= told.recorded_trouble;
    ended.dark &= station.bench().drive(1) == emulated::AdapterDevice::Drive{};
    if (told.recorded_trouble) station.let_pass(std::chrono::seconds(1));
  }
  const auto view = station.line().views().front();
  ended.ready_at_end = view.state != sequence::NestState::not_ready;
  ended.words_at_end = view.words;
  EXPECT_TRUE(station.finish());
  return ended;
}

/// Holds the ledger that was left behind against what was told.
void expect_kept(std::unique_ptr<db::MemoryDisk> disk, const Ended& before) {
  MemoryLedger ledger{std::move(disk)};
  {
    trial::Options options = ledger.options(seed + 1);
    options.start.microseconds += 3'600'000'000;  // an hour later: a clock behind the last entry is another story
    Trial next{options};
    ASSERT_FALSE(next.start_problem()) << next.start_problem()->text();
    for (const auto& late : next.closed_late())
      EXPECT_FALSE(before.told.contains(late.run)) << "a verdict was told for a run that stood open on the disk";
    ASSERT_TRUE(next.reaches(sequence::NestState::empty));
    ASSERT_TRUE(next.test("AQ20-048-00003").outcome) << "the station does not go on";
    ASSERT_TRUE(next.finish());
  }
  const auto report = ledger.verify();
  ASSERT_TRUE(report.ok()) << report.first_fault->table << " " << report.first_fault->what;
  EXPECT_EQ(report.open_runs, 0);
  db::StoreOptions options = ledger.options(1).store;
  options.lease = options.create = false;
  SystemClock clock;
  auto store = db::Store::open(options, clock).value();
  db::Reader reader = store->reader();
  std::map<std::int64_t, std::string> kept;
  for (const char* serial : serials)
    for (const auto& run : db::runs_of_serial(reader, serial))
      kept[run.run.value] = run.closing ? run.closing->verdict : "open";
  for (const auto& [run, verdict] : before.told) {
    ASSERT_TRUE(kept.contains(run)) << "run " << run << " was told and is gone";
    EXPECT_EQ(kept.at(run), slug(verdict));
  }
}

db::DiskCounts operations_of_a_clean_pass() {
  MemoryLedger ledger;
  const Ended ended = two_runs(ledger);
  EXPECT_EQ(ended.told.size(), 2u);
  return ledger.disk().counts();
}

TEST(DiskFaults, DeathAtEveryOperationLosesNothingThatWasTold) {
  const std::int64_t operations = operations_of_a_clean_pass().operations();
  ASSERT_GT(operations, 20);
  for (std::int64_t at = 1; at <= operations; ++at) {
    SCOPED_TRACE("death at operation " + std::to_string(at));
    MemoryLedger ledger;
    db::DiskFaults faults;
    faults.die_at = at;
    ledger.disk().set_faults(faults);
    const Ended ended = two_runs(ledger);
    EXPECT_TRUE(ended.dark);
    // A death after the last commit is not noticed before the next one.
    EXPECT_TRUE(!ended.ready_at_end || ended.told.size() == serials.size());
    EXPECT_FALSE(ended.words_at_end.empty());
    expect_kept(ledger.disk().after_restart(), ended);  // the process was killed, the machine lives on
    if (HasFatalFailure()) return;
    expect_kept(ledger.disk().after_crash(static_cast<std::uint64_t>(at)), ended);  // the power went
    if (HasFatalFailure()) return;
  }
  std::cout << operations << " operations, death at each: process killed and power lost\n";
}

void fail_each(const char* what, std::int64_t calls, std::int64_t db::DiskFaults::*which) {
  for (const bool from_then_on : {false, true})
    for (std::int64_t at = 1; at <= calls; ++at) {
      SCOPED_TRACE(std::string{what} + " " + std::to_string(at) + (from_then_on ? " and all after it" : "") + " fails");
      MemoryLedger ledger;
      db::DiskFaults faults;
      faults.*which = at;
      faults.from_then_on = from_then_on;
      ledger.disk().set_faults(faults);
      const Ended ended = two_runs(ledger);
      EXPECT_TRUE(ended.dark);
      EXPECT_TRUE(ended.ready_at_end || !ended.words_at_end.empty());
      expect_kept(ledger.disk().after_restart(), ended);
      if (::testing::Test::HasFatalFailure()) return;
      expect_kept(ledger.disk().after_crash(static_cast<std::uint64_t>(at)), ended);
      if (::testing::Test::HasFatalFailure()) return;
    }
  std::cout << calls << " calls of " << what << ", each failing once and from then on\n";
}

TEST(DiskFaults, EachFailingWriteLosesNothingThatWasTold) {
  fail_each("write", operations_of_a_clean_pass().writes, &db::DiskFaults::fail_write);
}

TEST(DiskFaults, EachFailingSyncLosesNothingThatWasTold) {
  fail_each("sync", operations_of_a_clean_pass().syncs, &db::DiskFaults::fail_sync);
}

TEST(DiskFaults, EachShortWriteLosesNothingThatWasTold) {
  fail_each("short write", operations_of_a_clean_pass().writes, &db::DiskFaults::short_write);
}

TEST(DiskFaults, AFullDiskMakesTheStationNotReadyInWords) {
  MemoryLedger ledger;
  db::DiskFaults faults;
  faults.full_at = 200'000;
  ledger.disk().set_faults(faults);
  const Ended ended = two_runs(ledger);
  EXPECT_FALSE(ended.ready_at_end);
  EXPECT_NE(ended.words_at_end.find("full"), std::string::npos) << ended.words_at_end;
  EXPECT_TRUE(ended.dark);
  expect_kept(ledger.disk().after_restart(), ended);
}

}  // namespace
}  // namespace probewright
