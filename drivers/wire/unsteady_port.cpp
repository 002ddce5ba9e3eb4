#include "drivers/wire/unsteady_port.h"

#include <algorithm>
#include <cmath>

namespace probewright::wire {
namespace {

/// From 0 up to, not including, 1; 53 bits.
double unit_draw(Entropy& entropy) { return std::ldexp(static_cast<double>(entropy.next() >> 11), -53); }

constexpr std::uint64_t most_cuts = 4;

}  // namespace

int Unsteadiness::add(UnsteadyShare share) {
  const SeededEntropy entropy{share.seed};
  active_.push_back({++numbers_, std::move(share), entropy});
  return numbers_;
}

void Unsteadiness::end(int number) {
  active_.remove_if([number](const Active& active) { return active.number == number; });
}

bool Unsteadiness::happens(Active& active) {
  if (active.share.next > 0) {
    --active.share.next;
    return true;
  }
  return active.share.share > 0.0 && unit_draw(active.entropy) < active.share.share;
}

/// Every byte has its chance to be the one after which nothing comes for a while.
void Unsteadiness::pause(Active& active, std::size_t size, Fate& fate) {
  if (active.share.next > 0) {
    --active.share.next;
    fate.cuts.emplace_back(active.entropy.next() % size, active.share.by);
    ++counts_[static_cast<std::size_t>(Unsteady::pause)];
    return;
  }
  for (std::size_t at = 0; at < size && active.share.share > 0.0; ++at) {
    if (unit_draw(active.entropy) >= active.share.share) continue;
    fate.cuts.emplace_back(at, active.share.by);
    ++counts_[static_cast<std::size_t>(Unsteady::pause)];
  }
}

void Unsteadiness::apply(Active& active, std::size_t size, Fate& fate) {
  const UnsteadyShare& share = active.share;
  if (share.kind == Unsteady::pause) return pause(active, size, fate);
  if (!happens(active)) return;
  ++counts_[static_cast<std::size_t>(share.kind)];
  if (share.kind == Unsteady::missing) fate.missing = true;
  if (share.kind == Unsteady::late) fate.wait_before += share.by;
  if (share.kind == Unsteady::noise) {
    for (std::size_t i = 0; i < share.bytes; ++i) fate.noise.push_back(std::byte(active.entropy.next() & 0xFFu));
  }
  if (share.kind == Unsteady::split) {
    const std::uint64_t cuts = 1 + active.entropy.next() % most_cuts;
    for (std::uint64_t i = 0; i < cuts; ++i) fate.cuts.emplace_back(active.entropy.next() % size, share.by);
  }
}

Unsteadiness::Fate Unsteadiness::draw(Direction direction, std::size_t size) {
  Fate fate;
  if (size == 0) return fate;
  for (Active& active : active_) {
    if (active.share.direction == direction) apply(active, size, fate);
  }
  std::sort(fate.cuts.begin(), fate.cuts.end());
  return fate;
}

void UnsteadyPort::take(std::span<const std::byte> message) {
  const auto fate = unsteadiness_->draw(Direction::in, message.size());
  SteadyTime from = held_.empty() ? clock_.steady_now() : std::max(held_.back().from, clock_.steady_now());
  if (!fate.noise.empty()) held_.push_back({from, fate.noise});
  std::size_t taken = 0;
  for (const auto& [at, pause] : fate.cuts) {
    const auto part = message.subspan(taken, at - taken);
    if (!part.empty()) held_.push_back({from, {part.begin(), part.end()}});
    from = from + pause;
    taken = at;
  }
  const auto rest = message.subspan(taken);
  held_.push_back({from, {rest.begin(), rest.end()}});
}

asio::awaitable<std::size_t> UnsteadyPort::read_some(std::span<std::byte> into, SteadyTime deadline) {
  if (!grace_.allows(clock_.steady_now(), deadline)) throw DeadlinePassed(name());
  if (held_.empty()) {
    const auto count = co_await inner().read_some(into, deadline);
    if (unsteadiness_->steady()) co_return count;
    take(into.first(count));
  }
  if (held_.front().from > std::max(deadline, clock_.steady_now())) {
    co_await clock_.wait_until(deadline);
    throw DeadlinePassed(name());
  }
  co_await clock_.wait_until(held_.front().from);
  Bytes& front = held_.front().bytes;
  const auto count = std::min(front.size(), into.size());
  std::copy_n(front.begin(), count, into.begin());
  front.erase(front.begin(), front.begin() + static_cast<std::ptrdiff_t>(count));
  if (front.empty()) held_.pop_front();
  co_return count;
}

asio::awaitable<void> UnsteadyPort::write_all(std::span<const std::byte> bytes, SteadyTime deadline) {
  if (unsteadiness_->steady()) return inner().write_all(bytes, deadline);
  return write_unsteadily(bytes, deadline);
}

asio::awaitable<void> UnsteadyPort::write_unsteadily(std::span<const std::byte> bytes, SteadyTime deadline) {
  const auto fate = unsteadiness_->draw(Direction::out, bytes.size());
  if (fate.missing) co_return;
  Duration waited = fate.wait_before;
  co_await clock_.wait_until(clock_.steady_now() + fate.wait_before);
  if (!fate.noise.empty()) co_await inner().write_all(fate.noise, deadline + waited);
  std::size_t sent = 0;
  for (const auto& [at, pause] : fate.cuts) {
    if (at > sent) co_await inner().write_all(bytes.subspan(sent, at - sent), deadline + waited);
    co_await clock_.wait_until(clock_.steady_now() + pause);
    waited += pause;
    sent = at;
  }
  co_await inner().write_all(bytes.subspan(sent), deadline + waited);
}

}  // namespace probewright::wire
