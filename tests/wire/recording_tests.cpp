// Recordings of lines: the text, parts of it, the folder, and a line that is recorded and played back.
#include <gtest/gtest.h>

#include <boost/asio/co_spawn.hpp>
#include <filesystem>
#include <random>

#include "drivers/wire/memory_port.h"
#include "drivers/wire/recording_folder.h"
#include "drivers/wire/recording_source.h"
#include "drivers/wire/replay_line.h"
#include "drivers/wire/stepped_line.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;
using wire::LineRecording;
using wire::WireEvent;
using Kind = WireEvent::Kind;
namespace fs = std::filesystem;

class Folder {
 public:
  Folder() {
    std::string made = (fs::temp_directory_path() / "recording-XXXXXX").string();
    if (mkdtemp(made.data()) == nullptr) throw std::runtime_error("no folder");
    path = made;
  }
  ~Folder() { fs::remove_all(path); }
  fs::path path;
};

Bytes bytes(std::initializer_list<int> values) {
  Bytes all;
  for (const int value : values) all.push_back(static_cast<std::byte>(value));
  return all;
}

LineRecording example() {
  return {"nest1-phantom",
          {{0ns, Kind::opened, {}, "/dev/ttyX"},
           {1ns, Kind::sent, bytes({0x00, 0x0a, 0xff}), {}},
           {1500ms, Kind::received, bytes({0x31}), {}},
           {12s, Kind::lost, {}, "the other side hung up"},
           {3600s + 7ns, Kind::not_opened, {}, wire::words_of_problem({"port_missing", "/dev/ttyX"})}}};
}

constexpr const char* example_text =
    "probewright line recording 1\n"
    "device nest1-phantom\n"
    "0.000000000 opened /dev/ttyX\n"
    "0.000000001 > 000aff\n"
    "1.500000000 < 31\n"
    "12.000000000 lost the other side hung up\n"
    "3600.000000007 not-opened {\"arguments\":[],\"id\":\"port_missing\",\"where\":\"/dev/ttyX\"}\n";

TEST(RecordingText, IsWrittenAndReadBack) {
  EXPECT_EQ(wire::recording_text(example()), example_text);
  const auto read = wire::parse_recording(example_text, "x");
  ASSERT_TRUE(read) << read.error().text();
  EXPECT_EQ(*read, example());
  EXPECT_EQ(wire::problem_in_words(read->events.back().words), (Problem{"port_missing", "/dev/ttyX"}));
  EXPECT_EQ(wire::problem_in_words("hung up"), std::nullopt);
}

TEST(RecordingText, ControlCharactersInWordsCannotBreakALine) {
  LineRecording odd{"d", {{0ns, Kind::lost, {}, "a\nb\x01"}}};
  const auto read = wire::parse_recording(wire::recording_text(odd), "x");
  ASSERT_TRUE(read);
  EXPECT_EQ(read->events.front().words, "a b ");
}

TEST(RecordingText, WhatIsNotOneIsRefusedWithItsLine) {
  const std::string head = "probewright line recording 1\ndevice d\n";
  const std::pair<std::string, int> cases[] = {{"", 0},
                                               {"probewright line recording 2\ndevice d\n", 1},
                                               {"probewright line recording 1\n", 1},
                                               {"probewright line recording 1\nd\n", 2},
                                               {head + "0.000000000 > 00", 3},
                                               {head + "0.00 > 00\n", 3},
                                               {head + "-1.000000000 > 00\n", 3},
                                               {head + "0.000000000 = 00\n", 3},
                                               {head + "0.000000000 > 0\n", 3},
                                               {head + "0.000000000 > 0g\n", 3},
                                               {head + "0.000000000 >\n", 3},
                                               {head + "0.000000000 > +1\n", 3},
                                               {head + "2.000000000 > 00\n1.000000000 > 00\n", 4}};
  for (const auto& [text, line] : cases) {
    const auto read = wire::parse_recording(text, "x");
    ASSERT_FALSE(read) << text;
    EXPECT_EQ(read.error().id, "recording_malformed");
    EXPECT_EQ(read.error().where, "x:" + std::to_string(line)) << text;
  }
}

TEST(RecordingText, APartKeepsItsTimes) {
  const LineRecording part = wire::cut(example(), 1ns, 12s);
  ASSERT_EQ(part.events.size(), 2u);
  EXPECT_EQ(part.events[0].at, 1ns);
  EXPECT_EQ(part.events[1].at, 1500ms);
}

