#include <gtest/gtest.h>

#include "drivers/phantom/driver.h"
#include "tests/phantom/phantom_bench.h"

// One fault on the line, at every byte of a session in turn: the driver gets everything right in the end.
namespace {

using namespace probewright;
using phantom::Shutter;
namespace asio = boost::asio;

/// What a session gave that reads and sets a bit of everything.
struct Outcome {
  double temperature_degC = 0.0;
  phantom::NestState nest;
  std::optional<phantom::Spectrum> spectrum;
};

asio::awaitable<void> session(phantom::Driver& driver, Outcome& outcome, bool with_spectrum) {
  co_await driver.connect();
  co_await driver.modulate({2, 5.0});
  outcome.temperature_degC = co_await driver.temperature_degC();
  if (with_spectrum) outcome.spectrum = co_await driver.spectrum({10000, 2, Shutter::closed});
  outcome.nest = co_await driver.nest_state();
  co_await driver.stop_modulator();
}

struct Line {
  std::uint64_t out = 0, in = 0;
};

/// Runs a session with one fault (or none) and checks everything it gave.
Line run_with(const std::vector<wire::ByteFault>& plan, bool with_spectrum) {
  PhantomBench bench;
  bench.plan = plan;
  Outcome outcome;
  const auto started = bench.line.start([&] { return session(bench.phantom(), outcome, with_spectrum); });
  EXPECT_TRUE(bench.line.run_until_done(*started)) << "the line stalled";
  EXPECT_EQ(started->end(), "");
  if (!started->done || started->thrown) return {};
  EXPECT_EQ(outcome.temperature_degC, 25.12);
  EXPECT_EQ(outcome.nest.probe, (phantom::Presence{true, 3}));
  EXPECT_TRUE(outcome.nest.lid_closed);
  if (with_spectrum) {
    EXPECT_EQ(outcome.spectrum->setting, (phantom::SpectrometerSetting{10000, 2, Shutter::closed}));
    EXPECT_EQ(outcome.spectrum->counts[512], 0x0A7C);
    EXPECT_EQ(outcome.spectrum->counts[1023], 1000);
  }
  EXPECT_LT(bench.seconds_now(), 3.0);
  EXPECT_LE(bench.phantom().counts().misses, 2u);
  return {bench.port->count(wire::Direction::out), bench.port->count(wire::Direction::in)};
}

/// Every byte (or every so many) from `begin` to `end` of a direction lost, changed, doubled.
void spoil_each(wire::Direction direction, std::uint64_t begin, std::uint64_t end, bool with_spectrum,
                std::uint64_t step = 1) {
  for (std::uint64_t index = begin; index < end; index += step)
    for (const auto kind : {wire::FaultKind::lose, wire::FaultKind::change, wire::FaultKind::twice}) {
      const auto flip = static_cast<std::uint8_t>(1u << index % 8);
      run_with({{direction, index, kind, flip}}, with_spectrum);
      if (testing::Test::HasFailure()) {
        ADD_FAILURE() << (direction == wire::Direction::out ? "sent" : "received") << " byte " << index << ", fault "
                      << static_cast<int>(kind);
        return;
      }
    }
}

TEST(PhantomBadLine, EveryByteSentLostChangedDoubled) {
  const Line clean = run_with({}, true);
  ASSERT_GT(clean.out, 200u);
  spoil_each(wire::Direction::out, 0, clean.out, true);
}

TEST(PhantomBadLine, EveryByteOfTextAnswersLostChangedDoubled) {
  const Line clean = run_with({}, false);
  ASSERT_GT(clean.in, 150u);
  spoil_each(wire::Direction::in, 0, clean.in, false);
}

// All bytes of the block's header, first fields, check and end; of the pixels, which are all alike to the driver, every
// 51st (odd, so that both bytes of a pixel come to it).
TEST(PhantomBadLine, TheBytesOfASpectrumLostChangedDoubled) {
  const Line without = run_with({}, false), with = run_with({}, true);
  const std::uint64_t block = 7 + 2068 + 5 + 1;
  ASSERT_GT(with.in, without.in + block);
  const std::uint64_t after = 8 + 6 + 7;  // "1;3;CLOS" and "0" with their checks
  const std::uint64_t end = with.in - after, begin = end - block;
  spoil_each(wire::Direction::in, begin - 20, begin + 30, true);
  spoil_each(wire::Direction::in, begin + 30, end - 20, true, 51);
  spoil_each(wire::Direction::in, end - 20, with.in, true);
}

TEST(PhantomBadLine, ALineThatIsBadAllTheTimeEndsInRightValuesOrLoss) {
  int right = 0, lost = 0;
  for (std::uint64_t seed = 1; seed <= 60; ++seed) {
    PhantomBench bench;
    bench.rate = {0.002, {wire::FaultKind::lose, wire::FaultKind::change, wire::FaultKind::twice}, seed};
    Outcome outcome;
    const auto problem = bench.problem_of([&] { return session(bench.phantom(), outcome, false); });
    if (problem) {
      EXPECT_EQ(problem->id, "device_lost");
      ++lost;
    } else {
      EXPECT_EQ(outcome.temperature_degC, 25.12);
      EXPECT_EQ(outcome.nest.probe, (phantom::Presence{true, 3}));
      ++right;
    }
    EXPECT_LT(bench.seconds_now(), 60.0);
  }
  EXPECT_GT(right, 30);
  RecordProperty("right", right);
  RecordProperty("lost", lost);
}

}  // namespace
