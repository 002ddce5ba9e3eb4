// One suite for every port: what a driver may rely on, whichever port it was given.
#include <gtest/gtest.h>

#include <functional>
#include <string>

#include "drivers/wire/fault_port.h"
#include "drivers/wire/memory_port.h"
#include "drivers/wire/paced_port.h"
#include "drivers/wire/pty_master.h"
#include "drivers/wire/recording_port.h"
#include "drivers/wire/serial_port.h"
#include "drivers/wire/unsteady_port.h"
#include "station/base/entropy.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;
using wire::Port;

class NoSink final : public wire::TrafficSink {
 public:
  void bytes(wire::Direction, SteadyTime, std::span<const std::byte>) override {}
};

/// A line with two ends: `near` is the port under test, `far` what it is connected to.
struct Bed {
  std::unique_ptr<Line> line;
  std::unique_ptr<Port> near, far;
  NoSink sink;
  bool hears_hang_up = true;  ///< near is lost when far closes
};

void use_memory(Bed& bed, double bytes_per_s = 0.0) {
  auto pair = wire::make_memory_pair(bed.line->clock(), "memory", {bytes_per_s, 65536});
  bed.near = std::move(pair.station);
  bed.far = std::move(pair.device);
}

void use_pseudo_terminal(Bed& bed) {
  bed.line = std::make_unique<RealLine>();
  auto master = wire::PtyMaster::create(bed.line->io.get_executor(), bed.line->clock());
  ASSERT_TRUE(master.has_value()) << master.error().text();
  auto serial = wire::open_serial(bed.line->io.get_executor(), bed.line->clock(), (*master)->slave_path(), 921600);
  ASSERT_TRUE(serial.has_value()) << serial.error().text();
  bed.near = *std::move(serial);
  bed.far = *std::move(master);
}

struct Case {
  const char* name;
  std::function<void(Bed&)> make;
};

void PrintTo(const Case& tried, std::ostream* out) { *out << tried.name; }

const Case cases[] = {
    {"SerialPortOnPseudoTerminal", [](Bed& bed) { use_pseudo_terminal(bed); }},
    {"PseudoTerminalMaster",
     [](Bed& bed) {
       use_pseudo_terminal(bed);
       std::swap(bed.near, bed.far);
       bed.hears_hang_up = false;  // stations come and go, the device stays
     }},
    {"MemoryVirtual",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
     }},
    {"MemoryPacedVirtual",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed, 1e7);
     }},
    {"MemoryReal",
     [](Bed& bed) {
       bed.line = std::make_unique<RealLine>();
       use_memory(bed);
     }},
    {"MemoryPacedReal",
     [](Bed& bed) {
       bed.line = std::make_unique<RealLine>();
       use_memory(bed, 1e7);
     }},
    {"Forwarding",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
       bed.near = std::make_unique<wire::ForwardingPort>(std::move(bed.near));
     }},
    {"Recording",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
       bed.near = std::make_unique<wire::RecordingPort>(std::move(bed.near), bed.line->clock(), bed.sink);
     }},
    {"UnsteadyWithoutTrouble",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
       bed.near = std::make_unique<wire::UnsteadyPort>(std::move(bed.near), bed.line->clock(),
                                                       std::make_shared<wire::Unsteadiness>());
     }},
    {"UnsteadyInPieces",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
       auto unsteadiness = std::make_shared<wire::Unsteadiness>();
       unsteadiness->add({wire::Unsteady::split, wire::Direction::out, 1.0});
       unsteadiness->add({wire::Unsteady::split, wire::Direction::in, 1.0});
       bed.near = std::make_unique<wire::UnsteadyPort>(std::move(bed.near), bed.line->clock(), unsteadiness);
     }},
    {"FaultWithoutFaults",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
       bed.near = std::make_unique<wire::FaultPort>(std::move(bed.near));
     }},
    {"Paced",
     [](Bed& bed) {
       bed.line = std::make_unique<VirtualLine>();
       use_memory(bed);
       bed.near = std::make_unique<wire::PacedPort>(std::move(bed.near), bed.line->clock(), 1e7);
     }},
    {"AllOnPseudoTerminal",
     [](Bed& bed) {
       use_pseudo_terminal(bed);
       bed.near =
           std::make_unique<wire::RecordingPort>(std::make_unique<wire::FaultPort>(std::make_unique<wire::PacedPort>(
                                                     std::move(bed.near), bed.line->clock(), 1e7)),
                                                 bed.line->clock(), bed.sink);
     }},
};

