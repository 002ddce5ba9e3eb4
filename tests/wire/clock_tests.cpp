#include <gtest/gtest.h>

#include <vector>

#include "drivers/wire/signal.h"
#include "drivers/wire/wait_queue.h"
#include "station/base/entropy.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;

asio::awaitable<void> wait_and_note(wire::LineClock& clock, SteadyTime moment, int name, std::vector<int>& order) {
  co_await clock.wait_until(moment);
  order.push_back(name);
}

TEST(VirtualClock, EndsWaitsByMomentThenByOrderOfAsking) {
  VirtualLine line;
  std::vector<int> order;
  const int wanted_ms[] = {30, 10, 20, 10, 30, 0, 10};
  for (int i = 0; i < 7; ++i)
    line.start([&, i] { return wait_and_note(line.clock(), line.in(wanted_ms[i] * 1ms), i, order); });
  EXPECT_TRUE(line.clock().run_out(line.io));
  EXPECT_EQ(order, (std::vector<int>{5, 1, 3, 6, 2, 0, 4}));
  EXPECT_EQ(line.clock().steady_now(), SteadyTime{30ms});
}

TEST(VirtualClock, JumpsFromWaitToWaitAndMovesUtcAlong) {
  VirtualLine line;
  const UtcTime start = line.clock().utc_now();
  line.run([&]() -> asio::awaitable<void> {
    co_await line.clock().dwell(std::chrono::hours(8));
    EXPECT_EQ(line.clock().utc_now().microseconds - start.microseconds, 8ll * 3600 * 1'000'000);
    line.clock().step_utc(-std::chrono::hours(1));
    EXPECT_EQ(line.clock().utc_now().microseconds - start.microseconds, 7ll * 3600 * 1'000'000);
    EXPECT_EQ(line.clock().steady_now(), SteadyTime{std::chrono::hours(8)});
  });
}

TEST(VirtualClock, TellsAStallFromALimitFromSuccess) {
  using Ended = wire::VirtualClock::Ended;
  VirtualLine line;
  bool held = false;
  line.start([&]() -> asio::awaitable<void> {
    co_await line.clock().dwell(10ms);
    held = true;
    co_await line.clock().dwell(10ms);
  });
  EXPECT_EQ(line.clock().run_until(
                line.io, [&] { return held; }, SteadyTime{9ms}),
            Ended::too_late);
  EXPECT_EQ(line.clock().run_until(
                line.io, [&] { return held; }, SteadyTime{10ms}),
            Ended::reached);
  EXPECT_EQ(line.clock().run_until(line.io, [] { return false; }), Ended::stalled);
  EXPECT_EQ(line.clock().waiting(), 0u);
  wire::Signal signal{line.clock()};
  const auto waiter = line.start([&]() -> asio::awaitable<void> { co_await signal.wait(wire::WaitQueue::never); });
  EXPECT_FALSE(line.clock().run_out(line.io));
  EXPECT_EQ(line.clock().waiting(), 1u);
  signal.notify();
  EXPECT_TRUE(line.clock().run_out(line.io));
  EXPECT_EQ(waiter->end(), "");
}

TEST(VirtualClock, DwellAndDeadlinesScaleWithSpeedButTheMarginDoesNot) {
  asio::io_context io;
  wire::VirtualClock clock{UtcTime{0}, 20.0};
  EXPECT_EQ(clock.deadline_after(1s), SteadyTime{50ms + 500ms});
  EXPECT_EQ(clock.deadline_after(1s, 700ms), SteadyTime{50ms + 700ms});
  bool done = false;
  asio::co_spawn(io, clock.dwell(1s), [&](std::exception_ptr) { done = true; });
  EXPECT_TRUE(clock.run_out(io));
  EXPECT_TRUE(done);
  EXPECT_EQ(clock.steady_now(), SteadyTime{50ms});
  EXPECT_THROW(wire::VirtualClock(UtcTime{0}, 0.0), std::invalid_argument);
}

/// Waits of many coroutines, each drawn from the seed; what happened when.
std::vector<std::pair<std::int64_t, int>> history(std::uint64_t seed) {
  VirtualLine line;
  std::vector<std::pair<std::int64_t, int>> events;
  SeededEntropy entropy{seed};
  for (int name = 0; name < 16; ++name)
    line.start([&, name]() -> asio::awaitable<void> {
      for (int i = 0; i < 20; ++i) {
        co_await line.clock().dwell(std::chrono::microseconds(entropy.next() % 1000));
        events.emplace_back(line.clock().steady_now().since_start.count(), name);
      }
    });
  EXPECT_TRUE(line.clock().run_out(line.io));
  return events;
}

TEST(VirtualClock, OneSeedGivesOneOrderAndAnotherSeedAnother) {
  const auto first = history(1);
  ASSERT_EQ(first.size(), 320u);
  for (int i = 0; i < 20; ++i) EXPECT_EQ(history(1), first);
  EXPECT_NE(history(2), first);
}

