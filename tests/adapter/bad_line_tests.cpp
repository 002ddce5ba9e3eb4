#include <gtest/gtest.h>

#include "drivers/adapter/driver.h"
#include "tests/adapter/adapter_bench.h"

// One fault on the line, at every byte of a session in turn: the driver gets everything right in the end.
namespace {

using namespace probewright;
using adapter::Led;
namespace asio = boost::asio;

struct Outcome {
  adapter::ForwardVoltage voltage;
  adapter::DarkCurrent dark;
  adapter::Capture capture;
  bool off = false;
};

asio::awaitable<void> session(adapter::Driver& driver, Outcome& outcome) {
  co_await driver.connect();
  outcome.dark = co_await driver.dark_current(5000, 20, adapter::Input::connected);
  co_await driver.drive({20000, 20000});
  outcome.voltage = co_await driver.forward_voltage(Led::red);
  outcome.capture = co_await driver.capture(64);
  outcome.off = co_await driver.drive_off();
}

void expect_right(const Outcome& outcome, const AdapterBench& bench) {
  EXPECT_EQ(outcome.dark.current_pA, 812);
  EXPECT_EQ(outcome.voltage.voltage_uV, 1'951'000);
  ASSERT_EQ(outcome.capture.cycles.size(), 64u);
  for (std::uint32_t i = 0; i < 64; ++i) {
    EXPECT_EQ(outcome.capture.cycles[i].red, FakeAdapter::code(i, 0));
    EXPECT_EQ(outcome.capture.cycles[i].dark_after_infrared, FakeAdapter::code(i, 3));
  }
  EXPECT_TRUE(outcome.off);
  EXPECT_EQ(bench.fake.red_uA, 0u);
  EXPECT_EQ(bench.fake.infrared_uA, 0u);
  EXPECT_EQ(bench.fake.highest_red_uA, 20000u);
}

struct Line {
  std::uint64_t out = 0, in = 0;
};

Line run_with(const std::vector<wire::ByteFault>& plan) {
  AdapterBench bench;
  bench.plan = plan;
  Outcome outcome;
  const auto started = bench.line.start([&] { return session(bench.adapter(), outcome); });
  EXPECT_TRUE(bench.line.run_until_done(*started)) << "the line stalled";
  EXPECT_EQ(started->end(), "");
  if (!started->done || started->thrown) return {};
  expect_right(outcome, bench);
  EXPECT_LT(bench.seconds_now(), 2.5);
  EXPECT_LE(bench.adapter().counts().misses, 1u);
  return {bench.port->count(wire::Direction::out), bench.port->count(wire::Direction::in)};
}

void spoil_each(wire::Direction direction, std::uint64_t begin, std::uint64_t end, std::uint64_t step = 1) {
  for (std::uint64_t index = begin; index < end; index += step)
    for (const auto kind : {wire::FaultKind::lose, wire::FaultKind::change, wire::FaultKind::twice}) {
      run_with({{direction, index, kind, static_cast<std::uint8_t>(1u << index % 8)}});
      if (testing::Test::HasFailure()) {
        ADD_FAILURE() << (direction == wire::Direction::out ? "sent" : "received") << " byte " << index << ", fault "
                      << static_cast<int>(kind);
        return;
      }
    }
}

TEST(AdapterBadLine, EveryByteSentLostChangedDoubled) {
  const Line clean = run_with({});
  ASSERT_GT(clean.out, 100u);
  spoil_each(wire::Direction::out, 0, clean.out);
}

// Of the two blocks of a capture every 11th byte, of everything else all.
TEST(AdapterBadLine, TheBytesReceivedLostChangedDoubled) {
  const Line clean = run_with({});
  const std::uint64_t blocks = 2 * 398, after = 17 + 33 + 17;  // end, state, drive off
  ASSERT_GT(clean.in, blocks + after + 150);
  const std::uint64_t end = clean.in - after, begin = end - blocks;
  spoil_each(wire::Direction::in, 0, begin + 20);
  spoil_each(wire::Direction::in, begin + 20, end - 20, 11);
  spoil_each(wire::Direction::in, end - 20, clean.in);
}

TEST(AdapterBadLine, ALineThatIsBadAllTheTimeEndsInRightValuesOrLoss) {
  int right = 0, lost = 0;
  for (std::uint64_t seed = 1; seed <= 100; ++seed) {
    AdapterBench bench;
    bench.rate = {0.0005, {wire::FaultKind::lose, wire::FaultKind::change, wire::FaultKind::twice}, seed};
    Outcome outcome;
    const auto problem = bench.problem_of([&] { return session(bench.adapter(), outcome); });
    if (problem) {
      EXPECT_EQ(problem->id, "device_lost");
      ++lost;
    } else if (outcome.off) {
      expect_right(outcome, bench);
      ++right;
    }
    EXPECT_LT(bench.seconds_now(), 30.0);
  }
  EXPECT_GT(right, 60);
  RecordProperty("right", right);
  RecordProperty("lost", lost);
}

}  // namespace
