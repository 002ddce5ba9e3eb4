#pragma once
#include <gtest/gtest.h>

#include <boost/asio/awaitable.hpp>
#include <boost/asio/bind_cancellation_slot.hpp>
#include <boost/asio/cancellation_signal.hpp>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/error.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/system/system_error.hpp>
#include <chrono>
#include <memory>
#include <string>
#include <string_view>

#include "drivers/wire/asio_clock.h"
#include "drivers/wire/port.h"
#include "drivers/wire/virtual_clock.h"
#include "station/base/digest.h"

/// What tests of the line share: a line thread with a clock, coroutines on it, bytes and texts.
namespace trial {

namespace asio = boost::asio;
using namespace probewright;
using namespace std::chrono_literals;

inline std::span<const std::byte> bytes_of(std::string_view text) { return std::as_bytes(std::span{text}); }
inline std::string text_of(std::span<const std::byte> bytes) {
  return {reinterpret_cast<const char*>(bytes.data()), bytes.size()};
}

/// A coroutine that was started: how it ended, and how to cancel it.
struct Started {
  bool done = false;
  std::exception_ptr thrown;
  asio::cancellation_signal cancel;
  /// "" after a return, else the kind of what it threw.
  std::string end() const {
    if (!done) return "still running";
    if (!thrown) return "";
    try {
      std::rethrow_exception(thrown);
    } catch (const wire::DeadlinePassed&) {
      return "deadline passed";
    } catch (const wire::PortLost&) {
      return "port lost";
    } catch (const boost::system::system_error& error) {
      return error.code() == asio::error::operation_aborted ? "cancelled" : error.what();
    } catch (const std::exception& error) {
      return error.what();
    }
  }
};

/// One line thread: an io_context and a clock that runs it.
class Line {
 public:
  virtual ~Line() = default;
  virtual wire::LineClock& clock() = 0;
  /// Runs until the coroutine is done; false when it never would be.
  virtual bool run_until_done(const Started& started) = 0;

  /// `body` is a callable that gives an awaitable<void>; it is kept alive with its coroutine.
  template <class Body>
  std::shared_ptr<Started> start(Body body) {
    auto started = std::make_shared<Started>();
    asio::co_spawn(io, std::move(body),
                   asio::bind_cancellation_slot(started->cancel.slot(), [started](std::exception_ptr thrown) {
                     started->done = true;
                     started->thrown = thrown;
                   }));
    return started;
  }
  /// Runs `body` to its end, which must not be an exception.
  template <class Body>
  void run(Body body) {
    const auto started = start(std::move(body));
    EXPECT_TRUE(run_until_done(*started)) << "the line stalled";
    EXPECT_EQ(started->end(), "");
  }
  SteadyTime in(Duration from_now) { return clock().steady_now() + from_now; }

  asio::io_context io;
};

class VirtualLine final : public Line {
 public:
  explicit VirtualLine(double speed = 1.0) : clock_(epoch, speed) {}
  wire::VirtualClock& clock() override { return clock_; }
  bool run_until_done(const Started& started) override {
    return clock_.run_until(io, [&] { return started.done; }) == wire::VirtualClock::Ended::reached;
  }

 private:
  static constexpr UtcTime epoch{1'796'103'372'000'000};  // 2026-12-01T05:36:12Z
  wire::VirtualClock clock_;
};

class RealLine final : public Line {
 public:
  explicit RealLine(double speed = 1.0) : clock_(io.get_executor(), speed) {}
  wire::AsioClock& clock() override { return clock_; }
  bool run_until_done(const Started& started) override {
    const auto limit = std::chrono::steady_clock::now() + 60s;
    while (!started.done && std::chrono::steady_clock::now() < limit) {
      io.restart();
      if (io.run_one_for(1s) == 0 && !started.done && io.stopped()) return false;
    }
    return started.done;
  }

 private:
  wire::AsioClock clock_;
};

/// Reads exactly `size` bytes.
inline asio::awaitable<Bytes> read_exactly(wire::Port& port, std::size_t size, SteadyTime deadline) {
  Bytes all(size);
  std::size_t have = 0;
  while (have < size) have += co_await port.read_some(std::span{all}.subspan(have), deadline);
  co_return all;
}

inline asio::awaitable<std::string> read_text(wire::Port& port, std::size_t size, SteadyTime deadline) {
  const Bytes bytes = co_await read_exactly(port, size, deadline);
  co_return text_of(bytes);
}

}  // namespace trial
