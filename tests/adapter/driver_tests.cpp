#include "drivers/adapter/driver.h"

#include <gtest/gtest.h>

#include <boost/asio/this_coro.hpp>
#include <set>

#include "tests/adapter/adapter_bench.h"

// The protocol is this project's own, so WIRE.md is the source of what is expected here.
namespace {

using namespace probewright;
using namespace std::chrono_literals;
using adapter::Driver;
using adapter::Led;
using trial::argument;
namespace asio = boost::asio;

template <class T>
T answer(AdapterBench& bench, std::function<asio::awaitable<T>()> ask) {
  std::optional<T> value;
  bench.line.run([&]() -> asio::awaitable<void> { value = co_await ask(); });
  return value.value_or(T{});
}
std::uint32_t id_milliohm(AdapterBench& bench) {
  return answer<adapter::IdResistance>(bench, [&] { return bench.adapter().id_resistance(); }).resistance_milliohm;
}
std::optional<Problem> problem_of_id(AdapterBench& bench) {
  return bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.adapter().id_resistance(); });
}
adapter::Capture capture(AdapterBench& bench, std::uint32_t cycles) {
  return answer<adapter::Capture>(bench, [&bench, cycles] { return bench.adapter().capture(cycles); });
}
void expect_right(const adapter::Capture& capture, std::uint32_t cycles) {
  ASSERT_EQ(capture.cycles.size(), cycles);
  for (std::uint32_t i = 0; i < cycles; ++i) {
    const adapter::Cycle want{FakeAdapter::code(i, 0), FakeAdapter::code(i, 1), FakeAdapter::code(i, 2),
                              FakeAdapter::code(i, 3)};
    ASSERT_EQ(capture.cycles[i], want) << i;
  }
}

TEST(AdapterDriver, ConnectsWithTheDriveOff) {
  AdapterBench bench;
  bench.fake.red_uA = 20000;  // whoever used it before died
  bench.fake.slot_ns = 200000;
  bench.fake.capture = 0;
  bench.connect();
  EXPECT_TRUE(bench.adapter().connected());
  EXPECT_EQ(bench.fake.red_uA, 0u);
  EXPECT_EQ(bench.fake.slot_ns, 439000u);
  ASSERT_EQ(bench.fake.requests.size(), 4u);
  const std::vector<std::uint8_t> order{0x11, 0x02, 0x01, 0x03};
  for (std::size_t i = 0; i < 4; ++i) EXPECT_EQ(bench.fake.requests[i].type, order[i]);
  EXPECT_EQ(bench.adapter().identity().firmware, "1.0.0");
  EXPECT_EQ(bench.adapter().identity().boot, 815u);
  EXPECT_EQ(bench.adapter().counts().misses, 0u);
}

TEST(AdapterDriver, AsksEveryFunction) {
  AdapterBench bench;
  bench.connect();
  Driver& adapter = bench.adapter();
  bench.line.run([&]() -> asio::awaitable<void> {
    co_await adapter.set_timing(439000);
    const auto id = co_await adapter.id_resistance();
    EXPECT_FALSE(id.open);
    EXPECT_EQ(id.resistance_milliohm, 13'700'000u);
    bench.fake.id_milliohm = 0xFFFFFFFF;
    const auto no_id = co_await adapter.id_resistance();
    EXPECT_TRUE(no_id.open);
    const auto connected = co_await adapter.dark_current(5000, 100, adapter::Input::connected);
    EXPECT_EQ(connected.current_pA, 812);
    EXPECT_EQ(connected.sd_pA, 9u);
    const auto open = co_await adapter.dark_current(5000, 100, adapter::Input::open);
    EXPECT_EQ(open.current_pA, -11);
    const auto red_leakage = co_await adapter.reverse_leakage(Led::red, 5000);
    EXPECT_EQ(red_leakage.leakage_pA, 1234u);
    EXPECT_FALSE(red_leakage.not_separate);
    const auto infrared_leakage = co_await adapter.reverse_leakage(Led::infrared, 5000);
    EXPECT_TRUE(infrared_leakage.not_separate);
    const auto pickup_pA = co_await adapter.mains_pickup_pA(100);
    EXPECT_EQ(pickup_pA, 321u);
    const auto presence = co_await adapter.presence();
    EXPECT_EQ(presence, (adapter::Presence{true, 17}));
    const auto resistor = co_await adapter.self_proof(adapter::Proof::reference_resistor);
    EXPECT_EQ(resistor.value, 10'000'000);
    const auto undriven = co_await adapter.forward_voltage(Led::red);
    EXPECT_TRUE(undriven.no_drive);
    co_await adapter.drive({20000, 20000});
    const auto warm = co_await adapter.forward_voltage(Led::red);
    EXPECT_EQ(warm.voltage_uV, 1'951'000);
    EXPECT_EQ(warm.first_uV, 1'958'900);
    EXPECT_EQ(warm.delivered_nA, 20'012'000u);
    const auto quarter = co_await adapter.forward_voltage_at(Led::infrared, 5000);
    EXPECT_EQ(quarter.voltage_uV, 1'302'000);
    EXPECT_EQ(quarter.first_uV, 0);
    const auto state = co_await adapter.state();
    EXPECT_EQ(state.drive, (adapter::Drive{20000, 20000}));
    EXPECT_EQ(state.temperature_mdegC, 31250);
    co_await adapter.dwell_driven(1700ms);
    const bool off = co_await adapter.drive_off();
    EXPECT_TRUE(off);
  });
  EXPECT_EQ(bench.fake.red_uA, 0u);
  EXPECT_EQ(bench.asked(0x0B), 1u + 4u);  // dwelling 1.7 s asks every 0.5 s
  EXPECT_EQ(adapter.counts().misses, 0u);
}

