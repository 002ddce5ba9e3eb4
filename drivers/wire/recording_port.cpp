#include "drivers/wire/recording_port.h"

namespace probewright::wire {

asio::awaitable<std::size_t> RecordingPort::read_some(std::span<std::byte> into, SteadyTime deadline) {
  try {
    const auto count = co_await inner().read_some(into, deadline);
    sink_.bytes(Direction::in, clock_.steady_now(), into.first(count));
    co_return count;
  } catch (const PortLost& lost) {
    sink_.lost(clock_.steady_now(), lost.why());
    throw;
  }
}

asio::awaitable<void> RecordingPort::write_all(std::span<const std::byte> bytes, SteadyTime deadline) {
  sink_.bytes(Direction::out, clock_.steady_now(), bytes);
  return inner().write_all(bytes, deadline);
}

}  // namespace probewright::wire