TEST(VirtualClock, MayGoBeforeItsCoroutinesDo) {
  // A trial that "dies" drops everything where it stands: nothing may leak or be touched afterwards (ASan looks on).
  asio::io_context io;
  auto held = std::make_shared<int>(1);
  {
    wire::VirtualClock clock{UtcTime{0}};
    asio::co_spawn(
        io,
        [&clock, held]() -> asio::awaitable<void> {
          const auto mine = held;
          co_await clock.dwell(1s);
        },
        [](std::exception_ptr) {});
    io.poll();
    EXPECT_EQ(clock.waiting(), 1u);
  }
  io.restart();
  io.poll();
  EXPECT_EQ(held.use_count(), 1);
}

template <class Kind>
class AnyClock : public testing::Test {
 protected:
  Kind line;
};
using Lines = testing::Types<VirtualLine, RealLine>;
TYPED_TEST_SUITE(AnyClock, Lines);

TYPED_TEST(AnyClock, NeverEndsAWaitEarly) {
  auto& line = this->line;
  line.run([&]() -> asio::awaitable<void> {
    for (const auto wait : {0us, 1us, 100us, 1500us, 20000us}) {
      const auto moment = line.in(wait);
      co_await line.clock().wait_until(moment);
      EXPECT_GE(line.clock().steady_now(), moment);
    }
    co_await line.clock().wait_until(line.in(-1s));  // long gone: at once
  });
}

TYPED_TEST(AnyClock, EndsAnEarlierWaitThatWasAskedForLater) {
  auto& line = this->line;
  std::vector<int> order;
  line.start([&] { return wait_and_note(line.clock(), line.in(60ms), 1, order); });
  const auto last = line.start([&] { return wait_and_note(line.clock(), line.in(90ms), 2, order); });
  line.start([&] { return wait_and_note(line.clock(), line.in(20ms), 3, order); });
  EXPECT_TRUE(line.run_until_done(*last));
  EXPECT_EQ(order, (std::vector<int>{3, 1, 2}));
}

TYPED_TEST(AnyClock, ACancelledWaitThrowsAndTheOthersGoOn) {
  auto& line = this->line;
  const auto cancelled = line.start([&]() -> asio::awaitable<void> { co_await line.clock().dwell(3600s); });
  const auto other = line.start([&]() -> asio::awaitable<void> {
    co_await line.clock().dwell(10ms);
    cancelled->cancel.emit(asio::cancellation_type::terminal);
    co_await line.clock().dwell(10ms);
  });
  EXPECT_TRUE(line.run_until_done(*other));
  EXPECT_EQ(cancelled->end(), "cancelled");
  EXPECT_EQ(line.clock().waits()->size(), 0u);
}

TYPED_TEST(AnyClock, ASignalWakesOrItsDeadlinePasses) {
  auto& line = this->line;
  wire::Signal signal{line.clock()};
  std::vector<bool> told;
  const auto waiter = line.start([&]() -> asio::awaitable<void> {
    told.push_back(co_await signal.wait(line.in(3600s)));
    told.push_back(co_await signal.wait(line.in(5ms)));
    told.push_back(co_await signal.wait(wire::WaitQueue::never));
  });
  line.start([&]() -> asio::awaitable<void> {
    co_await line.clock().dwell(5ms);
    signal.notify();
    co_await line.clock().dwell(50ms);
    signal.notify();
    signal.notify();  // nobody waits: nothing happens, and nothing is remembered
  });
  EXPECT_TRUE(line.run_until_done(*waiter));
  EXPECT_EQ(waiter->end(), "");
  EXPECT_EQ(told, (std::vector<bool>{true, false, true}));
}

TYPED_TEST(AnyClock, TwoWaitersOnOneSignalAreAMistake) {
  auto& line = this->line;
  wire::Signal signal{line.clock()};
  const auto first = line.start([&]() -> asio::awaitable<void> { co_await signal.wait(wire::WaitQueue::never); });
  const auto second = line.start([&]() -> asio::awaitable<void> { co_await signal.wait(wire::WaitQueue::never); });
  EXPECT_TRUE(line.run_until_done(*second));
  EXPECT_EQ(second->end(), "two coroutines wait on one signal");
  signal.notify();
  EXPECT_TRUE(line.run_until_done(*first));
  EXPECT_EQ(first->end(), "");
}

TEST(AsioClock, LetsRunReturnWhenNobodyWaits) {
  RealLine line;
  wire::Signal signal{line.clock()};
  line.start([&]() -> asio::awaitable<void> { co_await signal.wait(line.in(3600s)); });
  line.start([&]() -> asio::awaitable<void> {
    co_await line.clock().dwell(5ms);
    signal.notify();
  });
  const auto before = std::chrono::steady_clock::now();
  line.io.run();  // an abandoned timer would hold it for an hour
  EXPECT_LT(std::chrono::steady_clock::now() - before, 30s);
}

TEST(AsioClock, DwellGoesBySpeed) {
  RealLine line{50.0};
  line.run([&]() -> asio::awaitable<void> {
    const auto before = line.clock().steady_now();
    co_await line.clock().dwell(1s);
    EXPECT_GE(line.clock().steady_now() - before, 20ms);
    EXPECT_LT(line.clock().steady_now() - before, 900ms);
  });
}

}  // namespace
