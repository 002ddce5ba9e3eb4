#pragma once
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "drivers/wire/fault_port.h"
#include "drivers/wire/link.h"
#include "drivers/wire/memory_port.h"
#include "drivers/wire/recording_port.h"
#include "station/base/entropy.h"
#include "tests/wire/line_trial.h"

/// What the tests of both drivers share: a driver on a virtual line before a fake device that can be unplugged.
namespace trial {

/// Everything that went over the line, in order; one piece for each write and read.
struct Traffic final : wire::TrafficSink {
  struct Piece {
    wire::Direction direction;
    Bytes bytes;
  };
  std::vector<Piece> pieces;
  void bytes(wire::Direction direction, SteadyTime, std::span<const std::byte> bytes) override {
    if (!bytes.empty()) pieces.push_back({direction, {bytes.begin(), bytes.end()}});
  }
};

/// A driver (made by the test, with source()) on a virtual line before one fake device. `Fake` has
/// `asio::awaitable<void> serve(std::shared_ptr<wire::Port>, wire::LineClock&)`, which ends when its port is lost.
template <class Driver, class Fake>
struct DriverBench {
  explicit DriverBench(double speed = 1.0) : line(speed) {}

  // The order matters: coroutines go with the line, and what they use goes after them.
  Fake fake;
  SeededEntropy entropy{7};
  Traffic traffic;
  std::optional<Driver> driver;
  VirtualLine line;

  bool plugged = true;
  int opened = 0;                     ///< ports, also those that failed
  std::vector<wire::ByteFault> plan;  ///< of the first port
  wire::FaultRate rate;               ///< of every port
  std::vector<std::shared_ptr<wire::Port>> device_ends;
  wire::FaultPort* port = nullptr;  ///< the station's end, newest; alive while the driver keeps it

  asio::awaitable<std::unique_ptr<wire::Port>> open() {
    const bool first = ++opened == 1;
    if (!plugged) throw wire::PortLost("/dev/fake", "no such port");
    auto [station, device] = wire::make_memory_pair(line.clock(), "/dev/fake");
    device_ends.push_back(std::move(device));
    asio::co_spawn(line.io, fake.serve(device_ends.back(), line.clock()), [](std::exception_ptr thrown) {
      if (thrown) std::rethrow_exception(thrown);
    });
    auto faulty =
        std::make_unique<wire::FaultPort>(std::move(station), first ? plan : std::vector<wire::ByteFault>{}, rate);
    port = faulty.get();
    co_return std::make_unique<wire::RecordingPort>(std::move(faulty), line.clock(), traffic);
  }
  wire::PortSource source() {
    return [this] { return open(); };
  }
  void unplug() {
    plugged = false;
    if (!device_ends.empty()) device_ends.back()->close();
  }
  double seconds_now() { return seconds(line.clock().steady_now().since_start); }

  /// Lets virtual time pass.
  void pass(Duration time) {
    line.run([this, time]() -> asio::awaitable<void> { co_await line.clock().wait_until(line.in(time)); });
  }
  /// Runs `body` (a callable that gives an awaitable) to its end; the problem it threw, or nothing.
  template <class Body>
  std::optional<Problem> problem_of(Body body) {
    const auto started = line.start(std::move(body));
    EXPECT_TRUE(line.run_until_done(*started)) << "the line stalled";
    if (!started->thrown) return std::nullopt;
    try {
      std::rethrow_exception(started->thrown);
    } catch (const ProblemError& error) {
      return error.problem();
    } catch (const std::exception& error) {
      ADD_FAILURE() << "not a problem: " << error.what();
    }
    return Problem{"none", ""};
  }
};

/// The argument `name` of a problem, or "".
inline std::string argument(const Problem& problem, std::string_view name) {
  for (const auto& [key, value] : problem.arguments)
    if (key == name) return value;
  return {};
}

/// `bytes` in rows of 16, hexadecimal and as text; rows like the one before them are folded.
inline std::string dump(char mark, std::span<const std::byte> bytes) {
  constexpr std::string_view digits = "0123456789ABCDEF";
  std::string all, last;
  int folded = 0;
  const auto unfold = [&] {
    if (folded > 0) all += std::string{mark} + " and " + std::to_string(folded) + " more rows like this one\n";
    folded = 0;
  };
  for (std::size_t at = 0; at < bytes.size(); at += 16) {
    const auto row = bytes.subspan(at, std::min<std::size_t>(16, bytes.size() - at));
    std::string hex, text;
    for (const std::byte byte : row) {
      const auto value = std::to_integer<unsigned>(byte);
      hex += digits[value >> 4];
      hex += digits[value & 15u];
      hex += ' ';
      text += value >= 0x20 && value < 0x7F ? static_cast<char>(value) : '.';
    }
    hex.resize(49, ' ');
    const std::string printed = std::string{mark} + " " + hex + text + "\n";
    if (printed == last) {
      ++folded;
      continue;
    }
    unfold();
    all += last = printed;
  }
  unfold();
  return all;
}

}  // namespace trial