TEST(AdapterDriver, RefusesStrangersInWords) {
  struct Case {
    std::string id, found;
    std::function<void(FakeAdapter&)> change;
  };
  const std::vector<Case> cases{
      {"device_stranger", "AD-02", [](FakeAdapter& f) { f.names.serial = "AD-02"; }},
      {"device_stranger", "PHANTOM", [](FakeAdapter& f) { f.names.model = "PHANTOM"; }},
      {"device_wrong_firmware", "1.1.0", [](FakeAdapter& f) { f.names.firmware = "1.1.0"; }},
      {"device_wrong_certificate", "ADC-1", [](FakeAdapter& f) { f.names.certificate = "ADC-1"; }},
      {"device_wrong_certificate", "2026-12-31", [](FakeAdapter& f) { f.names.due = "2026-12-31"; }},
      {"device_not_emulated", "", [](FakeAdapter& f) { f.flags = 0; }},
      {"device_speed_mismatch", "20", [](FakeAdapter& f) { f.speed_thousandths = 20000; }},
      {"device_wrong_protocol", "2", [](FakeAdapter& f) { f.protocol = 2; }},
  };
  for (const Case& c : cases) {
    AdapterBench bench;
    c.change(bench.fake);
    const auto problem = bench.problem_of([&] { return bench.adapter().connect(); });
    ASSERT_TRUE(problem) << c.id;
    EXPECT_EQ(problem->id, c.id);
    EXPECT_EQ(argument(*problem, "found"), c.found);
    EXPECT_EQ(problem->kind(), ProblemKind::not_ready);
    EXPECT_FALSE(bench.adapter().connected());
    EXPECT_EQ(bench.adapter().trouble(), problem);
  }
}

TEST(AdapterDriver, NoDriveAboveTheCeilingEverLeavesTheStation) {
  AdapterBench bench;
  bench.connect();
  const auto requests = bench.fake.requests.size();
  const auto traffic = bench.traffic.pieces.size();
  const std::vector<std::function<asio::awaitable<void>()>> all{
      [&] {
        return bench.adapter().drive({25001, 0});
      },
      [&] {
        return bench.adapter().drive({0, 22001});
      },
      [&] {
        return bench.adapter().drive({4294967295, 4294967295});
      },
      [&]() -> asio::awaitable<void> { co_await bench.adapter().forward_voltage_at(Led::red, 25001); },
      [&]() -> asio::awaitable<void> { co_await bench.adapter().forward_voltage_at(Led::infrared, 22001); },
  };
  for (const auto& ask : all) {
    const auto problem = bench.problem_of(ask);
    ASSERT_TRUE(problem);
    EXPECT_EQ(problem->id, "drive_above_ceiling");
    EXPECT_EQ(argument(*problem, "ceiling"), "25000 uA red, 22000 uA infrared");
  }
  EXPECT_EQ(bench.fake.requests.size(), requests);
  EXPECT_EQ(bench.traffic.pieces.size(), traffic);
  bench.line.run([&] { return bench.adapter().drive({25000, 22000}); });
  bench.adapter().set_ceiling({10000, 10000});
  const auto lower = bench.problem_of([&] { return bench.adapter().drive({10001, 0}); });
  ASSERT_TRUE(lower);
  EXPECT_EQ(bench.fake.highest_red_uA, 25000u);
  EXPECT_EQ(bench.fake.highest_infrared_uA, 22000u);
}

