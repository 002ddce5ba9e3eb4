#pragma once
#include <boost/asio/io_context.hpp>
#include <functional>
#include <memory>
#include <string>

#include "drivers/wire/asio_clock.h"
#include "drivers/wire/link.h"
#include "drivers/wire/recording_folder.h"
#include "drivers/wire/virtual_clock.h"

namespace probewright::wire {

/// Runs a line on real ports so that its recording can be replayed exactly. The line lives on a virtual clock that
/// follows the machine's: its time stands still while anything is ready and moves on only to its next wait or to the
/// next thing from outside, and things from outside come in one at a time. So the recorded moments and bytes are all
/// that a replay needs. One thread.
class SteppedLine {
 public:
  /// The line's time begins now, at 0, and its UTC at `start`. `speed` is the bench's. The recorder must outlive it.
  SteppedLine(double speed, UtcTime start, Recorder& recorder);
  ~SteppedLine();
  SteppedLine(const SteppedLine&) = delete;
  SteppedLine& operator=(const SteppedLine&) = delete;

  asio::io_context& io() { return io_; }  ///< where the line lives
  VirtualClock& clock() { return clock_; }
  /// Where real ports and signals live.
  asio::io_context& outside() { return outside_; }
  const LineClock& outside_clock() const { return outside_clock_; }

  /// Opens a real port, on outside() and outside_clock(). Errors are the port's.
  using Open = std::function<Result<std::unique_ptr<Port>>()>;
  /// Gives the line its end of such a port and notes all that goes over it.
  PortSource source(std::string device, Open open);

  /// Does something in the line on behalf of the world outside, and gives the moment.
  SteadyTime put_in(std::function<void()> what);

  /// Runs until `holds`, which is asked whenever the line has nothing to do.
  void run(const std::function<bool()>& holds);

 private:
  struct Bridge;
  Duration elapsed() const { return outside_clock_.steady_now() - began_; }
  SteadyTime next_moment();
  static asio::awaitable<std::unique_ptr<Port>> open_bridged(SteppedLine* self, std::string device, Open open);
  static asio::awaitable<void> bring_in(std::shared_ptr<Bridge> bridge);
  static asio::awaitable<void> deliver(std::shared_ptr<Bridge> bridge, SteadyTime at, WireEvent event);
  static asio::awaitable<void> take_out(std::shared_ptr<Bridge> bridge);
  static asio::awaitable<void> send_out(std::shared_ptr<Bridge> bridge);

  Recorder& recorder_;
  asio::io_context outside_{1}, io_{1};
  AsioClock outside_clock_;
  VirtualClock clock_;
  SteadyTime began_;
  SteadyTime last_in_{Duration{0}};
};

}  // namespace probewright::wire
