#include "drivers/wire/descriptor.h"

#include <unistd.h>

#include <cerrno>
#include <system_error>

namespace probewright::wire {
namespace {

bool would_block(int error) { return error == EAGAIN || error == EWOULDBLOCK || error == EINTR; }

std::string words(int error) { return std::generic_category().message(error); }

}  // namespace

Descriptor::Descriptor(asio::any_io_executor executor, const LineClock& clock, int fd, std::string name)
    : clock_(clock),
      stream_(std::move(executor), fd),
      name_(std::move(name)),
      reading_{Signal{clock}},
      writing_{Signal{clock}} {}

void Descriptor::watch(Direction direction) {
  Side& side = direction == Direction::reading ? reading_ : writing_;
  if (side.watched) return;  // left over from a read that met its deadline
  side.watched = true;
  using Stream = asio::posix::stream_descriptor;
  const auto what = direction == Direction::reading ? Stream::wait_read : Stream::wait_write;
  stream_.async_wait(what, [self = shared_from_this(), &side](boost::system::error_code) {
    side.watched = false;
    side.ready.notify();
  });
}

void Descriptor::must_be_open() const {
  if (!stream_.is_open()) throw PortLost(name_, closed_because_);
}

void Descriptor::lose(std::string why) {
  close(std::move(why));
  throw PortLost(name_, closed_because_);
}

void Descriptor::close(std::string why) {
  if (!stream_.is_open()) return;
  closed_because_ = std::move(why);
  boost::system::error_code ignored;  // nothing can be done about a failing close, and the descriptor is gone anyway
  stream_.close(ignored);             // ends the watches, and they wake whoever waits
}

asio::awaitable<std::size_t> Descriptor::read(std::shared_ptr<Descriptor> self, std::span<std::byte> into,
                                              SteadyTime deadline) {
  while (true) {
    self->must_be_open();
    const auto now = self->clock_.steady_now();
    if (!self->grace_.allows(now, deadline)) throw DeadlinePassed(self->name_);
    const auto count = ::read(self->fd(), into.data(), into.size());
    if (count > 0) co_return static_cast<std::size_t>(count);
    if (count == 0) self->lose("the other side hung up");
    if (!would_block(errno)) self->lose(words(errno));
    if (now > deadline) throw DeadlinePassed(self->name_);
    self->watch(Direction::reading);
    co_await self->reading_.ready.wait(deadline);
  }
}

asio::awaitable<void> Descriptor::write(std::shared_ptr<Descriptor> self, std::span<const std::byte> bytes,
                                        SteadyTime deadline) {
  while (true) {
    self->must_be_open();
    if (bytes.empty()) co_return;
    const auto count = ::write(self->fd(), bytes.data(), bytes.size());
    if (count > 0) {
      bytes = bytes.subspan(static_cast<std::size_t>(count));
      continue;
    }
    if (count < 0 && !would_block(errno)) self->lose(words(errno));
    if (self->clock_.steady_now() > deadline) throw DeadlinePassed(self->name_);
    self->watch(Direction::writing);
    co_await self->writing_.ready.wait(deadline);
  }
}

}  // namespace probewright::wire