TEST(AdapterDriver, EveryAttemptHasANumberOfItsOwn) {
  AdapterBench bench;
  bench.connect();
  int n = 0;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    return frame.type == 0x87 && ++n <= 2 ? Bytes{} : bytes;
  };
  EXPECT_EQ(id_milliohm(bench), 13'700'000u);
  EXPECT_EQ(bench.adapter().counts().misses, 2u);
  EXPECT_EQ(bench.adapter().counts().asked_again, 2u);
  std::set<std::uint16_t> numbers;
  for (const auto& request : bench.fake.requests) numbers.insert(request.sequence);
  EXPECT_EQ(numbers.size(), bench.fake.requests.size());
}

TEST(AdapterDriver, ALateReplyIsNeverTakenForTheNext) {
  AdapterBench bench;
  bench.connect();
  int n = 0;
  bench.fake.late = [&](const wire::Frame& request) -> Duration {
    if (request.type != 0x07) return 0ms;
    bench.fake.id_milliohm = 99;  // of the second reply, so that the late first one would show
    return ++n == 1 ? 600ms : 0ms;
  };
  EXPECT_EQ(id_milliohm(bench), 99u);
  EXPECT_EQ(n, 2);
}

TEST(AdapterDriver, AReplyAboutSomethingElseIsAMiss) {
  AdapterBench bench;
  bench.connect();
  int n = 0;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    if (frame.type != 0x86 || ++n > 1) return bytes;
    wire::Frame other = frame;
    other.payload[4] = std::byte{0};  // the other input
    return wire::encode_frame(other);
  };
  const auto dark = answer<adapter::DarkCurrent>(
      bench, [&] { return bench.adapter().dark_current(0, 100, adapter::Input::connected); });
  EXPECT_EQ(dark.current_pA, 812);
  EXPECT_EQ(n, 2);
}

TEST(AdapterDriver, TellsWhatTheDeviceRefusesAndDoesNotAskAgain) {
  AdapterBench bench;
  bench.connect();
  bench.line.run([&] { return bench.adapter().drive({20000, 20000}); });
  const auto problem = bench.problem_of([&] { return bench.adapter().set_timing(300000); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_refused");
  EXPECT_EQ(argument(*problem, "request"), "set timing");
  EXPECT_EQ(argument(*problem, "words"), "not in this state (code 4, 0)");
  EXPECT_EQ(bench.asked(0x03), 2u);
  EXPECT_EQ(bench.adapter().slot_ns(), 439000u);
  bench.fake.refuse = [](const wire::Frame& request) -> std::optional<std::uint8_t> {
    if (request.type == 0x07) return 5;
    return std::nullopt;
  };
  const auto fault = problem_of_id(bench);
  ASSERT_TRUE(fault);
  EXPECT_EQ(fault->id, "device_fault");
  EXPECT_TRUE(bench.adapter().connected());
}

TEST(AdapterDriver, ASilentDeviceIsLostAfterItsTries) {
  AdapterBench bench;
  bench.connect();
  bench.fake.spoil = [](const wire::Frame&, Bytes) { return Bytes{}; };
  const double before_s = bench.seconds_now();
  const auto problem = problem_of_id(bench);
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_lost");
  EXPECT_EQ(argument(*problem, "tries"), "3");
  EXPECT_LT(bench.seconds_now() - before_s, 1.7);
  EXPECT_FALSE(bench.adapter().connected());
}

TEST(AdapterDriver, ADeviceThatStartedAnewIsNoticedAfterAMiss) {
  AdapterBench bench;
  bench.connect();
  int n = 0;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    if (frame.type != 0x87 || ++n > 1) return bytes;
    bench.fake.power_on();
    return Bytes{};
  };
  const auto problem = problem_of_id(bench);
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_reset");
  EXPECT_FALSE(bench.adapter().connected());
}

TEST(AdapterDriver, TakesACapture) {
  AdapterBench bench;
  bench.connect();
  bench.line.run([&] { return bench.adapter().drive({20000, 19000}); });
  const double before_s = bench.seconds_now();
  const auto taken = capture(bench, 352);
  expect_right(taken, 352);
  EXPECT_EQ(taken.asked_again, 0);
  EXPECT_EQ(taken.slot_ns, 439000u);
  EXPECT_EQ(taken.drive, (adapter::Drive{20000, 19000}));
  EXPECT_NEAR(bench.seconds_now() - before_s, 352 * 4 * 439e-6, 0.001);
  EXPECT_EQ(bench.adapter().counts().misses, 0u);
}

TEST(AdapterDriver, ACaptureOfOddLengthIsOurMistake) {
  AdapterBench bench;
  bench.connect();
  for (const std::uint32_t cycles : {0u, 31u, 33u, 65536u + 32u}) {
    const auto problem = bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.adapter().capture(cycles); });
    ASSERT_TRUE(problem);
    EXPECT_EQ(problem->id, "capture_length");
    EXPECT_EQ(problem->kind(), ProblemKind::our_bug);
  }
  EXPECT_EQ(bench.asked(0x10), 0u);
}

