#include "station/windows/line_feed.h"

#include <gtest/gtest.h>

#include <atomic>
#include <thread>

namespace probewright::windows {
namespace {

using namespace sequence;

TEST(LineFeed, KeepsEveryEventInOrderAndTheNewestView) {
  LineFeed feed;
  const auto listener = feed.listener();
  for (int i = 1; i <= 3; ++i) {
    listener.event(RunStarted{i, "AQ20-048-00001", i});
    auto view = std::make_shared<LineView>();
    view->revision = static_cast<std::uint64_t>(i);
    listener.view(view);
  }
  const auto told = feed.take();
  ASSERT_EQ(told.events.size(), 3u);
  for (int i = 1; i <= 3; ++i) EXPECT_EQ(std::get<RunStarted>(told.events[static_cast<std::size_t>(i - 1)]).nest, i);
  EXPECT_EQ(told.view->revision, 3u);
  EXPECT_TRUE(feed.take().events.empty());
  EXPECT_EQ(feed.take().view, nullptr);
}

TEST(LineFeed, WakesOnceUntilItIsTaken) {
  LineFeed feed;
  const auto listener = feed.listener();
  listener.event(RunStarted{});
  int woken = 0;
  feed.wake_by([&] { ++woken; });
  EXPECT_EQ(woken, 1);  // something waited already
  listener.event(RunStarted{});
  EXPECT_EQ(woken, 1);
  feed.take();
  listener.event(RunStarted{});
  EXPECT_EQ(woken, 2);
  feed.wake_by({});
  feed.take();
  listener.event(RunStarted{});
  EXPECT_EQ(woken, 2);
}

TEST(LineFeed, LosesNothingBetweenTwoThreads) {
  LineFeed feed;
  constexpr int count = 20000;
  std::thread line{[listener = feed.listener()] {
    for (int i = 0; i < count; ++i) listener.event(RunStarted{i, "", i});
  }};
  int next = 0;
  while (next < count)
    for (const auto& event : feed.take().events) ASSERT_EQ(std::get<RunStarted>(event).nest, next++);
  line.join();
}

}  // namespace
}  // namespace probewright::windows
