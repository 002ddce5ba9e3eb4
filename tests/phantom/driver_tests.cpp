#include "drivers/phantom/driver.h"

#include <gtest/gtest.h>

#include "tests/phantom/phantom_bench.h"

// The protocol is this project's own, so WIRE.md is the source of what is expected here.
namespace {

using namespace probewright;
using namespace std::chrono_literals;
using phantom::Driver;
using phantom::Shutter;
using phantom::Spectrum;
using trial::argument;
namespace asio = boost::asio;

/// What `ask` gives, asked of the bench's driver.
template <class T>
T answer(PhantomBench& bench, std::function<asio::awaitable<T>()> ask) {
  std::optional<T> value;
  bench.line.run([&]() -> asio::awaitable<void> { value = co_await ask(); });
  return value.value_or(T{});
}
double temperature(PhantomBench& bench) {
  return answer<double>(bench, [&] { return bench.phantom().temperature_degC(); });
}

TEST(PhantomDriver, ConnectsAndKnowsTheDevice) {
  PhantomBench bench;
  EXPECT_FALSE(bench.phantom().connected());
  bench.connect();
  EXPECT_TRUE(bench.phantom().connected());
  const auto& identity = bench.phantom().identity();
  EXPECT_EQ(identity.maker, "Alder Quay Sensors");
  EXPECT_EQ(identity.serial, "PH-01");
  EXPECT_EQ(identity.firmware, "1.0.0");
  EXPECT_TRUE(identity.emulated);
  EXPECT_EQ(identity.speed, 1.0);
  EXPECT_EQ(identity.boot, 4711u);
  EXPECT_EQ(bench.phantom().counts().misses, 0u);
  EXPECT_EQ(bench.phantom().counts().connects, 1u);
  EXPECT_FALSE(bench.phantom().trouble());
  bench.connect();  // nothing to do
  EXPECT_EQ(bench.opened, 1);
}

TEST(PhantomDriver, AsksEveryFunction) {
  PhantomBench bench;
  bench.connect();
  Driver& phantom = bench.phantom();
  bench.line.run([&]() -> asio::awaitable<void> {
    const int self_test = co_await phantom.self_test();
    EXPECT_EQ(self_test, 0);
    const Spectrum spectrum = co_await phantom.spectrum({30000, 4, Shutter::closed});
    EXPECT_EQ(spectrum.number, 1u);
    EXPECT_EQ(spectrum.setting, (phantom::SpectrometerSetting{30000, 4, Shutter::closed}));
    EXPECT_FALSE(spectrum.any_pixel_full);
    EXPECT_DOUBLE_EQ(spectrum.temperature_degC, 25.12);
    EXPECT_EQ(spectrum.counts[0], 1000);
    EXPECT_EQ(spectrum.counts[512], 0x0A7C);
    EXPECT_EQ(spectrum.counts[1023], 1000);
    co_await phantom.modulate({2, 5.0});
    co_await phantom.modulate({0, 1.5, 0.016, 0.01});
    const bool settled = co_await phantom.settled();
    EXPECT_TRUE(settled);
    co_await phantom.wait_settled();
    co_await phantom.stop_modulator();
    const auto points = co_await phantom.set_points();
    EXPECT_EQ(points,
              (std::vector<phantom::SetPoint>{{1, 0.4, 0.01, 0.025}, {2, 1.0, 0.01, 0.01}, {3, 1.6, 0.016, 0.01}}));
    co_await phantom.set_opaque(true);
    co_await phantom.lamp_on(0.25, 100);
    co_await phantom.lamp_off();
    co_await phantom.set_line_lamp(true);
    const auto lines = co_await phantom.line_lamp_nm();
    EXPECT_EQ(lines, (std::vector<double>{696.543, 763.511, 811.531, 912.297}));
    const double warm = co_await phantom.temperature_degC();
    EXPECT_EQ(warm, 25.12);
    const bool closed = co_await phantom.lid_closed();
    EXPECT_TRUE(closed);
    const auto presence = co_await phantom.presence();
    EXPECT_EQ(presence, (phantom::Presence{true, 3}));
    const auto nest = co_await phantom.nest_state();
    EXPECT_EQ(nest.probe, (phantom::Presence{true, 3}));
    EXPECT_TRUE(nest.lid_closed);
    co_await phantom.reset();
  });
  EXPECT_EQ(phantom.counts().misses, 0u);
  EXPECT_EQ(phantom.counts().asked_again, 0u);
  EXPECT_EQ(phantom.counts().fences, 1u);  // of connecting
  EXPECT_TRUE(bench.fake.errors.empty());
}

TEST(PhantomDriver, SetsTheSpectrometerOnlyWhereItDiffers) {
  PhantomBench bench;
  bench.connect();
  const auto messages = bench.fake.executed.size();
  bench.line.run([&]() -> asio::awaitable<void> {
    co_await bench.phantom().spectrum({20000, 1, Shutter::open});  // as after *RST
    co_await bench.phantom().spectrum({20000, 1, Shutter::open});
  });
  EXPECT_EQ(bench.fake.executed.size(), messages + 2);
}

TEST(PhantomDriver, RefusesStrangersInWords) {
  struct Case {
    std::string id, found;
    std::function<void(FakePhantom&)> change;
  };
  const std::vector<Case> cases{
      {"device_stranger", "PH-02",
       [](FakePhantom& f) { f.identity = "Alder Quay Sensors,PHANTOM,PH-02,1.0.0-emulated-x1"; }},
      {"device_stranger", "OTHER",
       [](FakePhantom& f) { f.identity = "Alder Quay Sensors,OTHER,PH-01,1.0.0-emulated-x1"; }},
      {"device_wrong_firmware", "0.9.0", [](FakePhantom& f) { f.identity = "A,PHANTOM,PH-01,0.9.0-emulated-x1"; }},
      {"device_not_emulated", "", [](FakePhantom& f) { f.identity = "A,PHANTOM,PH-01,1.0.0"; }},
      {"device_speed_mismatch", "20", [](FakePhantom& f) { f.identity = "A,PHANTOM,PH-01,1.0.0-emulated-x20"; }},
      {"device_wrong_certificate", "PHC-2025-0007", [](FakePhantom& f) { f.certificate = "PHC-2025-0007"; }},
      {"device_wrong_certificate", "2026-06-30", [](FakePhantom& f) { f.due = "2026-06-30"; }},
      {"device_wrong_wavelengths", "600, 0.4403, -2e-07, -1e-10",
       [](FakePhantom& f) { f.wavelengths = "600,0.4403,-2e-07,-1e-10"; }},
  };
  for (const Case& c : cases) {
    PhantomBench bench;
    c.change(bench.fake);
    const auto problem = bench.problem_of([&] { return bench.phantom().connect(); });
    ASSERT_TRUE(problem) << c.id;
    EXPECT_EQ(problem->id, c.id);
    EXPECT_EQ(argument(*problem, "found"), c.found);
    EXPECT_EQ(problem->where, "phantom of nest 1");
    EXPECT_EQ(problem->kind(), ProblemKind::not_ready);
    EXPECT_FALSE(bench.phantom().connected());
    EXPECT_EQ(bench.phantom().trouble(), problem);
  }
}

TEST(PhantomDriver, RefusesAnEmulatedDeviceOnARealLine) {
  auto settings = PhantomBench::expected_device();
  settings.expected.emulated = false;
  PhantomBench bench{settings};
  const auto problem = bench.problem_of([&] { return bench.phantom().connect(); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_is_emulated");
}

TEST(PhantomDriver, TellsWhatTheDeviceRefusesAndDoesNotAskAgain) {
  PhantomBench bench;
  bench.connect();
  const auto messages = bench.fake.executed.size();
  const auto problem = bench.problem_of([&] { return bench.phantom().modulate({7, 5.0}); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_refused");
  EXPECT_EQ(argument(*problem, "words"), "-222 Data out of range");
  // The message once, echo, the error, the end of the queue.
  EXPECT_EQ(bench.fake.executed.size(), messages + 4);
  EXPECT_TRUE(bench.phantom().connected());
  EXPECT_EQ(temperature(bench), 25.12);
}

TEST(PhantomDriver, TellsAFaultOfTheDevice) {
  PhantomBench bench;
  bench.connect();
  bench.fake.refuse = [](const std::string& message) -> std::optional<std::string> {
    if (message == "SPEC:READ?") return "-240,\"Hardware error\"";
    return std::nullopt;
  };
  const auto problem = bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.phantom().spectrum({}); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_fault");
  EXPECT_EQ(problem->kind(), ProblemKind::device_lost);
}

TEST(PhantomDriver, AfterARefusalHalfDoneItSetsEverythingAnew) {
  PhantomBench bench;
  bench.connect();
  // The exposure is in range and taken; the frames are not.
  const auto problem = bench.problem_of([&] { return bench.phantom().set_spectrometer({50000, 65, Shutter::open}); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_refused");
  const Spectrum spectrum = answer<Spectrum>(bench, [&] { return bench.phantom().spectrum({}); });
  EXPECT_EQ(spectrum.setting.exposure_us, 20000u);
  EXPECT_EQ(bench.phantom().counts().misses, 1u);  // the refused message had no answer
}

TEST(PhantomDriver, ALateAnswerIsNeverTakenForTheNext) {
  PhantomBench bench;
  bench.connect();
  int asked = 0;
  bench.fake.late = [&](const std::string& message) -> Duration {
    return message == "TEMP?" && ++asked == 1 ? 700ms : 0ms;  // beyond the margin of 500 ms
  };
  // The second reading differs, so that the late first one would show.
  bench.fake.spoil = [&](const std::string& message, std::string line) {
    if (message == "TEMP?") bench.fake.temperature = "30.00";
    return line;
  };
  EXPECT_EQ(temperature(bench), 30.0);
  EXPECT_EQ(bench.phantom().counts().misses, 1u);
  EXPECT_EQ(bench.phantom().counts().fences, 2u);
  EXPECT_EQ(bench.phantom().counts().asked_again, 1u);
}

TEST(PhantomDriver, AStaleAnswerMakesItFence) {
  PhantomBench bench;
  bench.connect();
  // A whole, valid line stands there, from wherever, when the next question is asked.
  bench.line.run([&]() -> asio::awaitable<void> {
    const std::string stale = wire::add_checksum("99.99");
    co_await bench.device_ends.back()->write_all(trial::bytes_of(stale), bench.line.in(1s));
  });
  bench.fake.late = [](const std::string& message) -> Duration { return message == "LID?" ? 1ms : 0ms; };
  EXPECT_TRUE(answer<bool>(bench, [&] { return bench.phantom().lid_closed(); }));
  EXPECT_EQ(temperature(bench), 25.12);
  EXPECT_EQ(bench.phantom().counts().misses, 1u);
  EXPECT_EQ(bench.phantom().counts().fences, 2u);
}

TEST(PhantomDriver, ABlockHeaderGoneBadSwallowsNothing) {
  PhantomBench bench;
  bench.connect();
  for (const std::string header :
       {"#9999999999", "#42069", "#42067", "#4206", "42068", "#02068", "##42068", "\"#42068"}) {
    int n = 0;
    bench.fake.spoil = [&](const std::string& message, std::string line) {
      if (message == "SPEC:READ?" && ++n == 1) line.replace(0, 6, header);
      return line;
    };
    const Spectrum spectrum = answer<Spectrum>(bench, [&] { return bench.phantom().spectrum({}); });
    EXPECT_EQ(spectrum.counts[512], 0x0A7C) << header;
    EXPECT_EQ(n, 2) << header;
  }
}

TEST(PhantomDriver, AWrongBlockInARightLineIsAMiss) {
  PhantomBench bench;
  bench.connect();
  int n = 0;
  bench.fake.spoil = [&](const std::string& message, std::string line) {
    if (message != "SPEC:READ?" || ++n > 1) return line;
    line.resize(line.size() - 6);
    line[100] ^= 1;                   // breaks the block's CRC-32
    return wire::add_checksum(line);  // the line's own check is right
  };
  const Spectrum spectrum = answer<Spectrum>(bench, [&] { return bench.phantom().spectrum({}); });
  EXPECT_EQ(spectrum.number, 2u);
}

TEST(PhantomDriver, JunkBeforeAnAnswerIsThrownAway) {
  PhantomBench bench;
  bench.connect();
  int n = 0;
  bench.fake.spoil = [&](const std::string& message, std::string line) {
    return message == "TEMP?" && ++n == 1 ? "#9 \"junk\nmore\n" + line : line;
  };
  EXPECT_EQ(temperature(bench), 25.12);
  EXPECT_EQ(n, 2);
}

TEST(PhantomDriver, AFullErrorQueueIsReadEmpty) {
  PhantomBench bench;
  bench.connect();
  for (int i = 0; i < 15; ++i) bench.fake.errors.push_back("-360,\"Communication error\"");
  bench.fake.errors.push_back("-350,\"Queue overflow\"");
  int n = 0;
  bench.fake.spoil = [&](const std::string& message, std::string line) {
    return message == "TEMP?" && ++n == 1 ? std::string{} : line;
  };
  EXPECT_EQ(temperature(bench), 25.12);
  EXPECT_TRUE(bench.fake.errors.empty());
}

TEST(PhantomDriver, ErrorsFromBeforeConnectingConcernNobody) {
  PhantomBench bench;
  bench.fake.errors.push_back("-222,\"Data out of range\"");
  bench.connect();
  EXPECT_TRUE(bench.phantom().connected());
}

TEST(PhantomDriver, ASilentDeviceIsLostAfterItsTriesAndInTime) {
  PhantomBench bench;
  bench.connect();
  bench.fake.spoil = [](const std::string&, std::string) { return std::string{}; };
  const double before_s = bench.seconds_now();
  const auto problem =
      bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.phantom().temperature_degC(); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_lost");
  EXPECT_EQ(problem->kind(), ProblemKind::device_lost);
  EXPECT_EQ(argument(*problem, "tries"), "3");
  EXPECT_LT(bench.seconds_now() - before_s, 2.2);  // one question and three fences of 0.5 s each
  EXPECT_FALSE(bench.phantom().connected());
  const auto at_once =
      bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.phantom().temperature_degC(); });
  ASSERT_TRUE(at_once);
  EXPECT_EQ(at_once->id, "device_lost");
  EXPECT_EQ(argument(*at_once, "tries"), "0");
}

TEST(PhantomDriver, ASettingThatDoesNotComeBackIsNotTaken) {
  PhantomBench bench;
  bench.connect();
  bench.fake.spoil = [](const std::string& message, std::string line) {
    return message.starts_with("PATH") ? wire::add_checksum("0") : line;
  };
  const auto problem = bench.problem_of([&] { return bench.phantom().set_opaque(true); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_lost");
  EXPECT_EQ(argument(*problem, "cause"), "set 1, read back 0");
}

TEST(PhantomDriver, ADeviceThatStartedAnewIsNoticed) {
  PhantomBench bench;
  bench.connect();
  bench.fake.power_on();
  std::optional<Problem> problem;
  const auto started =
      bench.line.start([&]() -> asio::awaitable<void> { co_await bench.phantom().temperature_degC(); });
  ASSERT_TRUE(bench.line.run_until_done(*started));
  EXPECT_THROW(std::rethrow_exception(started->thrown), wire::DeviceReset);
  EXPECT_FALSE(bench.phantom().connected());
  ASSERT_TRUE(bench.phantom().trouble());
  EXPECT_EQ(bench.phantom().trouble()->id, "device_reset");
}

TEST(PhantomDriver, FindsTheDeviceAgainWithGrowingPauses) {
  PhantomBench bench;
  const auto keeping = bench.line.start([&] { return bench.phantom().keep_connected(); });
  bench.pass(2s);
  EXPECT_TRUE(bench.phantom().connected());
  bench.unplug();
  const auto problem =
      bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.phantom().temperature_degC(); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_lost");
  bench.pass(60s);
  // 0.1 + 0.2 + 0.4 + 0.8 + 1.6 + 3.2 s, then every 5 s: 7 tries in 6.3 s and 10 more.
  EXPECT_GE(bench.opened, 1 + 16);
  EXPECT_LE(bench.opened, 1 + 18);
  ASSERT_TRUE(bench.phantom().trouble());
  EXPECT_EQ(argument(*bench.phantom().trouble(), "cause"), "/dev/fake: no such port");
  bench.plugged = true;
  bench.fake.power_on();
  bench.pass(6s);
  EXPECT_TRUE(bench.phantom().connected());
  EXPECT_EQ(temperature(bench), 25.12);
  EXPECT_EQ(bench.phantom().counts().connects, 2u);
  keeping->cancel.emit(asio::cancellation_type::terminal);
  ASSERT_TRUE(bench.line.run_until_done(*keeping));
  EXPECT_EQ(keeping->end(), "cancelled");
}

TEST(PhantomDriver, ACancelledRequestLeavesNothingBehind) {
  PhantomBench bench;
  bench.connect();
  // Cancelled at many moments of an exchange of about 130 ms, the line is right for the next one.
  for (int ms = 0; ms < 140; ms += 7) {
    const auto started = bench.line.start([&]() -> asio::awaitable<void> {
      co_await bench.phantom().spectrum({20000, 5, Shutter::closed});
    });
    bench.pass(std::chrono::milliseconds(ms));
    started->cancel.emit(asio::cancellation_type::terminal);
    ASSERT_TRUE(bench.line.run_until_done(*started));
    EXPECT_TRUE(started->end() == "cancelled" || started->end() == "") << started->end();
    EXPECT_EQ(temperature(bench), 25.12);
    bench.line.run([&] { return bench.phantom().reset(); });
  }
  EXPECT_TRUE(bench.phantom().connected());
  EXPECT_EQ(bench.phantom().counts().misses, 0u);
  EXPECT_GT(bench.phantom().counts().fences, 10u);
}

TEST(PhantomDriver, ACancelledConnectLeavesItUnconnected) {
  PhantomBench bench;
  const auto started = bench.line.start([&] { return bench.phantom().connect(); });
  bench.pass(20ms);  // inside *RST;*OPC?
  started->cancel.emit(asio::cancellation_type::terminal);
  ASSERT_TRUE(bench.line.run_until_done(*started));
  EXPECT_EQ(started->end(), "cancelled");
  EXPECT_FALSE(bench.phantom().connected());
  bench.connect();
  EXPECT_TRUE(bench.phantom().connected());
}

TEST(PhantomDriver, TwoCoroutinesTakeTurns) {
  PhantomBench bench;
  bench.connect();
  int right = 0;
  std::vector<std::shared_ptr<trial::Started>> all;
  for (int i = 0; i < 8; ++i)
    all.push_back(bench.line.start([&, i]() -> asio::awaitable<void> {
      if (i % 2 == 0) {
        const double warm = co_await bench.phantom().temperature_degC();
        right += warm == 25.12;
      } else {
        const Spectrum spectrum = co_await bench.phantom().spectrum({});
        right += spectrum.counts[512] == 0x0A7C;
      }
    }));
  all[3]->cancel.emit(asio::cancellation_type::terminal);  // one that waits for its turn
  for (const auto& one : all) ASSERT_TRUE(bench.line.run_until_done(*one));
  EXPECT_EQ(all[3]->end(), "cancelled");
  EXPECT_EQ(right, 7);
  EXPECT_EQ(bench.phantom().counts().misses, 0u);
}

TEST(PhantomDriver, WaitsLongerAtLowSpeedOfTheLine) {
  auto settings = PhantomBench::expected_device();
  settings.link.baud = 9600;
  PhantomBench bench{settings};
  bench.connect();
  // 2081 bytes take 2.2 s at 9600 baud: an answer 2 s late is in time.
  bench.fake.late = [](const std::string& message) -> Duration { return message == "SPEC:READ?" ? 2s : 0s; };
  answer<Spectrum>(bench, [&] { return bench.phantom().spectrum({}); });
  EXPECT_EQ(bench.phantom().counts().misses, 0u);
}

// The device is 20 times as fast, and so is the wait for it; the margin for hiccups of the machine is not.
TEST(PhantomDriver, DeadlinesScaleWithTheSpeedOfTheBench) {
  PhantomBench bench{PhantomBench::expected_device(), 20.0};
  bench.fake.identity = "Alder Quay Sensors,PHANTOM,PH-01,1.0.0-emulated-x20";
  bench.connect();
  const double before_s = bench.seconds_now();
  answer<Spectrum>(bench, [&] { return bench.phantom().spectrum({2000000, 1, Shutter::open}); });
  EXPECT_NEAR(bench.seconds_now() - before_s, 0.1001, 0.001);
  bench.fake.spoil = [](const std::string& message, std::string line) {
    return message == "SPEC:READ?" ? std::string{} : line;
  };
  const auto problem = bench.problem_of([&]() -> asio::awaitable<void> {
    co_await bench.phantom().spectrum({2000000, 1, Shutter::open});
  });
  ASSERT_TRUE(problem);
  // Three readings of 0.1 s, each with the margin of 0.5 s; the fences in between are answered at once.
  EXPECT_NEAR(bench.seconds_now() - before_s, 0.1 + 3 * 0.6, 0.05);
}

}  // namespace