class AnyPort : public testing::TestWithParam<Case> {
 protected:
  void SetUp() override { GetParam().make(bed); }
  Line& line() { return *bed.line; }
  Port& near() { return *bed.near; }
  Port& far() { return *bed.far; }
  asio::awaitable<void> dwell(Duration time) { return line().clock().dwell(time); }
  SteadyTime soon() { return line().in(10s); }
  Bed bed;
};

INSTANTIATE_TEST_SUITE_P(Wire, AnyPort, testing::ValuesIn(cases),
                         [](const auto& info) { return std::string{info.param.name}; });

Bytes some_bytes(std::size_t size, std::uint64_t seed) {
  SeededEntropy entropy{seed};
  Bytes bytes(size);
  for (auto& byte : bytes) byte = static_cast<std::byte>(entropy.next() & 0xFF);
  return bytes;
}

TEST_P(AnyPort, HasAName) { EXPECT_FALSE(near().name().empty()); }

TEST_P(AnyPort, CarriesEveryByteValueBothWays) {
  Bytes all(256);
  for (std::size_t i = 0; i < 256; ++i) all[i] = static_cast<std::byte>(i);
  line().run([&]() -> asio::awaitable<void> {
    co_await near().write_all(all, soon());
    const Bytes there = co_await read_exactly(far(), 256, soon());
    EXPECT_EQ(there, all);
    co_await far().write_all(there, soon());
    const Bytes back = co_await read_exactly(near(), 256, soon());
    EXPECT_EQ(back, all);
    co_await near().write_all({}, soon());
  });
}

TEST_P(AnyPort, ReadsBytesThatComeInPieces) {
  line().start([&]() -> asio::awaitable<void> {
    for (const std::string_view piece : {"LI", "D", "?\n"}) {
      co_await dwell(5ms);
      co_await far().write_all(bytes_of(piece), soon());
    }
  });
  line().run([&]() -> asio::awaitable<void> {
    const std::string text = co_await read_text(near(), 5, soon());
    EXPECT_EQ(text, "LID?\n");
  });
}

TEST_P(AnyPort, KeepsWhatASmallReadLeaves) {
  line().run([&]() -> asio::awaitable<void> {
    co_await far().write_all(bytes_of("abcdef"), soon());
    for (const std::string_view wanted : {"a", "bc", "def"}) {
      const std::string text = co_await read_text(near(), wanted.size(), soon());
      EXPECT_EQ(text, wanted);
    }
  });
}

TEST_P(AnyPort, ThrowsAtTheDeadlineAndNotBefore) {
  SteadyTime deadline;
  const auto reader = line().start([&]() -> asio::awaitable<void> {
    deadline = line().in(30ms);
    co_await read_exactly(near(), 1, deadline);
  });
  EXPECT_TRUE(line().run_until_done(*reader));
  EXPECT_EQ(reader->end(), "deadline passed");
  EXPECT_GE(line().clock().steady_now(), deadline);
  EXPECT_LT(line().clock().steady_now() - deadline, 5s);
}

TEST_P(AnyPort, BytesThatComeTooLateWaitForTheNextCall) {
  const auto reader =
      line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 3, line().in(10ms)); });
  EXPECT_TRUE(line().run_until_done(*reader));
  EXPECT_EQ(reader->end(), "deadline passed");
  line().run([&]() -> asio::awaitable<void> {
    co_await far().write_all(bytes_of("late"), soon());
    co_await dwell(20ms);
    const std::string text = co_await read_text(near(), 4, soon());
    EXPECT_EQ(text, "late");
  });
}

TEST_P(AnyPort, APassedDeadlineStillGivesWhatStandsThereButOnlyOnce) {
  // A hiccup of the machine must not make a miss of an answer that is there, nor may a babbling line hold its reader.
  std::array<std::byte, 1> one{};
  SteadyTime passed;
  line().run([&]() -> asio::awaitable<void> {
    co_await far().write_all(bytes_of("abc"), soon());
    co_await dwell(20ms);
    passed = line().in(-1ms);
    const auto count = co_await near().read_some(one, passed);
    EXPECT_EQ(count, 1u);
    EXPECT_EQ(one[0], std::byte{'a'});
  });
  const auto second = line().start([&]() -> asio::awaitable<void> { co_await near().read_some(one, passed); });
  EXPECT_TRUE(line().run_until_done(*second));
  EXPECT_EQ(second->end(), "deadline passed");
  line().run([&]() -> asio::awaitable<void> {
    const std::string text = co_await read_text(near(), 2, soon());
    EXPECT_EQ(text, "bc");
  });
}

