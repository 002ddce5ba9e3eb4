#include "drivers/wire/stepped_line.h"

#include <algorithm>
#include <boost/asio/co_spawn.hpp>
#include <deque>

#include "drivers/wire/memory_port.h"
#include "drivers/wire/wait_queue.h"

namespace probewright::wire {
namespace {

using Kind = WireEvent::Kind;

/// A coroutine of a bridge ends with its port; everything else is our own mistake and ends run().
void end_of_bridge(const std::exception_ptr& error) {
  if (!error) return;
  try {
    std::rethrow_exception(error);
  } catch (const PortLost&) {
  }
}

}  // namespace

/// One connection: the real port outside, and the device's end of the line inside.
struct SteppedLine::Bridge {
  SteppedLine& line;
  std::string device;
  std::unique_ptr<Port> real, inside;
  std::deque<Bytes> to_send{};
  bool sending = false, over = false;

  void note(WireEvent event) const {
    event.at = line.clock_.steady_now().since_start;
    line.recorder_.note(device, event);
  }
};

SteppedLine::SteppedLine(double speed, UtcTime start, Recorder& recorder)
    : recorder_(recorder),
      outside_clock_(outside_.get_executor(), speed),
      clock_(start, speed),
      began_(outside_clock_.steady_now()) {}

SteppedLine::~SteppedLine() = default;

PortSource SteppedLine::source(std::string device, Open open) {
  return [this, device = std::move(device), open = std::move(open)] { return open_bridged(this, device, open); };
}

asio::awaitable<std::unique_ptr<Port>> SteppedLine::open_bridged(SteppedLine* self, std::string device, Open open) {
  auto real = open();
  WireEvent event{self->clock_.steady_now().since_start, Kind::opened, {}, {}};
  if (!real) {
    event.kind = Kind::not_opened;
    event.words = words_of_problem(real.error());
    self->recorder_.note(device, event);
    throw ProblemError(real.error());
  }
  event.words = (*real)->name();
  self->recorder_.note(device, event);
  auto pair = make_memory_pair(self->clock_, (*real)->name());
  auto bridge = std::make_shared<Bridge>(Bridge{*self, std::move(device), *std::move(real), std::move(pair.device)});
  asio::co_spawn(self->outside_, bring_in(bridge), end_of_bridge);
  asio::co_spawn(self->io_, take_out(bridge), end_of_bridge);
  co_return std::move(pair.station);
}

/// Bytes of the real port, as they come.
asio::awaitable<void> SteppedLine::bring_in(std::shared_ptr<Bridge> bridge) {
  SteppedLine& line = bridge->line;
  std::array<std::byte, 4096> bytes{};
  WireEvent lost{{}, Kind::lost, {}, {}};
  while (lost.words.empty()) {
    try {
      const auto count = co_await bridge->real->read_some(bytes, WaitQueue::never);
      const auto part = std::span{bytes}.first(count);
      asio::co_spawn(line.io_,
                     deliver(bridge, line.next_moment(), {{}, Kind::received, {part.begin(), part.end()}, {}}),
                     end_of_bridge);
    } catch (const PortLost& gone) {
      lost.words = gone.why();
    }
  }
  asio::co_spawn(line.io_, deliver(bridge, line.next_moment(), std::move(lost)), end_of_bridge);
}

asio::awaitable<void> SteppedLine::deliver(std::shared_ptr<Bridge> bridge, SteadyTime at, WireEvent event) {
  co_await bridge->line.clock_.wait_until(at);
  if (bridge->over) co_return;
  bridge->note(event);
  if (event.kind == Kind::lost) {
    bridge->over = true;
    bridge->inside->close();
  } else {
    co_await bridge->inside->write_all(event.bytes, WaitQueue::never);
  }
}

/// Bytes of the line, until it closes its end.
asio::awaitable<void> SteppedLine::take_out(std::shared_ptr<Bridge> bridge) {
  std::array<std::byte, 4096> bytes{};
  try {
    while (true) {
      const auto count = co_await bridge->inside->read_some(bytes, WaitQueue::never);
      const auto part = std::span{bytes}.first(count);
      bridge->note({{}, Kind::sent, {part.begin(), part.end()}, {}});
      bridge->to_send.emplace_back(part.begin(), part.end());
      if (!std::exchange(bridge->sending, true)) {
        asio::co_spawn(bridge->line.outside_, send_out(bridge), end_of_bridge);
      }
    }
  } catch (const PortLost&) {
    bridge->over = true;
    bridge->real->close();
  }
}

asio::awaitable<void> SteppedLine::send_out(std::shared_ptr<Bridge> bridge) {
  while (!bridge->to_send.empty()) {
    const Bytes bytes = std::move(bridge->to_send.front());
    bridge->to_send.pop_front();
    co_await bridge->real->write_all(bytes, WaitQueue::never);
  }
  bridge->sending = false;
}

/// A moment of its own for the next thing from outside: before every wait that the line has, so that a hiccup of the
/// machine is no miss, and never at the same time as anything else.
SteadyTime SteppedLine::next_moment() {
  constexpr Duration apart{1};
  SteadyTime moment{elapsed()};
  if (const auto first = clock_.waits()->earliest()) moment = std::min(moment, *first - apart);
  moment = std::max({moment, clock_.steady_now() + apart, last_in_ + apart});
  last_in_ = moment;
  return moment;
}

SteadyTime SteppedLine::put_in(std::function<void()> what) {
  const SteadyTime at = next_moment();
  const auto later = [](VirtualClock* clock, SteadyTime when, std::function<void()> then) -> asio::awaitable<void> {
    co_await clock->wait_until(when);
    then();
  };
  asio::co_spawn(io_, later(&clock_, at, std::move(what)), end_of_bridge);
  return at;
}

void SteppedLine::run(const std::function<bool()>& holds) {
  constexpr Duration longest_sleep = std::chrono::milliseconds(100);
  while (true) {
    outside_.restart();
    outside_.poll();
    if (clock_.run_until(io_, holds, SteadyTime{elapsed()}) == VirtualClock::Ended::reached) return;
    const auto next = clock_.waits()->earliest();
    const Duration sleep = next ? next->since_start - elapsed() : longest_sleep;
    outside_.restart();
    outside_.run_one_for(std::clamp(sleep, Duration{0}, longest_sleep));
  }
}

}  // namespace probewright::wire
