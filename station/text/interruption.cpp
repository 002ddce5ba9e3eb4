#include "station/text/interruption.h"

#include <ctime>

namespace probewright::text {

Interruption::Interruption() {
  sigset_t signals;
  sigemptyset(&signals);
  sigaddset(&signals, SIGINT);
  sigaddset(&signals, SIGTERM);
  pthread_sigmask(SIG_BLOCK, &signals, &before_);
  waiter_ = std::jthread([this, signals](const std::stop_token& end) {
    constexpr timespec a_while{0, 50'000'000};
    while (!end.stop_requested())
      if (sigtimedwait(&signals, nullptr, &a_while) > 0) stop_.request_stop();
  });
}

Interruption::~Interruption() {
  waiter_.request_stop();
  waiter_.join();
  pthread_sigmask(SIG_SETMASK, &before_, nullptr);
}

}  // namespace probewright::text
