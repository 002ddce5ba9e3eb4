#include "tests/faults/shift/planted.h"

#include <algorithm>

#include "drivers/wire/checked_line.h"
#include "drivers/wire/forwarding_port.h"
#include "drivers/wire/frame.h"

namespace probewright::faults {
namespace {

namespace asio = boost::asio;

constexpr std::uint8_t set_drive = 0x02, end_of_capture = 0x51, reply_bit = 0x80;

/// A port that may put bytes of its own in front of what comes.
class Meddler : public wire::ForwardingPort {
 public:
  using ForwardingPort::ForwardingPort;
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override {
    while (own_.empty()) {
      const auto count = co_await inner().read_some(into, deadline);
      came(into.first(count));
    }
    const auto count = std::min(own_.size(), into.size());
    std::copy_n(own_.begin(), count, into.begin());
    own_.erase(own_.begin(), own_.begin() + static_cast<std::ptrdiff_t>(count));
    co_return count;
  }

 protected:
  /// What the driver gets of bytes that came.
  virtual void came(std::span<const std::byte> bytes) { say(bytes); }
  void say(std::span<const std::byte> bytes) { own_.insert(own_.end(), bytes.begin(), bytes.end()); }

 private:
  Bytes own_;
};

/// Gives every reply of an adapter the number of the newest request.
class NumberBlind final : public Meddler {
 public:
  using Meddler::Meddler;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    asked_.feed(bytes);
    while (const auto frame = asked_.next()) newest_ = frame->sequence;
    return inner().write_all(bytes, deadline);
  }

 private:
  void came(std::span<const std::byte> bytes) override {
    replies_.feed(bytes);
    while (auto frame = replies_.next()) {
      if (frame->type >= reply_bit) frame->sequence = newest_;
      say(wire::encode_frame(*frame));
    }
  }
  wire::FrameReader asked_, replies_;
  std::uint16_t newest_ = 0;
};

/// Answers a phantom's fence itself, at once.
class FenceBlind final : public Meddler {
 public:
  using Meddler::Meddler;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    const std::string_view text{reinterpret_cast<const char*>(bytes.data()), bytes.size()};
    const auto at = text.find("SYST:ECHO? ");
    if (at == std::string_view::npos) return inner().write_all(bytes, deadline);
    const std::string echo{text.substr(at + 11, 10)};  // eight characters in quotes
    const std::string answer = wire::add_checksum(echo);
    say(std::as_bytes(std::span{answer}));
    return done();
  }

 private:
  static asio::awaitable<void> done() { co_return; }
};

/// Keeps "LEDs off" from an adapter that is lit while the run has taken fewer captures than a whole one.
class DarkSwallower final : public Meddler {
 public:
  using Meddler::Meddler;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    wire::FrameReader reader;
    reader.feed(bytes);
    while (const auto frame = reader.next()) {
      if (frame->type != set_drive) continue;
      const bool off =
          std::all_of(frame->payload.begin(), frame->payload.end(), [](std::byte b) { return b == std::byte{0}; });
      if (!off) {
        lit_ = true;
        captures_ = 0;
      } else if (lit_ && captures_ < 3) {
        say(wire::encode_frame({set_drive | reply_bit, frame->sequence, frame->payload}));
        return done();
      } else {
        lit_ = false;
      }
    }
    return inner().write_all(bytes, deadline);
  }

 private:
  static asio::awaitable<void> done() { co_return; }
  void came(std::span<const std::byte> bytes) override {
    replies_.feed(bytes);
    while (const auto frame = replies_.next()) captures_ += frame->type == end_of_capture;
    say(bytes);
  }
  wire::FrameReader replies_;
  bool lit_ = false;
  int captures_ = 0;
};

using Wrap = std::unique_ptr<wire::Port> (*)(std::unique_ptr<wire::Port>, sequence::DeviceKind);

asio::awaitable<std::unique_ptr<wire::Port>> open_wrapped(wire::PortSource source, Wrap wrap,
                                                          sequence::DeviceKind kind) {
  auto port = co_await source();
  co_return wrap(std::move(port), kind);
}

sequence::PortOpener wrapped(sequence::PortOpener ports, Wrap wrap) {
  return [ports = std::move(ports), wrap](const sequence::DevicePlace& place, int nest, sequence::DeviceKind kind) {
    const wire::PortSource source = ports(place, nest, kind);
    return [source, wrap, kind] { return open_wrapped(source, wrap, kind); };
  };
}

}  // namespace

sequence::PortOpener taking_late_replies_for_the_next(sequence::PortOpener ports) {
  return wrapped(std::move(ports), [](std::unique_ptr<wire::Port> port, sequence::DeviceKind kind) {
    if (kind == sequence::DeviceKind::adapter)
      return std::unique_ptr<wire::Port>{std::make_unique<NumberBlind>(std::move(port))};
    return std::unique_ptr<wire::Port>{std::make_unique<FenceBlind>(std::move(port))};
  });
}

sequence::PortOpener leaving_leds_on_after_a_void(sequence::PortOpener ports) {
  return wrapped(std::move(ports), [](std::unique_ptr<wire::Port> port, sequence::DeviceKind kind) {
    if (kind == sequence::DeviceKind::adapter)
      return std::unique_ptr<wire::Port>{std::make_unique<DarkSwallower>(std::move(port))};
    return port;
  });
}

}  // namespace probewright::faults
