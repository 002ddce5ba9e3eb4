#pragma once
#include <array>
#include <cstdint>
#include <map>
#include <memory>
#include <optional>
#include <utility>
#include <vector>

#include "drivers/wire/forwarding_port.h"
#include "station/base/digest.h"
#include "station/base/entropy.h"

namespace probewright::wire {

/// What a bad line does to one byte.
enum class FaultKind { lose, change, twice };

/// One fault at the byte `index` (from 0) of a direction, counted as sent, before any fault.
struct ByteFault {
  Direction direction = Direction::out;
  std::uint64_t index = 0;
  FaultKind kind = FaultKind::lose;
  std::uint8_t flip = 0x01;  ///< change: the bits that turn over, not 0
};

/// Faults at random: so many per byte in each direction, each of `kinds` alike.
struct FaultRate {
  double per_byte = 0.0;
  std::vector<FaultKind> kinds{FaultKind::lose, FaultKind::change, FaultKind::twice};
  std::uint64_t seed = 0;
  std::optional<Direction> only{};  ///< one direction; both when empty
};

/// A bad line: loses, changes or doubles bytes by plan, at a rate, or both, and counts all of them. One seed gives the
/// same faults at the same bytes, however the bytes are cut into reads and writes.
class FaultPort final : public ForwardingPort {
 public:
  explicit FaultPort(std::unique_ptr<Port> port, std::vector<ByteFault> plan = {}, FaultRate rate = {});
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override;
  /// Bytes that went in so far, before any fault.
  std::uint64_t count(Direction direction) const { return side(direction).count; }
  /// Faults done so far, all or of one kind.
  std::uint64_t faults() const { return counts_[0] + counts_[1] + counts_[2]; }
  std::uint64_t faults(FaultKind kind) const { return counts_[static_cast<std::size_t>(kind)]; }
  /// One more planned fault; a byte that has passed already is past mending.
  void add(const ByteFault& fault);
  /// This rate instead of all others, from the next byte on.
  void set_rate(FaultRate rate);
  /// A rate more, from the next byte on.
  void add_rate(FaultRate rate);
  /// No faults from now on; counting goes on.
  void heal();

 private:
  struct Side {
    std::uint64_t count = 0;
    std::multimap<std::uint64_t, ByteFault> plan;
  };
  struct Rate {
    explicit Rate(FaultRate of)
        : rate(std::move(of)), out(derived_seed(rate.seed, 0)), in(derived_seed(rate.seed, 1)) {}
    SeededEntropy& entropy(Direction direction) { return direction == Direction::out ? out : in; }
    FaultRate rate;
    SeededEntropy out, in;
  };
  const Side& side(Direction direction) const { return direction == Direction::out ? out_ : in_; }
  void add_rate_faults(Side& side, Direction direction);
  void pass(Side& side, std::byte byte, Bytes& to);
  Bytes spoil(Direction direction, std::span<const std::byte> bytes);

  std::vector<Rate> rates_;
  Side out_, in_;
  Bytes surplus_;                          // read and doubled, not yet asked for
  std::array<std::uint64_t, 3> counts_{};  // by FaultKind
};

}  // namespace probewright::wire