// Each frame of a capture in turn: lost, or with one bit turned.
TEST(AdapterDriver, ACaptureWithAnyFrameMissingIsTakenAgainWhole) {
  for (std::size_t bad = 0; bad <= 5; ++bad)
    for (const bool lost : {true, false}) {
      AdapterBench bench;
      bench.connect();
      std::size_t n = 0;
      bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
        const bool of_capture = frame.type == 0x90 || frame.type == 0x50 || frame.type == 0x51;
        if (!of_capture || n++ != bad) return bytes;
        if (lost) return Bytes{};
        bytes[bytes.size() / 2] ^= std::byte{0x10};
        return bytes;
      };
      const auto taken = capture(bench, 128);  // reply, 4 blocks, end
      expect_right(taken, 128);
      EXPECT_EQ(taken.asked_again, 1) << bad;
      EXPECT_EQ(bench.asked(0x10), 2u);
      EXPECT_EQ(bench.asked(0x11), 2u);  // one of connecting
      EXPECT_EQ(bench.adapter().counts().asked_again, 1u);
      EXPECT_LT(bench.seconds_now(), 2 * 0.23 + 0.6);  // a lost frame shows with the next one, or half a second late
    }
}

TEST(AdapterDriver, ACaptureWhoseSumIsWrongIsTakenAgain) {
  AdapterBench bench;
  bench.connect();
  int ends = 0;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    if (frame.type != 0x51 || ++ends > 1) return bytes;
    wire::Frame other = frame;
    other.payload.back() ^= std::byte{1};
    return wire::encode_frame(other);
  };
  expect_right(capture(bench, 64), 64);
  EXPECT_EQ(ends, 2);
}

TEST(AdapterDriver, ACaptureThatNeverComesWholeIsGivenUp) {
  AdapterBench bench;
  bench.connect();
  bench.fake.spoil = [](const wire::Frame& frame, Bytes bytes) {
    return frame.type == 0x50 && frame.sequence == 1 ? Bytes{} : bytes;
  };
  const auto problem = bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.adapter().capture(128); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_lost");
  EXPECT_EQ(argument(*problem, "cause"), "block 1 of the capture is missing");
  EXPECT_EQ(bench.asked(0x10), 3u);
}

TEST(AdapterDriver, AResetInMidCaptureVoidsTheRun) {
  AdapterBench bench;
  bench.connect();
  bool done = false;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    if (frame.type == 0x50 && frame.sequence == 2 && !std::exchange(done, true)) bench.fake.power_on();
    return bytes;
  };
  const auto problem = bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.adapter().capture(128); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_reset");
}

TEST(AdapterDriver, AResetBetweenRequestsIsNoticedByTheNextCapture) {
  AdapterBench bench;
  bench.connect();
  bench.fake.power_on();
  const auto problem = bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.adapter().capture(32); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_reset");
}

TEST(AdapterDriver, DriveThatWentOffDuringACaptureVoidsTheRun) {
  AdapterBench bench;
  bench.connect();
  bench.line.run([&] { return bench.adapter().drive({20000, 20000}); });
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    if (frame.type == 0x50 && frame.sequence == 1) bench.fake.red_uA = bench.fake.infrared_uA = 0;  // probe pulled
    return bytes;
  };
  const auto problem = bench.problem_of([&]() -> asio::awaitable<void> { co_await bench.adapter().capture(128); });
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "drive_lost");
  EXPECT_EQ(problem->kind(), ProblemKind::device_lost);
  EXPECT_TRUE(bench.adapter().connected());
  const auto dwelling = bench.problem_of([&] { return bench.adapter().dwell_driven(100ms); });
  ASSERT_TRUE(dwelling);
  EXPECT_EQ(dwelling->id, "drive_lost");
}

