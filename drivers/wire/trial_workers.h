#pragma once
#include <cstdint>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/workers.h"
#include "station/base/entropy.h"

namespace probewright::wire {

/// Jobs of a trial: done on the line's own thread, one after the other, each a seeded while of the clock's time after
/// the one before or its submission. A job that was submitted is done, even when its coroutine is cancelled meanwhile.
/// Clock and workers must outlive their jobs; jobs that never came to their moment die with the clock.
class TrialWorkers final : public Workers {
 public:
  /// A job takes between `shortest` and `longest`, drawn evenly from `seed`.
  TrialWorkers(LineClock& clock, std::uint64_t seed, Duration shortest = std::chrono::microseconds(50),
               Duration longest = std::chrono::milliseconds(5));
  boost::asio::awaitable<void> run(std::function<void()> job) override;

 private:
  Duration draw();
  LineClock& clock_;
  SeededEntropy entropy_;
  Duration shortest_, longest_;
  SteadyTime free_at_{Duration::min()};
};

}  // namespace probewright::wire
