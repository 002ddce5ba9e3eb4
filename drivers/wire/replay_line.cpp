#include "drivers/wire/replay_line.h"

#include <algorithm>
#include <boost/asio/co_spawn.hpp>

#include "drivers/wire/memory_port.h"
#include "drivers/wire/wait_queue.h"

namespace probewright::wire {
namespace {

using Kind = WireEvent::Kind;

bool is_opening(Kind kind) { return kind == Kind::opened || kind == Kind::not_opened; }

void end_of_replay(const std::exception_ptr& error) {
  if (!error) return;
  try {
    std::rethrow_exception(error);
  } catch (const PortLost&) {
  }
}

}  // namespace

/// How far the recording of a device has been played.
struct ReplayLine::Device {
  LineRecording recording;
  std::size_t next_opening = 0;
  std::size_t next_sent = 0;   ///< event
  std::size_t sent_bytes = 0;  ///< of it, compared already
};

/// What happened between one opening and the next.
struct ReplayLine::Connection {
  std::weak_ptr<ReplayLine*> replay;
  VirtualClock& clock;
  std::shared_ptr<Device> device;
  std::unique_ptr<Port> inside;
  std::size_t first = 0;
};

ReplayLine::ReplayLine(asio::io_context& io, VirtualClock& clock, std::vector<LineRecording> lines)
    : io_(io), clock_(clock), self_(std::make_shared<ReplayLine*>(this)) {
  for (LineRecording& line : lines) {
    std::string device = line.device;
    devices_.emplace(std::move(device), std::make_shared<Device>(Device{std::move(line)}));
  }
}

ReplayLine::~ReplayLine() = default;

void ReplayLine::differs(const std::string& device, Duration at, const std::string& why) {
  if (difference_) return;
  difference_ = Problem{"replay_differs", device, {{"at", seconds_text(at)}, {"why", why}}};
}

PortSource ReplayLine::source(const std::string& device) {
  return [this, device] { return open(this, device); };
}

asio::awaitable<std::unique_ptr<Port>> ReplayLine::open(ReplayLine* self, std::string device) {
  const auto found = self->devices_.find(device);
  if (found == self->devices_.end()) throw ProblemError(Problem{"port_missing", device});
  Device& played = *found->second;
  const auto& events = played.recording.events;
  while (played.next_opening < events.size() && !is_opening(events[played.next_opening].kind)) ++played.next_opening;
  const Duration now = self->clock_.steady_now().since_start;
  if (played.next_opening == events.size()) throw ProblemError(Problem{"port_missing", device});
  const WireEvent& opening = events[played.next_opening++];
  if (opening.at != now) self->differs(device, now, "the port was opened at " + seconds_text(opening.at));
  if (opening.kind == Kind::not_opened) {
    if (const auto problem = problem_in_words(opening.words)) throw ProblemError(*problem);
    throw PortLost(device, opening.words);
  }
  auto pair = make_memory_pair(self->clock_, opening.words.empty() ? device : opening.words);
  auto connection = std::make_shared<Connection>(
      Connection{self->self_, self->clock_, found->second, std::move(pair.device), played.next_opening});
  asio::co_spawn(self->io_, hear(connection), end_of_replay);
  asio::co_spawn(self->io_, say(connection), end_of_replay);
  co_return std::move(pair.station);
}

asio::awaitable<void> ReplayLine::say(std::shared_ptr<Connection> connection) {
  const auto& events = connection->device->recording.events;
  for (std::size_t i = connection->first; i < events.size() && !is_opening(events[i].kind); ++i) {
    if (events[i].kind == Kind::sent) continue;
    co_await connection->clock.wait_until(SteadyTime{events[i].at});
    if (events[i].kind == Kind::lost) {
      connection->inside->close();
      co_return;
    }
    co_await connection->inside->write_all(events[i].bytes, WaitQueue::never);
  }
}

asio::awaitable<void> ReplayLine::hear(std::shared_ptr<Connection> connection) {
  std::array<std::byte, 4096> bytes{};
  while (true) {
    const auto count = co_await connection->inside->read_some(bytes, WaitQueue::never);
    const auto replay = connection->replay.lock();
    if (!replay) co_return;
    (*replay)->compare(*connection->device, std::span{bytes}.first(count));
  }
}

void ReplayLine::compare(Device& device, std::span<const std::byte> bytes) {
  const auto& events = device.recording.events;
  const Duration now = clock_.steady_now().since_start;
  while (!bytes.empty()) {
    while (device.next_sent < events.size() && events[device.next_sent].kind != Kind::sent) ++device.next_sent;
    if (device.next_sent == events.size()) return differs(device.recording.device, now, "nothing more was sent");
    const WireEvent& sent = events[device.next_sent];
    if (sent.at != now) differs(device.recording.device, now, "the next bytes were sent at " + seconds_text(sent.at));
    const auto rest = std::span{sent.bytes}.subspan(device.sent_bytes);
    const auto part = std::min(rest.size(), bytes.size());
    if (!std::equal(rest.begin(), rest.begin() + static_cast<std::ptrdiff_t>(part), bytes.begin())) {
      differs(device.recording.device, now, "other bytes were sent");
    }
    bytes = bytes.subspan(part);
    device.sent_bytes += part;
    if (device.sent_bytes < sent.bytes.size()) continue;
    ++device.next_sent;
    device.sent_bytes = 0;
  }
}

}  // namespace probewright::wire