TEST(AdapterDriver, DriveOffTriesTwiceAsOften) {
  AdapterBench bench;
  bench.connect();
  bench.line.run([&] { return bench.adapter().drive({20000, 20000}); });
  int n = 0;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    return frame.type == 0x82 && ++n <= 5 ? Bytes{} : bytes;
  };
  EXPECT_TRUE(answer<bool>(bench, [&] { return bench.adapter().drive_off(); }));
  EXPECT_EQ(bench.fake.red_uA, 0u);
  EXPECT_TRUE(bench.adapter().connected());
  n = -100;
  EXPECT_FALSE(answer<bool>(bench, [&] { return bench.adapter().drive_off(); }));
  EXPECT_FALSE(bench.adapter().connected());
  ASSERT_TRUE(bench.adapter().trouble());
  EXPECT_EQ(argument(*bench.adapter().trouble(), "cause"), "drive not off");
  EXPECT_FALSE(answer<bool>(bench, [&] { return bench.adapter().drive_off(); }));  // lost: nothing to ask
}

TEST(AdapterDriver, ACancelledCaptureIsStoppedAndTheDriveSwitchedOff) {
  for (int ms = 0; ms < 260; ms += 13) {
    AdapterBench bench;
    bench.connect();
    bench.line.run([&] { return bench.adapter().drive({20000, 20000}); });
    const auto started = bench.line.start([&]() -> asio::awaitable<void> {
      std::exception_ptr thrown;
      try {
        co_await bench.adapter().capture(128);
      } catch (const boost::system::system_error&) {
        thrown = std::current_exception();
      }
      co_await asio::this_coro::reset_cancellation_state(asio::disable_cancellation());
      const bool off = co_await bench.adapter().drive_off();
      EXPECT_TRUE(off);
      if (thrown) std::rethrow_exception(thrown);
    });
    bench.pass(std::chrono::milliseconds(ms));
    started->cancel.emit(asio::cancellation_type::terminal);
    ASSERT_TRUE(bench.line.run_until_done(*started));
    EXPECT_EQ(started->end(), ms < 220 ? "cancelled" : started->end());
    EXPECT_EQ(bench.fake.red_uA, 0u);
    EXPECT_EQ(id_milliohm(bench), 13'700'000u);
    EXPECT_EQ(bench.fake.capture, 0u);
    expect_right(capture(bench, 64), 64);
    EXPECT_EQ(bench.adapter().counts().misses, 0u);
  }
}

TEST(AdapterDriver, FindsTheDeviceAgain) {
  AdapterBench bench;
  const auto keeping = bench.line.start([&] { return bench.adapter().keep_connected(); });
  bench.pass(1s);
  ASSERT_TRUE(bench.adapter().connected());
  bench.line.run([&] { return bench.adapter().drive({20000, 20000}); });
  bench.unplug();
  const auto problem = problem_of_id(bench);
  ASSERT_TRUE(problem);
  EXPECT_EQ(problem->id, "device_lost");
  bench.pass(30s);
  EXPECT_FALSE(bench.adapter().connected());
  bench.plugged = true;
  bench.pass(6s);
  EXPECT_TRUE(bench.adapter().connected());
  EXPECT_EQ(bench.fake.red_uA, 0u);
  EXPECT_EQ(id_milliohm(bench), 13'700'000u);
  EXPECT_EQ(bench.adapter().counts().connects, 2u);
  keeping->cancel.emit(asio::cancellation_type::terminal);
  ASSERT_TRUE(bench.line.run_until_done(*keeping));
  EXPECT_EQ(keeping->end(), "cancelled");
}

TEST(AdapterDriver, AnUnpluggedCableInMidCaptureLosesTheDeviceAtOnce) {
  AdapterBench bench;
  bench.connect();
  const auto started = bench.line.start([&]() -> asio::awaitable<void> { co_await bench.adapter().capture(3200); });
  bench.pass(1s);
  bench.unplug();
  const double before_s = bench.seconds_now();
  ASSERT_TRUE(bench.line.run_until_done(*started));
  EXPECT_THROW(std::rethrow_exception(started->thrown), wire::DeviceLost);
  EXPECT_LT(bench.seconds_now() - before_s, 0.001);
}

}  // namespace
