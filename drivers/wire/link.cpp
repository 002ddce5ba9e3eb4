#include "drivers/wire/link.h"

#include <algorithm>

namespace probewright::wire {
namespace {

constexpr Duration first_pause = std::chrono::milliseconds(100);
constexpr Duration longest_pause = std::chrono::seconds(5);

}  // namespace

DeviceLost::DeviceLost(const std::string& device, int tries, const std::string& cause)
    : ProblemError(Problem{"device_lost", device, {{"tries", std::to_string(tries)}, {"cause", cause}}}) {}

DeviceReset::DeviceReset(const std::string& device) : DeviceLost(Problem{"device_reset", device}) {}

Link::Link(LinkSettings settings, PortSource source, LineClock& clock)
    : settings_(std::move(settings)), source_(std::move(source)), clock_(clock), turn_(clock), lost_(clock) {
  settings_.tries = std::max(settings_.tries, 1);
}

void Link::require_ready() const {
  if (!ready_) throw DeviceLost(settings_.device, 0, trouble_ ? trouble_->what() : "not connected");
}

asio::awaitable<void> Link::open() {
  drop();
  try {
    port_ = co_await source_();
  } catch (const PortLost& lost) {
    throw DeviceLost(settings_.device, 1, lost.what());
  }
}

void Link::found() {
  ready_ = true;
  ++counts_.connects;
  trouble_.reset();
}

void Link::drop() {
  if (port_) port_->close();
  port_.reset();
  ready_ = false;
  lost_.wake_all();
}

void Link::lose(int tries, const std::string& cause) {
  drop();
  const DeviceLost lost{settings_.device, tries, cause};
  trouble_ = lost.problem();
  throw lost;
}

Duration Link::transfer_time(std::size_t bytes) const {
  return from_seconds(static_cast<double>(bytes) * 10.0 / settings_.baud);
}

SteadyTime Link::deadline(Duration busy, std::size_t bytes) const {
  return clock_.deadline_after(busy + transfer_time(bytes), settings_.margin);
}

asio::awaitable<void> Link::send(std::span<const std::byte> bytes, SteadyTime deadline) {
  if (!port_) throw PortLost(settings_.device, "not open");
  co_await port_->write_all(bytes, deadline);
}

asio::awaitable<std::span<const std::byte>> Link::receive(SteadyTime deadline) {
  if (!port_) throw PortLost(settings_.device, "not open");
  const std::size_t got = co_await port_->read_some(incoming_, deadline);
  co_return std::span<const std::byte>{incoming_}.first(got);
}

asio::awaitable<void> Link::keep(std::function<asio::awaitable<void>()> connect) {
  Duration pause = first_pause;
  for (;;) {
    if (ready_) {
      co_await lost_.wait();
      pause = first_pause;
      continue;
    }
    try {
      co_await connect();
      continue;
    } catch (const ProblemError& refused) {
      trouble_ = refused.problem();
    }
    co_await clock_.wait_until(clock_.steady_now() + pause);
    pause = std::min(2 * pause, longest_pause);
  }
}

}  // namespace probewright::wire
