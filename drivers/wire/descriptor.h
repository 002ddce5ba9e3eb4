#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/awaitable.hpp>
#include <boost/asio/posix/stream_descriptor.hpp>
#include <cstddef>
#include <memory>
#include <span>
#include <string>

#include "drivers/wire/late_grace.h"
#include "drivers/wire/port.h"
#include "drivers/wire/signal.h"

namespace probewright::wire {

/// Reads and writes with deadlines on a non-blocking file descriptor: what serial ports and pseudo-terminals share.
/// Bytes are only ever taken by a call that returns them, so neither a deadline nor a cancellation loses any; what
/// nobody has read stays in the kernel. Held by shared_ptr: calls that wait keep it alive.
class Descriptor : public std::enable_shared_from_this<Descriptor> {
 public:
  /// Takes over `fd`. The clock must outlive the first close().
  Descriptor(asio::any_io_executor executor, const LineClock& clock, int fd, std::string name);
  static asio::awaitable<std::size_t> read(std::shared_ptr<Descriptor> self, std::span<std::byte> into,
                                           SteadyTime deadline);
  static asio::awaitable<void> write(std::shared_ptr<Descriptor> self, std::span<const std::byte> bytes,
                                     SteadyTime deadline);
  void close(std::string why = "closed");
  bool is_open() const { return stream_.is_open(); }
  int fd() { return stream_.native_handle(); }
  const std::string& name() const { return name_; }

 private:
  enum class Direction { reading, writing };
  /// One direction: whether asio watches the descriptor for it, and who waits.
  struct Side {
    Signal ready;
    bool watched = false;
  };
  void watch(Direction direction);
  void must_be_open() const;
  [[noreturn]] void lose(std::string why);

  const LineClock& clock_;
  asio::posix::stream_descriptor stream_;
  std::string name_, closed_because_;
  Side reading_, writing_;
  LateGrace grace_;
};

}  // namespace probewright::wire
