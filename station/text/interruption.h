#pragma once
#include <csignal>
#include <stop_token>
#include <thread>

namespace probewright::text {

/// While it lives, an interrupt from the terminal (or a request to end) is not the end of the program but a stop
/// request, so that long work ends at a good place and cleans up. Make it before any other thread: threads started
/// later take over that they leave these signals to it. Main thread.
class Interruption {
 public:
  Interruption();
  ~Interruption();
  Interruption(const Interruption&) = delete;
  std::stop_token token() const { return stop_.get_token(); }

 private:
  std::stop_source stop_;
  sigset_t before_{};
  std::jthread waiter_;
};

}  // namespace probewright::text
