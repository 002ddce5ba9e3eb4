#pragma once
#include <array>
#include <cstdint>
#include <list>
#include <memory>
#include <vector>

#include "drivers/wire/forwarding_port.h"
#include "drivers/wire/late_grace.h"
#include "drivers/wire/line_clock.h"
#include "station/base/digest.h"
#include "station/base/entropy.h"

namespace probewright::wire {

/// What an unsteady line does to messages and to their timing. A message is what one write of the port hands over, or
/// what one read of it brings.
enum class Unsteady {
  pause,    ///< bytes stop coming for a while in mid-message
  split,    ///< a message comes in pieces, cut anywhere
  noise,    ///< bytes that nobody sent, before a message
  late,     ///< a message that the port writes waits before it goes
  missing,  ///< a message that the port writes never goes
};
inline constexpr std::size_t unsteady_kinds = 5;

struct UnsteadyShare {
  Unsteady kind = Unsteady::pause;
  Direction direction = Direction::out;  ///< late and missing: out alone
  double share = 0.0;                    ///< pause: per byte; else per message
  int next = 0;                          ///< so many next messages, for sure
  Duration by{0};                        ///< pause, late; between the pieces of a split
  std::size_t bytes = 8;                 ///< of noise
  std::uint64_t seed = 0;
};

/// What is wrong with a line, kept beyond the ports that it has one after the other. Line thread only.
class Unsteadiness {
 public:
  /// From the next message on. The number ends it.
  int add(UnsteadyShare share);
  void end(int number);
  void end_all() { active_.clear(); }
  bool steady() const { return active_.empty(); }
  /// How often it has happened.
  std::uint64_t count(Unsteady kind) const { return counts_[static_cast<std::size_t>(kind)]; }

  /// What happens to the next message of `size` bytes.
  struct Fate {
    bool missing = false;
    Duration wait_before{0};
    Bytes noise;
    /// Offsets where the message is cut, rising, and how long nothing comes then.
    std::vector<std::pair<std::size_t, Duration>> cuts;
  };
  Fate draw(Direction direction, std::size_t size);

 private:
  struct Active {
    int number = 0;
    UnsteadyShare share;
    SeededEntropy entropy;
  };
  bool happens(Active& active);
  void apply(Active& active, std::size_t size, Fate& fate);
  void pause(Active& active, std::size_t size, Fate& fate);

  std::list<Active> active_;
  std::array<std::uint64_t, unsteady_kinds> counts_{};
  int numbers_ = 0;
};

/// A line that is late, leaves out, cuts and chatters. Deadlines of writes move by what they wait; a wait is not ended
/// by close(), so whoever waits holds the port. The clock must outlive it.
class UnsteadyPort final : public ForwardingPort {
 public:
  UnsteadyPort(std::unique_ptr<Port> port, LineClock& clock, std::shared_ptr<Unsteadiness> unsteadiness)
      : ForwardingPort(std::move(port)), clock_(clock), unsteadiness_(std::move(unsteadiness)) {}
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override;

 private:
  /// Bytes that came together and may be read from a moment on.
  struct Piece {
    SteadyTime from;
    Bytes bytes;
  };
  void take(std::span<const std::byte> message);
  asio::awaitable<void> write_unsteadily(std::span<const std::byte> bytes, SteadyTime deadline);

  LineClock& clock_;
  std::shared_ptr<Unsteadiness> unsteadiness_;
  std::list<Piece> held_;  // read, not yet asked for
  LateGrace grace_;
};

}  // namespace probewright::wire
