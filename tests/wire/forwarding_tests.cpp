// Ports that watch or change the traffic.
#include <gtest/gtest.h>

#include "drivers/wire/fault_port.h"
#include "drivers/wire/memory_port.h"
#include "drivers/wire/paced_port.h"
#include "drivers/wire/recording_port.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;
using wire::ByteFault;
using wire::Direction;
using wire::FaultKind;
using wire::FaultPort;

struct Ends {
  explicit Ends(Line& line) {
    auto pair = wire::make_memory_pair(line.clock(), "memory");
    station = std::move(pair.station);
    device = std::move(pair.device);
  }
  std::unique_ptr<wire::Port> station, device;
};

/// All that has arrived, in reads of `size` bytes at the most.
asio::awaitable<std::string> read_out(wire::Port& port, SteadyTime deadline, std::size_t size) {
  std::string all;
  Bytes into(size);
  try {
    while (true) {
      const auto count = co_await port.read_some(into, deadline);
      all += text_of(std::span{into}.first(count));
    }
  } catch (const wire::DeadlinePassed&) {
  }
  co_return all;
}

/// What comes out when "0123456789" goes through, written and read in pieces of `piece`.
std::pair<std::string, std::string> through(std::vector<ByteFault> plan, std::size_t piece) {
  VirtualLine line;
  Ends ends{line};
  FaultPort port{std::move(ends.station), std::move(plan)};
  std::string out, in;
  line.run([&]() -> asio::awaitable<void> {
    const std::string_view digits = "0123456789";
    for (std::size_t at = 0; at < digits.size(); at += piece) {
      co_await port.write_all(bytes_of(digits.substr(at, piece)), line.in(1s));
      co_await ends.device->write_all(bytes_of(digits.substr(at, piece)), line.in(1s));
    }
    out = co_await read_out(*ends.device, line.in(1s), 64);
    in = co_await read_out(port, line.in(1s), piece);
  });
  EXPECT_EQ(port.count(Direction::out), 10u);
  EXPECT_EQ(port.count(Direction::in), 10u);
  return {out, in};
}

TEST(FaultPort, LosesChangesAndDoublesTheNthByteHoweverItIsCut) {
  using Pair = std::pair<std::string, std::string>;
  for (std::size_t piece = 1; piece <= 11; ++piece) {
    EXPECT_EQ(through({}, piece), (Pair{"0123456789", "0123456789"}));
    EXPECT_EQ(through({{Direction::out, 3, FaultKind::lose}}, piece), (Pair{"012456789", "0123456789"}));
    EXPECT_EQ(through({{Direction::in, 0, FaultKind::lose}}, piece), (Pair{"0123456789", "123456789"}));
    EXPECT_EQ(through({{Direction::in, 9, FaultKind::twice}}, piece), (Pair{"0123456789", "01234567899"}));
    EXPECT_EQ(through({{Direction::out, 5, FaultKind::change, 0x40}}, piece), (Pair{"01234u6789", "0123456789"}));
    EXPECT_EQ(through({{Direction::in, 4, FaultKind::twice},
                       {Direction::in, 5, FaultKind::lose},
                       {Direction::out, 0, FaultKind::lose},
                       {Direction::out, 1, FaultKind::lose}},
                      piece),
              (Pair{"23456789", "0123446789"}));
    EXPECT_EQ(through({{Direction::in, 10, FaultKind::lose}}, piece), (Pair{"0123456789", "0123456789"}));
  }
}