TEST(RecordingFolder, HoldsLinesAndFiles) {
  Folder folder;
  wire::Recording recording;
  recording.header = Body::Object{{"recording", 1}, {"serial", "A"}};
  recording.lines = {example()};
  recording.files = {{"configuration/models/a.yaml", "a: 1\n"}, {"outcome.json", "{}\n"}};
  const fs::path path = folder.path / "new";
  ASSERT_TRUE(wire::write_recording(path, recording));
  const auto read = wire::read_recording(path);
  ASSERT_TRUE(read) << read.error().text();
  EXPECT_EQ(read->header, recording.header);
  EXPECT_EQ(read->lines, recording.lines);
  EXPECT_EQ(read->files, recording.files);
  EXPECT_EQ(wire::write_recording(path, recording).error().id, "recording_unwritable") << "a folder that is not empty";
  EXPECT_EQ(wire::read_recording(folder.path).error().id, "recording_missing");
}

TEST(RecordingFolder, AnotherFormatIsRefused) {
  Folder folder;
  wire::Recording recording;
  recording.header = Body::Object{{"recording", 2}};
  ASSERT_TRUE(wire::write_recording(folder.path / "new", recording));
  EXPECT_EQ(wire::read_recording(folder.path / "new").error().id, "recording_malformed");
}

/// What a line did, for comparing: a client that sends numbers, and writes down what came and when.
struct Client {
  std::string diary;

  asio::awaitable<void> live(wire::PortSource source, wire::LineClock& clock, int exchanges) {
    try {
      auto port = co_await source();
      for (int i = 0; i < exchanges; ++i) {
        const std::string ask = std::to_string(i) + "\n";
        co_await port->write_all(bytes_of(ask), clock.steady_now() + 1s);
        std::array<std::byte, 64> into{};
        try {
          const auto count = co_await port->read_some(into, clock.steady_now() + 3ms);
          diary += wire::seconds_text(clock.steady_now().since_start) + " " +
                   std::string(text_of(std::span{into}.first(count))) + "\n";
        } catch (const wire::DeadlinePassed&) {
          diary += wire::seconds_text(clock.steady_now().since_start) + " late\n";
        }
        co_await clock.wait_until(clock.steady_now() + 1ms);
      }
      port->close();
    } catch (const wire::PortLost& lost) {
      diary += lost.why() + "\n";
    }
  }
};

/// Answers each piece that comes, after a while that the machine decides; goes after `answers` of them.
asio::awaitable<void> answer(wire::Port& port, const wire::LineClock& clock, int answers, wire::LineClock& waits) {
  std::array<std::byte, 64> into{};
  std::minstd_rand random{7};
  for (int i = 0; i < answers; ++i) {
    const auto count = co_await port.read_some(into, SteadyTime{Duration::max()});
    co_await waits.wait_until(clock.steady_now() + std::chrono::microseconds(random() % 5000));
    co_await port.write_all(std::span{into}.first(count), clock.steady_now() + 1s);
  }
  port.close();
}

/// A live exchange in real time, recorded; then the same from the recording.
TEST(SteppedLine, APlayedBackLineDoesTheSameAtTheSameMoments) {
  Folder folder;
  Client live;
  const int exchanges = 60, answers = 50;
  {
    auto recorder = wire::Recorder::begin(folder.path / "r", Body::Object{{"recording", 1}}).value();
    wire::SteppedLine line{1.0, UtcTime{0}, *recorder};
    wire::AsioClock device_clock{line.outside().get_executor()};
    auto pair = wire::make_memory_pair(line.outside_clock(), "pair");
    auto device = std::move(pair.device);
    asio::co_spawn(line.outside(), answer(*device, device_clock, answers, device_clock),
                   [](const std::exception_ptr&) {});
    bool done = false;
    auto end = std::make_shared<std::unique_ptr<wire::Port>>(std::move(pair.station));
    asio::co_spawn(
        line.io(),
        live.live(line.source("device", [end] { return Result<std::unique_ptr<wire::Port>>(std::move(*end)); }),
                  line.clock(), exchanges),
        [&done](const std::exception_ptr&) { done = true; });
    line.run([&done] { return done; });
    EXPECT_FALSE(recorder->trouble());
  }
  const auto recording = wire::read_recording(folder.path / "r").value();
  asio::io_context io{1};
  wire::VirtualClock clock{UtcTime{0}};
  wire::ReplayLine replay{io, clock, recording.lines};
  Client again;
  bool done = false;
  asio::co_spawn(io, again.live(replay.source("device"), clock, exchanges),
                 [&done](const std::exception_ptr&) { done = true; });
  clock.run_until(io, [&done] { return done; });
  EXPECT_TRUE(done);
  EXPECT_EQ(again.diary, live.diary);
  EXPECT_NE(live.diary.find("late"), std::string::npos) << "the trial is too tame";
  EXPECT_FALSE(replay.difference()) << replay.difference()->text();
}

