#pragma once
#include <gtest/gtest.h>

#include <boost/asio/awaitable.hpp>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>
#include <exception>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/emulated/bench.h"
#include "drivers/wire/cobs.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/frame.h"
#include "drivers/wire/le.h"
#include "drivers/wire/line_reader.h"
#include "drivers/wire/virtual_clock.h"

namespace probewright::emulated {

inline constexpr DeviceId phantom1{1, DeviceKind::phantom}, adapter1{1, DeviceKind::adapter};

/// A bench under the virtual clock, spoken to byte by byte as a stranger would from the WIRE texts.
class Trial {
 public:
  explicit Trial(BenchOptions options = perfect(), ActionObserver* observer = nullptr)
      : clock({0}, options.speed), bench(io.get_executor(), clock, options, observer) {}

  static BenchOptions perfect() {
    BenchOptions options;
    options.seed = 4;
    options.perfect = true;
    return options;
  }

  /// Runs a coroutine to its end; the exception that ends it comes out.
  void run(asio::awaitable<void> work) {
    std::optional<std::exception_ptr> end;
    asio::co_spawn(io, std::move(work), [&](std::exception_ptr exception) { end = exception; });
    clock.run_until(io, [&] { return end.has_value(); });
    if (!end) throw std::runtime_error("the trial stalled");
    if (*end) std::rethrow_exception(*end);
  }

  void wait_s(double time_s) { run(waited(&clock, clock.steady_now() + from_seconds(time_s))); }
  double now_s() const { return seconds(clock.steady_now().since_start); }

  asio::io_context io{1};
  wire::VirtualClock clock;
  Bench bench;

 private:
  static asio::awaitable<void> waited(wire::LineClock* clock, SteadyTime until) { co_await clock->wait_until(until); }
};

/// Raw bytes over one port.
class RawEnd {
 public:
  RawEnd(Trial& trial, const DeviceId& device) : trial_(trial), port_(trial.bench.open(device)) {}

  void send(std::string_view text) { trial_.run(write(port_.get(), text)); }
  /// What comes within `for_s`.
  std::string receive(double for_s) {
    std::string got;
    trial_.run(read(port_.get(), &got, trial_.clock.steady_now() + from_seconds(for_s)));
    return got;
  }
  /// Reads until `enough` holds or `for_s` is over.
  std::string receive_until(double for_s, const std::function<bool(const std::string&)>& enough) {
    std::string got;
    const SteadyTime deadline = trial_.clock.steady_now() + from_seconds(for_s);
    while (!enough(got)) {
      const std::size_t before = got.size();
      trial_.run(read_once(port_.get(), &got, deadline));
      if (got.size() == before) break;
    }
    return got;
  }

 private:
  static asio::awaitable<void> write(wire::Port* port, std::string_view text) {
    co_await port->write_all(std::as_bytes(std::span{text}), SteadyTime{Duration::max()});
  }
  static asio::awaitable<void> read_once(wire::Port* port, std::string* got, SteadyTime deadline) {
    char bytes[4096];
    try {
      const auto count = co_await port->read_some(std::as_writable_bytes(std::span{bytes}), deadline);
      got->append(bytes, count);
    } catch (const wire::DeadlinePassed&) {
    }
  }
  static asio::awaitable<void> read(wire::Port* port, std::string* got, SteadyTime deadline) {
    while (true) {
      const std::size_t before = got->size();
      co_await read_once(port, got, deadline);
      if (got->size() == before) co_return;
    }
  }
  Trial& trial_;
  std::unique_ptr<wire::Port> port_;
};

/// Messages to the phantom.
class PhantomEnd : public RawEnd {
 public:
  explicit PhantomEnd(Trial& trial, const DeviceId& device = phantom1) : RawEnd(trial, device) {}
  /// The answer line without LF; "(silence)" when none comes within `for_s`.
  std::string ask(std::string_view message, double for_s = 3.0) {
    send(std::string(message) + "\n");
    wire::LineReader lines(100000, wire::LineReader::Blocks::inside);
    std::optional<std::string> line;
    receive_until(for_s, [&, fed = std::size_t{0}](const std::string& got) mutable {
      lines.feed(std::as_bytes(std::span{got}.subspan(fed)));
      fed = got.size();
      line = lines.next();
      return line.has_value();
    });
    return line.value_or("(silence)");
  }
  /// Sends a command without answer; gives the error that it made, as the number alone.
  int error_of(std::string_view message) {
    send(std::string(message) + "\n");
    receive(0.0);
    const std::string error = ask("SYST:ERR?");
    EXPECT_EQ(ask("SYST:ERR?"), "0,\"No error\"") << "after " << message;
    return std::stoi(error);
  }
};

/// Frames to the adapter.
class AdapterEnd : public RawEnd {
 public:
  explicit AdapterEnd(Trial& trial, const DeviceId& device = adapter1) : RawEnd(trial, device) {}
  void request(std::uint8_t type, Bytes payload = {}, std::optional<std::uint16_t> sequence = std::nullopt) {
    const Bytes bytes = wire::encode_frame({type, sequence.value_or(++sequence_), std::move(payload)});
    send({reinterpret_cast<const char*>(bytes.data()), bytes.size()});
  }
  /// The next frame, or nothing within `for_s`.
  std::optional<wire::Frame> next(double for_s = 3.0) {
    std::optional<wire::Frame> frame = frames_.next();
    if (frame) return frame;
    receive_until(for_s, [&, fed = std::size_t{0}](const std::string& got) mutable {
      frames_.feed(std::as_bytes(std::span{got}.subspan(fed)));
      fed = got.size();
      frame = frames_.next();
      return frame.has_value();
    });
    return frame;
  }
  /// Sends a request and gives the payload of its reply; checks type and sequence.
  Bytes ask(std::uint8_t type, Bytes payload = {}) {
    request(type, std::move(payload));
    const auto frame = next();
    if (!frame) {
      ADD_FAILURE() << "no reply to " << int{type};
      return {};
    }
    EXPECT_EQ(frame->type, type | 0x80);
    EXPECT_EQ(frame->sequence, sequence_);
    return frame->payload;
  }
  struct Error {
    int request = 0, code = 0;
    std::uint32_t detail = 0;
    bool operator==(const Error&) const = default;
  };
  /// Sends a request that must fail.
  Error error_of(std::uint8_t type, Bytes payload = {}) {
    request(type, std::move(payload));
    const auto frame = next();
    if (!frame || frame->type != 0xFF || frame->sequence != sequence_) {
      ADD_FAILURE() << "no error reply to " << int{type};
      return {};
    }
    wire::LeReader fields{frame->payload};
    Error error{fields.u8(), fields.u8(), fields.u32()};
    EXPECT_TRUE(fields.finished());
    return error;
  }
  std::uint16_t sequence() const { return sequence_; }

 private:
  wire::FrameReader frames_;
  std::uint16_t sequence_ = 100;
};

inline wire::LeWriter pack() { return {}; }

}  // namespace probewright::emulated