std::string noisy(std::uint64_t seed, double per_byte, std::size_t piece, std::uint64_t* faults = nullptr) {
  VirtualLine line;
  Ends ends{line};
  FaultPort port{std::move(ends.station), {}, {per_byte, {FaultKind::lose, FaultKind::change, FaultKind::twice}, seed}};
  const std::string sent(10'000, 'x');
  std::string got;
  line.run([&]() -> asio::awaitable<void> {
    co_await ends.device->write_all(bytes_of(sent), line.in(1s));
    got = co_await read_out(port, line.in(1s), piece);
  });
  if (faults) *faults = port.faults();
  return got;
}

TEST(FaultPort, OneSeedGivesTheSameFaultsHoweverTheBytesAreRead) {
  std::uint64_t faults = 0;
  const std::string first = noisy(7, 0.01, 100, &faults);
  EXPECT_EQ(noisy(7, 0.01, 1), first);
  EXPECT_EQ(noisy(7, 0.01, 4096), first);
  EXPECT_NE(noisy(8, 0.01, 100), first);
  EXPECT_EQ(noisy(7, 0.0, 100), std::string(10'000, 'x'));
  // Binomial with n = 10000, p = 0.01: mean 100, sd 9.95; five of them.
  EXPECT_GT(faults, 50u);
  EXPECT_LT(faults, 150u);
}

TEST(FaultPort, HealsWhenAsked) {
  VirtualLine line;
  Ends ends{line};
  FaultPort port{std::move(ends.station), {{Direction::out, 5, FaultKind::lose}}, {1.0, {FaultKind::lose}, 1}};
  line.run([&]() -> asio::awaitable<void> {
    co_await port.write_all(bytes_of("gone"), line.in(1s));
    port.heal();
    co_await port.write_all(bytes_of("here"), line.in(1s));
    const std::string got = co_await read_out(*ends.device, line.in(1s), 64);
    EXPECT_EQ(got, "here");
  });
  EXPECT_EQ(port.count(Direction::out), 8u);
  EXPECT_EQ(port.faults(), 4u);
}

struct Heard final : wire::TrafficSink {
  void bytes(Direction direction, SteadyTime at, std::span<const std::byte> bytes) override {
    log.push_back((direction == Direction::out ? "out " : "in ") + std::to_string(at.since_start / 1ms) + " " +
                  text_of(bytes));
  }
  std::vector<std::string> log;
};

TEST(RecordingPort, TellsEveryByteBothWaysWithItsTime) {
  VirtualLine line;
  Ends ends{line};
  Heard heard;
  wire::RecordingPort port{std::move(ends.station), line.clock(), heard};
  line.run([&]() -> asio::awaitable<void> {
    co_await port.write_all(bytes_of("LID?\n"), line.in(1s));
    co_await line.clock().dwell(7ms);
    co_await ends.device->write_all(bytes_of("CLOS\n"), line.in(1s));
    const std::string answer = co_await read_text(port, 5, line.in(1s));
    EXPECT_EQ(answer, "CLOS\n");
  });
  EXPECT_EQ(heard.log, (std::vector<std::string>{"out 0 LID?\n", "in 7 CLOS\n"}));
}

// 8N1 takes ten bits a byte: 92160 bytes a second at 921600 baud (common practice).
TEST(PacedPort, TakesTheTimeOfTheLine) {
  VirtualLine line;
  Ends ends{line};
  wire::PacedPort port{std::move(ends.device), line.clock(), 92160.0};
  const Bytes much(9216, std::byte{1});
  line.run([&]() -> asio::awaitable<void> {
    co_await port.write_all(much, line.in(1s));
    EXPECT_NEAR(seconds(line.clock().steady_now().since_start), 0.1, 1e-6);
    co_await port.write_all(bytes_of("x"), line.in(1s));
    EXPECT_NEAR(seconds(line.clock().steady_now().since_start), 0.1 + 1 / 92160.0, 1e-6);
    const Bytes got = co_await read_exactly(*ends.station, 9217, line.in(1s));
    EXPECT_EQ(got.size(), 9217u);
  });
}

TEST(MemoryPort, APacedLineDeliversInTimeWhileTheWriterGoesOn) {
  VirtualLine line;
  auto pair = wire::make_memory_pair(line.clock(), "memory", {92160.0, 65536});
  const Bytes much(9216, std::byte{1});
  line.run([&]() -> asio::awaitable<void> {
    co_await pair.device->write_all(much, line.in(1s));
    EXPECT_EQ(line.clock().steady_now(), SteadyTime{});
    co_await read_exactly(*pair.station, 4608, line.in(1s));
    EXPECT_NEAR(seconds(line.clock().steady_now().since_start), 0.05, 0.001);
    co_await read_exactly(*pair.station, 4608, line.in(1s));
    EXPECT_NEAR(seconds(line.clock().steady_now().since_start), 0.1, 1e-6);
  });
}

TEST(MemoryPort, WhatWasWrittenBeforeTheCloseIsStillRead) {
  VirtualLine line;
  auto pair = wire::make_memory_pair(line.clock(), "memory", {92160.0, 65536});
  const auto reader = line.start([&]() -> asio::awaitable<void> {
    co_await pair.device->write_all(bytes_of("last words"), line.in(1s));
    pair.device.reset();
    const std::string text = co_await read_text(*pair.station, 10, line.in(1s));
    EXPECT_EQ(text, "last words");
    co_await read_exactly(*pair.station, 1, line.in(1s));
  });
  EXPECT_TRUE(line.run_until_done(*reader));
  EXPECT_EQ(reader->end(), "port lost");
}

}  // namespace