TEST_P(AnyPort, CloseWakesItsReaderAndEndsThePort) {
  const auto reader =
      line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 1, line().in(3600s)); });
  line().run([&]() -> asio::awaitable<void> {
    co_await dwell(10ms);
    near().close();
  });
  EXPECT_TRUE(line().run_until_done(*reader));
  EXPECT_EQ(reader->end(), "port lost");
  const auto again = line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 1, soon()); });
  const auto write = line().start([&]() -> asio::awaitable<void> { co_await near().write_all(bytes_of("x"), soon()); });
  EXPECT_TRUE(line().run_until_done(*again) && line().run_until_done(*write));
  EXPECT_EQ(again->end(), "port lost");
  EXPECT_EQ(write->end(), "port lost");
  near().close();  // twice does no harm
}

TEST_P(AnyPort, CloseWakesAWriterThatNobodyReads) {
  const Bytes much = some_bytes(1 << 20, 1);
  const auto writer =
      line().start([&]() -> asio::awaitable<void> { co_await near().write_all(much, line().in(3600s)); });
  line().run([&]() -> asio::awaitable<void> {
    co_await dwell(200ms);
    near().close();
  });
  EXPECT_TRUE(line().run_until_done(*writer));
  EXPECT_EQ(writer->end(), "port lost");
}

TEST_P(AnyPort, AWriteThatNobodyReadsMeetsItsDeadline) {
  const Bytes much = some_bytes(1 << 20, 1);
  const auto writer =
      line().start([&]() -> asio::awaitable<void> { co_await near().write_all(much, line().in(50ms)); });
  EXPECT_TRUE(line().run_until_done(*writer));
  EXPECT_EQ(writer->end(), "deadline passed");
}

TEST_P(AnyPort, CarriesMuchBothWaysAtOnce) {
  const Bytes out = some_bytes(300'000, 2), in = some_bytes(300'000, 3);
  Bytes got_out, got_in;
  const auto a = line().start([&]() -> asio::awaitable<void> { co_await near().write_all(out, line().in(30s)); });
  const auto b = line().start([&]() -> asio::awaitable<void> { co_await far().write_all(in, line().in(30s)); });
  const auto c = line().start(
      [&]() -> asio::awaitable<void> { got_out = co_await read_exactly(far(), out.size(), line().in(30s)); });
  const auto d = line().start(
      [&]() -> asio::awaitable<void> { got_in = co_await read_exactly(near(), in.size(), line().in(30s)); });
  for (const auto& started : {a, b, c, d}) {
    EXPECT_TRUE(line().run_until_done(*started));
    EXPECT_EQ(started->end(), "");
  }
  EXPECT_TRUE(got_out == out);
  EXPECT_TRUE(got_in == in);
}

TEST_P(AnyPort, ACancelledReadLosesNoBytes) {
  const auto reader =
      line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 1, line().in(3600s)); });
  line().run([&]() -> asio::awaitable<void> {
    co_await dwell(5ms);
    reader->cancel.emit(asio::cancellation_type::terminal);
    co_await far().write_all(bytes_of("kept"), soon());
    co_await dwell(5ms);
    const std::string text = co_await read_text(near(), 4, soon());
    EXPECT_EQ(text, "kept");
  });
  EXPECT_EQ(reader->end(), "cancelled");
}

TEST_P(AnyPort, ACancelledWriteEnds) {
  const Bytes much = some_bytes(1 << 20, 1);
  const auto writer =
      line().start([&]() -> asio::awaitable<void> { co_await near().write_all(much, line().in(3600s)); });
  line().run([&]() -> asio::awaitable<void> {
    co_await dwell(200ms);
    writer->cancel.emit(asio::cancellation_type::terminal);
  });
  EXPECT_TRUE(line().run_until_done(*writer));
  EXPECT_EQ(writer->end(), "cancelled");
}

TEST_P(AnyPort, IsLostWhenTheOtherSideCloses) {
  if (!bed.hears_hang_up) {  // a device waits for the next station instead
    far().close();
    const auto reader =
        line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 1, line().in(30ms)); });
    EXPECT_TRUE(line().run_until_done(*reader));
    EXPECT_EQ(reader->end(), "deadline passed");
    return;
  }
  const auto reader =
      line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 1, line().in(3600s)); });
  line().run([&]() -> asio::awaitable<void> {
    co_await dwell(10ms);
    far().close();
  });
  EXPECT_TRUE(line().run_until_done(*reader));
  EXPECT_EQ(reader->end(), "port lost");
  const auto again = line().start([&]() -> asio::awaitable<void> { co_await read_exactly(near(), 1, soon()); });
  const auto write = line().start([&]() -> asio::awaitable<void> { co_await near().write_all(bytes_of("x"), soon()); });
  EXPECT_TRUE(line().run_until_done(*again) && line().run_until_done(*write));
  EXPECT_EQ(again->end(), "port lost");
  EXPECT_EQ(write->end(), "port lost");
}

}  // namespace
