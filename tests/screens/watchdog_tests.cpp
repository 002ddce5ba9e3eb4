#include "station/windows/watchdog.h"

#include <gtest/gtest.h>

#include <QEventLoop>
#include <QTimer>
#include <chrono>
#include <thread>

namespace probewright::windows {
namespace {

/// Does something for each event of its own.
class Busy : public QObject {
 public:
  std::function<void()> work;
  bool event(QEvent*) override {
    work();
    return true;
  }
};

int slow_calls_of(const std::function<void()>& work) {
  auto& application = dynamic_cast<WatchedApplication&>(*QCoreApplication::instance());
  const int before = application.slow_calls();
  Busy busy;
  busy.work = work;
  QEvent event{QEvent::User};
  QCoreApplication::sendEvent(&busy, &event);
  busy.work = [] {};
  return application.slow_calls() - before;
}

TEST(Watchdog, TellsACallThatTookTooLong) {
  EXPECT_EQ(slow_calls_of([] { std::this_thread::sleep_for(std::chrono::milliseconds(80)); }), 1);
  EXPECT_EQ(slow_calls_of([] {}), 0);
}

TEST(Watchdog, WaitingInALoopOfItsOwnDoesNotCount) {
  EXPECT_EQ(slow_calls_of([] {
              QEventLoop loop;
              QTimer::singleShot(80, &loop, &QEventLoop::quit);
              loop.exec();
            }),
            0);
}

}  // namespace
}  // namespace probewright::windows
