#include "drivers/wire/memory_port.h"

#include <algorithm>
#include <deque>

#include "drivers/wire/late_grace.h"
#include "drivers/wire/signal.h"
#include "station/base/digest.h"

namespace probewright::wire {
namespace {

constexpr std::size_t piece_size = 64;  // what a paced line hands over at a time

/// Bytes that arrive together.
struct Piece {
  SteadyTime arrives;
  Bytes bytes;
  std::size_t taken = 0;
};

/// One direction.
struct Pipe {
  explicit Pipe(const LineClock& clock) : readable(clock), writable(clock) {}
  std::deque<Piece> pieces;
  std::size_t held = 0;
  SteadyTime last_arrives{Duration::min()};
  Signal readable, writable;
  LateGrace grace;
};

/// Both directions and both ends; 0 is the station's.
struct Link {
  Link(const LineClock& c, std::string n, MemoryLine l) : clock(c), name(std::move(n)), line(l) {}
  const LineClock& clock;
  std::string name;
  MemoryLine line;
  Pipe to_device{clock}, to_station{clock};
  bool closed[2] = {false, false};

  Pipe& into(int end) { return end == 0 ? to_station : to_device; }
  Pipe& out_of(int end) { return end == 0 ? to_device : to_station; }
  void must_be_open(int end) const {
    if (closed[end]) throw PortLost(name, "closed");
  }
  bool other_closed(int end) const { return closed[1 - end]; }
  void close(int end) {
    closed[end] = true;
    for (Pipe* pipe : {&to_device, &to_station}) {
      pipe->readable.notify();
      pipe->writable.notify();
    }
  }
  Duration time_on_line(std::size_t count) const {
    return line.bytes_per_s > 0.0 ? from_seconds(static_cast<double>(count) / line.bytes_per_s) : Duration{0};
  }
};

std::size_t take(Pipe& pipe, std::span<std::byte> into, SteadyTime now) {
  std::size_t count = 0;
  while (!pipe.pieces.empty() && pipe.pieces.front().arrives <= now && count < into.size()) {
    Piece& piece = pipe.pieces.front();
    const auto part = std::min(piece.bytes.size() - piece.taken, into.size() - count);
    std::copy_n(piece.bytes.begin() + static_cast<std::ptrdiff_t>(piece.taken), part,
                into.begin() + static_cast<std::ptrdiff_t>(count));
    piece.taken += part;
    count += part;
    if (piece.taken == piece.bytes.size()) pipe.pieces.pop_front();
  }
  pipe.held -= count;
  return count;
}

void put(Link& link, Pipe& pipe, std::span<const std::byte> bytes) {
  pipe.held += bytes.size();
  pipe.last_arrives = std::max(pipe.last_arrives, link.clock.steady_now());
  while (!bytes.empty()) {
    const auto part = bytes.first(link.line.bytes_per_s > 0.0 ? std::min(bytes.size(), piece_size) : bytes.size());
    pipe.last_arrives = pipe.last_arrives + link.time_on_line(part.size());
    pipe.pieces.push_back({pipe.last_arrives, {part.begin(), part.end()}});
    bytes = bytes.subspan(part.size());
  }
  pipe.readable.notify();
}

asio::awaitable<std::size_t> read(std::shared_ptr<Link> link, int end, std::span<std::byte> into, SteadyTime deadline) {
  Pipe& pipe = link->into(end);
  while (true) {
    link->must_be_open(end);
    const auto now = link->clock.steady_now();
    if (!pipe.grace.allows(now, deadline)) throw DeadlinePassed(link->name);
    if (const auto count = take(pipe, into, now)) {
      pipe.writable.notify();
      co_return count;
    }
    if (pipe.pieces.empty() && link->other_closed(end)) throw PortLost(link->name, "the other side hung up");
    if (now >= deadline) throw DeadlinePassed(link->name);
    co_await pipe.readable.wait(pipe.pieces.empty() ? deadline : std::min(deadline, pipe.pieces.front().arrives));
  }
}

asio::awaitable<void> write(std::shared_ptr<Link> link, int end, std::span<const std::byte> bytes,
                            SteadyTime deadline) {
  Pipe& pipe = link->out_of(end);
  while (true) {
    link->must_be_open(end);
    if (link->other_closed(end)) throw PortLost(link->name, "the other side hung up");
    const auto part = bytes.first(std::min(bytes.size(), link->line.capacity - pipe.held));
    if (!part.empty()) put(*link, pipe, part);
    bytes = bytes.subspan(part.size());
    if (bytes.empty()) co_return;
    if (link->clock.steady_now() >= deadline) throw DeadlinePassed(link->name);
    co_await pipe.writable.wait(deadline);
  }
}

class MemoryPort final : public Port {
 public:
  MemoryPort(std::shared_ptr<Link> link, int end) : link_(std::move(link)), end_(end) {}
  ~MemoryPort() override { link_->close(end_); }
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override {
    return read(link_, end_, into, deadline);
  }
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    return write(link_, end_, bytes, deadline);
  }
  const std::string& name() const override { return link_->name; }
  void close() override { link_->close(end_); }

 private:
  std::shared_ptr<Link> link_;
  int end_;
};

}  // namespace

MemoryPair make_memory_pair(const LineClock& clock, const std::string& name, MemoryLine line) {
  auto link = std::make_shared<Link>(clock, name, line);
  return {std::make_unique<MemoryPort>(link, 0), std::make_unique<MemoryPort>(link, 1)};
}

}  // namespace probewright::wire
