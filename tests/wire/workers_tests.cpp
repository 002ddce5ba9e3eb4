#include <gtest/gtest.h>

#include <atomic>
#include <thread>
#include <vector>

#include "drivers/wire/thread_workers.h"
#include "drivers/wire/trial_workers.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;

struct ThreadKind {
  RealLine line;
  wire::ThreadWorkers workers;
};
struct TrialKind {
  VirtualLine line;
  wire::TrialWorkers workers{line.clock(), 1};
};

template <class Kind>
class AnyWorkers : public testing::Test {
 protected:
  Kind kind;
};
using Kinds = testing::Types<ThreadKind, TrialKind>;
TYPED_TEST_SUITE(AnyWorkers, Kinds);

TYPED_TEST(AnyWorkers, DoTheJobBeforeTheCoroutineGoesOnAndOnItsOwnThread) {
  auto& kind = this->kind;
  const auto here = std::this_thread::get_id();
  int done = 0;
  kind.line.run([&]() -> asio::awaitable<void> {
    for (int i = 1; i <= 50; ++i) {
      co_await kind.workers.run([&] { ++done; });
      EXPECT_EQ(done, i);
      EXPECT_EQ(std::this_thread::get_id(), here);
    }
  });
}

TYPED_TEST(AnyWorkers, OneAtATimeInTheOrderOfSubmission) {
  auto& kind = this->kind;
  std::vector<int> order;
  std::atomic<int> at_once = 0;
  std::vector<std::shared_ptr<Started>> all;
  for (int i = 0; i < 40; ++i)
    all.push_back(kind.line.start([&, i]() -> asio::awaitable<void> {
      co_await kind.workers.run([&, i] {
        EXPECT_EQ(++at_once, 1);
        order.push_back(i);
        --at_once;
      });
    }));
  for (const auto& started : all) EXPECT_TRUE(kind.line.run_until_done(*started));
  ASSERT_EQ(order.size(), 40u);
  EXPECT_TRUE(std::is_sorted(order.begin(), order.end()));
}

TYPED_TEST(AnyWorkers, AnExceptionComesOutOfTheAwaitAndTheNextJobIsDone) {
  auto& kind = this->kind;
  const auto failed = kind.line.start(
      [&]() -> asio::awaitable<void> { co_await kind.workers.run([] { throw std::runtime_error("disk full"); }); });
  EXPECT_TRUE(kind.line.run_until_done(*failed));
  EXPECT_EQ(failed->end(), "disk full");
  bool done = false;
  kind.line.run([&]() -> asio::awaitable<void> { co_await kind.workers.run([&] { done = true; }); });
  EXPECT_TRUE(done);
}

// A commit that was begun cannot be taken back by a stopped run.
TYPED_TEST(AnyWorkers, AJobIsDoneThoughItsCoroutineIsCancelled) {
  auto& kind = this->kind;
  bool done = false;
  const auto started = kind.line.start([&]() -> asio::awaitable<void> {
    co_await kind.workers.run([&] {
      std::this_thread::sleep_for(5ms);
      done = true;
    });
  });
  kind.line.io.poll();
  started->cancel.emit(asio::cancellation_type::terminal);
  EXPECT_TRUE(kind.line.run_until_done(*started));
  EXPECT_TRUE(done);
}

TEST(ThreadWorkers, FinishTheirJobsBeforeTheyGo) {
  RealLine line;
  std::atomic<int> done = 0;
  {
    wire::ThreadWorkers workers;
    for (int i = 0; i < 10; ++i)
      line.start([&]() -> asio::awaitable<void> {
        co_await workers.run([&] {
          std::this_thread::sleep_for(1ms);
          ++done;
        });
      });
    line.io.poll();
  }
  EXPECT_EQ(done, 10);
  line.io.poll();
}

TEST(ThreadWorkers, DoNotHoldUpTheLine) {
  RealLine line;
  wire::ThreadWorkers workers;
  bool job_done = false;
  int ticks = 0;
  const auto slow = line.start([&]() -> asio::awaitable<void> {
    co_await workers.run([] { std::this_thread::sleep_for(200ms); });
    job_done = true;
  });
  line.run([&]() -> asio::awaitable<void> {
    while (!job_done) {
      co_await line.clock().dwell(5ms);
      ++ticks;
    }
  });
  EXPECT_GT(ticks, 4);
  EXPECT_EQ(slow->end(), "");
}

std::vector<std::int64_t> moments(std::uint64_t seed) {
  VirtualLine line;
  wire::TrialWorkers workers{line.clock(), seed, 50us, 5ms};
  std::vector<std::int64_t> at;
  for (int i = 0; i < 30; ++i)
    line.start([&]() -> asio::awaitable<void> {
      co_await workers.run([&] { at.push_back(line.clock().steady_now().since_start.count()); });
    });
  EXPECT_TRUE(line.clock().run_out(line.io));
  return at;
}

TEST(TrialWorkers, TakeSeededTime) {
  const auto first = moments(1);
  ASSERT_EQ(first.size(), 30u);
  EXPECT_EQ(moments(1), first);
  EXPECT_NE(moments(2), first);
  std::int64_t before = 0;
  for (const auto at : first) {
    EXPECT_GE(at - before, Duration{50us}.count());
    EXPECT_LE(at - before, Duration{5ms}.count());
    before = at;
  }
}

}  // namespace