TEST(ReplayLine, TellsTheFirstDifference) {
  asio::io_context io{1};
  wire::VirtualClock clock{UtcTime{0}};
  wire::ReplayLine replay{io,
                          clock,
                          {{"device",
                            {{0ns, Kind::opened, {}, "port"},
                             {0ns, Kind::sent, bytes({'0', '\n'}), {}},
                             {1ms, Kind::received, bytes({'a'}), {}},
                             {2ms, Kind::sent, bytes({'7', '\n'}), {}}}}}};
  Client client;
  bool done = false;
  asio::co_spawn(io, client.live(replay.source("device"), clock, 2),
                 [&done](const std::exception_ptr&) { done = true; });
  clock.run_until(io, [&done] { return done; });
  ASSERT_TRUE(replay.difference());
  EXPECT_EQ(*replay.difference(),
            (Problem{"replay_differs", "device", {{"at", "0.002000000"}, {"why", "other bytes were sent"}}}));
  EXPECT_EQ(client.diary, "0.001000000 a\n0.005000000 late\n");
}

TEST(ReplayLine, PortsFailToOpenAsTheyDidAndThereIsNoOther) {
  asio::io_context io{1};
  wire::VirtualClock clock{UtcTime{0}};
  wire::ReplayLine replay{
      io, clock, {{"device", {{0ns, Kind::not_opened, {}, wire::words_of_problem({"port_busy", "/dev/x"})}}}}};
  const auto opened = [&](const std::string& device) {
    std::string id;
    asio::co_spawn(io, replay.source(device)(), [&id](const std::exception_ptr& error, std::unique_ptr<wire::Port>) {
      try {
        if (error) std::rethrow_exception(error);
      } catch (const ProblemError& refused) {
        id = refused.problem().id;
      }
    });
    io.restart();
    io.poll();
    return id;
  };
  EXPECT_EQ(opened("device"), "port_busy");
  EXPECT_EQ(opened("device"), "port_missing");
  EXPECT_EQ(opened("nobody"), "port_missing");
}

TEST(RecordingSource, NotesWhatGoesOverAnyPort) {
  Folder folder;
  VirtualLine line;
  auto recorder = wire::Recorder::begin(folder.path / "r", Body::Object{{"recording", 1}}).value();
  std::unique_ptr<wire::Port> far;
  const auto open = [](wire::LineClock* clock,
                       std::unique_ptr<wire::Port>* other) -> asio::awaitable<std::unique_ptr<wire::Port>> {
    auto pair = wire::make_memory_pair(*clock, "port");
    *other = std::move(pair.device);
    co_return std::move(pair.station);
  };
  const wire::PortSource source = [&line, &far, open] { return open(&line.clock(), &far); };
  const auto recorded = wire::recording_source(source, "device", line.clock(), SteadyTime{}, *recorder);
  line.run([&]() -> asio::awaitable<void> {
    auto port = co_await recorded();
    co_await port->write_all(bytes_of("ask"), line.in(1s));
    co_await far->write_all(bytes_of("answer"), line.in(1s));
    std::array<std::byte, 64> into{};
    co_await port->read_some(into, line.in(1s));
    far->close();
    bool lost = false;
    try {
      co_await port->read_some(into, line.in(1s));
    } catch (const wire::PortLost&) {
      lost = true;
    }
    EXPECT_TRUE(lost);
  });
  const auto recording = wire::read_recording(folder.path / "r").value();
  ASSERT_EQ(recording.lines.size(), 1u);
  std::string kinds;
  for (const WireEvent& event : recording.lines[0].events)
    kinds += std::to_string(static_cast<int>(event.kind)) + std::string(text_of(event.bytes)) + event.words + ";";
  EXPECT_EQ(kinds, "0port;2ask;3answer;4the other side hung up;");
}

}  // namespace
