#include <gtest/gtest.h>

#include <iostream>

#include "tests/faults/failing_port.h"
#include "tests/trial/memory_ledger.h"

// Every opening, read and write of the ports fails in turn, once or from then on, at once or as a deadline that passes.
// What must hold each time: the run ends, right or void with its cause; both LEDs are off; the chain agrees; and when
// the ports work again, so does the station.
namespace probewright {
namespace {

using faults::PortFailure;
using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

constexpr std::uint64_t seed = 9;
constexpr const char* serial = "AQ20-048-00001";
constexpr const char* next_serial = "AQ20-048-00002";

struct Counts {
  int passed = 0, voided = 0, not_tested = 0;
};

trial::Options options_of(const MemoryLedger& ledger, const std::shared_ptr<PortFailure>& failure) {
  trial::Options options = ledger.options(seed);
  options.between = [failure](sequence::PortOpener ports) { return faults::failing_ports(std::move(ports), failure); };
  return options;
}

std::int64_t calls_of_a_clean_pass() {
  MemoryLedger ledger;
  const auto failure = std::make_shared<PortFailure>();
  Trial station{options_of(ledger, failure)};
  EXPECT_EQ(station.test(serial).outcome.value().verdict, RunVerdict::pass);
  const std::int64_t calls = failure->calls;
  EXPECT_TRUE(station.finish());
  return calls;
}

void expect_dark(Trial& station) {
  if (station.bench().drive(1) == emulated::AdapterDevice::Drive{}) return;
  station.let_pass(std::chrono::milliseconds(2100));  // the adapter does it by itself
  EXPECT_EQ(station.bench().drive(1), emulated::AdapterDevice::Drive{});
}

void expect_end(Trial& station, const trial::Told& told, Counts& counts) {
  if (!told.outcome) {
    ++counts.not_tested;
    EXPECT_TRUE(told.problem || told.hung);
    EXPECT_FALSE(station.line().views().front().words.empty());
    return;
  }
  EXPECT_NE(told.outcome->verdict, RunVerdict::fail) << ::testing::PrintToString(told.outcome->failing);
  if (told.outcome->verdict == RunVerdict::pass) {
    ++counts.passed;
  } else {
    ++counts.voided;
    EXPECT_FALSE(told.outcome->cause_words.empty());
  }
}

void try_failure(PortFailure plan, Counts& counts) {
  SCOPED_TRACE("call " + std::to_string(plan.at) + (plan.from_then_on ? " and all after it" : "") +
               (plan.how == PortFailure::How::lost ? " lost" : " late"));
  MemoryLedger ledger;
  {
    const auto failure = std::make_shared<PortFailure>(plan);
    Trial station{options_of(ledger, failure)};
    const trial::Told told = station.test(serial);
    expect_end(station, told, counts);
    expect_dark(station);
    failure->at = 0;
    ASSERT_TRUE(station.reaches(sequence::NestState::empty)) << station.line().views().front().words;
    const trial::Told next = station.test(next_serial);
    ASSERT_TRUE(next.outcome);
    EXPECT_EQ(next.outcome->verdict, RunVerdict::pass) << next.outcome->cause_words;
    ASSERT_TRUE(station.finish());
  }
  const auto report = ledger.verify();
  ASSERT_TRUE(report.ok()) << report.first_fault->what;
  EXPECT_EQ(report.open_runs, 0);
}

/// All calls where they are few, else `most` of them, evenly.
void fail_each(PortFailure::How how, bool from_then_on, std::int64_t most) {
  const std::int64_t calls = calls_of_a_clean_pass();
  ASSERT_GT(calls, 100);
  const std::int64_t tried = std::min(calls, most);
  Counts counts;
  for (std::int64_t i = 0; i < tried; ++i) {
    PortFailure plan;
    plan.at = 1 + i * calls / tried;
    plan.from_then_on = from_then_on;
    plan.how = how;
    try_failure(plan, counts);
    if (::testing::Test::HasFatalFailure()) return;
  }
  std::cout << calls << " calls of ports, " << tried << " of them failed: " << counts.passed << " passed, "
            << counts.voided << " void, " << counts.not_tested << " not tested\n";
  EXPECT_EQ(counts.passed + counts.voided + counts.not_tested, tried);
}

TEST(PortFaults, EachCallLosesThePortOnce) { fail_each(PortFailure::How::lost, false, 120); }
TEST(PortFaults, EachCallLosesThePortFromThenOn) { fail_each(PortFailure::How::lost, true, 60); }
TEST(PortFaults, EachCallIsLateOnce) { fail_each(PortFailure::How::late, false, 120); }
TEST(PortFaults, EachCallIsLateFromThenOn) { fail_each(PortFailure::How::late, true, 60); }

}  // namespace
}  // namespace probewright
