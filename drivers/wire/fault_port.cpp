#include "drivers/wire/fault_port.h"

#include <algorithm>
#include <cmath>

namespace probewright::wire {
namespace {

/// From 0 up to, not including, 1; 53 bits.
double unit_draw(Entropy& entropy) { return std::ldexp(static_cast<double>(entropy.next() >> 11), -53); }

}  // namespace

FaultPort::FaultPort(std::unique_ptr<Port> port, std::vector<ByteFault> plan, FaultRate rate)
    : ForwardingPort(std::move(port)) {
  add_rate(std::move(rate));
  for (const ByteFault& fault : plan) add(fault);
}

void FaultPort::add(const ByteFault& fault) {
  (fault.direction == Direction::out ? out_ : in_).plan.emplace(fault.index, fault);
}

void FaultPort::set_rate(FaultRate rate) {
  rates_.clear();
  add_rate(std::move(rate));
}

void FaultPort::add_rate(FaultRate rate) {
  if (rate.per_byte > 0.0 && !rate.kinds.empty()) rates_.emplace_back(std::move(rate));
}

void FaultPort::heal() {
  out_.plan.clear();
  in_.plan.clear();
  rates_.clear();
}

void FaultPort::add_rate_faults(Side& side, Direction direction) {
  for (Rate& drawn : rates_) {
    const FaultRate& rate = drawn.rate;
    SeededEntropy& entropy = drawn.entropy(direction);
    if (rate.only && *rate.only != direction) continue;
    if (unit_draw(entropy) >= rate.per_byte) continue;
    const auto kind = rate.kinds[entropy.next() % rate.kinds.size()];
    const auto flip = static_cast<std::uint8_t>(1 + entropy.next() % 255);
    side.plan.emplace(side.count, ByteFault{direction, side.count, kind, flip});
  }
}

void FaultPort::pass(Side& side, std::byte byte, Bytes& to) {
  std::size_t copies = 1;
  const auto [first, last] = side.plan.equal_range(side.count);
  for (auto planned = first; planned != last; ++planned) {
    ++counts_[static_cast<std::size_t>(planned->second.kind)];
    if (planned->second.kind == FaultKind::lose) copies = 0;
    if (planned->second.kind == FaultKind::twice) copies *= 2;
    if (planned->second.kind == FaultKind::change) byte ^= std::byte{planned->second.flip};
  }
  side.plan.erase(first, last);
  to.insert(to.end(), copies, byte);
}

Bytes FaultPort::spoil(Direction direction, std::span<const std::byte> bytes) {
  Side& side = direction == Direction::out ? out_ : in_;
  Bytes spoilt;
  if (side.plan.empty() && rates_.empty()) {
    side.count += bytes.size();
    return {bytes.begin(), bytes.end()};
  }
  spoilt.reserve(bytes.size() + 4);
  for (const std::byte byte : bytes) {
    add_rate_faults(side, direction);
    pass(side, byte, spoilt);
    ++side.count;
  }
  return spoilt;
}

asio::awaitable<std::size_t> FaultPort::read_some(std::span<std::byte> into, SteadyTime deadline) {
  while (surplus_.empty()) {  // all bytes of a read may have been lost
    const auto count = co_await inner().read_some(into, deadline);
    surplus_ = spoil(Direction::in, into.first(count));
  }
  const auto count = std::min(surplus_.size(), into.size());
  std::copy_n(surplus_.begin(), count, into.begin());
  surplus_.erase(surplus_.begin(), surplus_.begin() + static_cast<std::ptrdiff_t>(count));
  co_return count;
}

asio::awaitable<void> FaultPort::write_all(std::span<const std::byte> bytes, SteadyTime deadline) {
  const Bytes spoilt = spoil(Direction::out, bytes);
  co_await inner().write_all(spoilt, deadline);
}

}  // namespace probewright::wire
