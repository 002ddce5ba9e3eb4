#include <gtest/gtest.h>

#include <limits>
#include <numeric>

#include "drivers/emulated/control_commands.h"
#include "tests/emulated/trial.h"

namespace probewright::emulated {
namespace {

BenchOptions two_nests() {
  BenchOptions options = Trial::perfect();
  options.nests = 2;
  return options;
}

TEST(Hands, SeatAndRemove) {
  Trial trial(two_nests());
  EXPECT_TRUE(trial.bench.seat(1, "AQ20-048-00001", "AQ-20"));
  EXPECT_EQ(trial.bench.seat(1, "AQ20-048-00002", "AQ-20").error().id, "bench_nest_occupied");
  EXPECT_EQ(trial.bench.seat(2, "AQ20-048-00001", "AQ-20").error().id, "bench_probe_elsewhere");
  EXPECT_EQ(trial.bench.seat(2, "AQ20-048-00002", "AQ-99").error().id, "bench_unknown_model");
  EXPECT_EQ(trial.bench.seat(3, "AQ20-048-00002", "AQ-20").error().id, "bench_no_such_nest");
  EXPECT_EQ(trial.bench.seat(0, "AQ20-048-00002", "AQ-20").error().id, "bench_no_such_nest");
  EXPECT_EQ(trial.bench.remove(2).error().id, "bench_nest_empty");
  EXPECT_TRUE(trial.bench.remove(1));
  EXPECT_TRUE(trial.bench.seat(2, "AQ20-048-00001", "AQ-20"));
  EXPECT_EQ(trial.bench.truths().size(), 1u);
}

TEST(Hands, TruthIsTheSameInEveryNestAndOnEveryDay) {
  Trial one(two_nests()), other(two_nests());
  ASSERT_TRUE(one.bench.seat(1, "AQ20-048-00005", "AQ-20"));
  ASSERT_TRUE(other.bench.seat(1, "AQ20-048-00001", "AQ-20"));
  ASSERT_TRUE(other.bench.seat(2, "AQ20-048-00005", "AQ-20"));
  EXPECT_EQ(one.bench.truths().at("AQ20-048-00005").red.centroid_nm,
            other.bench.truths().at("AQ20-048-00005").red.centroid_nm);
}

TEST(Hands, SeatedFaultStaysWithItsSerial) {
  Trial trial(two_nests());
  const PlantedFault leaky{ProbeFault::detector_leaky, 0.5};
  const std::string serial = "AQ20-048-00005";
  ASSERT_TRUE(trial.bench.seat(1, serial, "AQ-20", leaky));
  const double dark_nA = trial.bench.truths().at(serial).dark_current_nA;
  EXPECT_GT(dark_nA, 10.0);
  ASSERT_TRUE(trial.bench.remove(1));
  ASSERT_TRUE(trial.bench.seat(2, serial, "AQ-20"));
  EXPECT_EQ(trial.bench.truths().at(serial).dark_current_nA, dark_nA);
  ASSERT_TRUE(trial.bench.remove(2));
  ASSERT_TRUE(trial.bench.seat(2, serial, "AQ-20", leaky));
  EXPECT_EQ(trial.bench.truths().at(serial).probe.faults, (std::vector<PlantedFault>{leaky}));
  ASSERT_TRUE(trial.bench.remove(2));
  const auto other = trial.bench.seat(2, serial, "AQ-20", {ProbeFault::shield_open, 1.0});
  ASSERT_FALSE(other);
  EXPECT_EQ(
      other.error().text(),
      "the probe AQ20-048-00005 was seated before with detector_leaky 0.5 (a serial stays the same probe: seat it "
      "without naming a fault, or take another serial)");
  ASSERT_TRUE(trial.bench.seat(2, "AQ20-048-00006", "AQ-20"));
  ASSERT_TRUE(trial.bench.remove(2));
  EXPECT_EQ(trial.bench.seat(2, "AQ20-048-00006", "AQ-20", leaky).error().id, "bench_other_probe");
}

TEST(Hands, SeatWithAFaultChecksWhatItIsGiven) {
  Trial trial;
  const std::string serial = "AQ20-048-00005";
  EXPECT_EQ(trial.bench.seat(1, serial, "AQ-99", {ProbeFault::shield_open, 1.0}).error().id, "bench_unknown_model");
  for (const double severity : {0.0, -1.0, 1.5, std::numeric_limits<double>::quiet_NaN()}) {
    EXPECT_EQ(trial.bench.seat(1, serial, "AQ-20", {ProbeFault::shield_open, severity}).error().id, "bench_severity");
  }
  EXPECT_EQ(trial.bench.seat(2, serial, "AQ-20", {ProbeFault::shield_open, 1.0}).error().id, "bench_no_such_nest");
  EXPECT_TRUE(trial.bench.truths().empty());
}

TEST(Hands, FirstSeatingIsTold) {
  Trial trial;
  std::vector<std::string> told;
  trial.bench.on_first_seat([&](const std::string& serial) { told.push_back(serial); });
  for (const char* serial : {"AQ20-048-00001", "AQ20-048-00002", "AQ20-048-00001"}) {
    ASSERT_TRUE(trial.bench.seat(1, serial, "AQ-20"));
    ASSERT_TRUE(trial.bench.remove(1));
  }
  EXPECT_EQ(told, (std::vector<std::string>{"AQ20-048-00001", "AQ20-048-00002"}));
}

TEST(Hands, SerialsTellTheirModel) {
  EXPECT_EQ(model_of_serial("AQ20-048-00137"), "AQ-20");
  EXPECT_EQ(model_of_serial("AQ35-048-00137"), "AQ-35");
  EXPECT_EQ(model_of_serial("AQ2-048-00137"), std::nullopt);
  EXPECT_EQ(model_of_serial(""), std::nullopt);
}

TEST(Cables, OpeningAgainReplugs) {
  Trial trial;
  PhantomEnd first(trial);
  EXPECT_EQ(first.ask("SPEC:AVER 5;AVER?"), "5");
  PhantomEnd second(trial);
  EXPECT_EQ(second.ask("SPEC:AVER?"), "5");  // the device kept its power
  EXPECT_THROW(first.ask("LID?"), wire::PortLost);
}

TEST(Cables, PulledCableIsGoneUntilPlugged) {
  Trial trial;
  PhantomEnd before(trial);
  EXPECT_EQ(trial.bench.plug(phantom1).error().id, "bench_cable_plugged");
  ASSERT_TRUE(trial.bench.pull(phantom1));
  EXPECT_EQ(trial.bench.pull(phantom1).error().id, "bench_cable_pulled");
  EXPECT_THROW(before.ask("LID?"), wire::PortLost);
  EXPECT_THROW(trial.bench.open(phantom1), wire::PortLost);
  ASSERT_TRUE(trial.bench.plug(phantom1));
  PhantomEnd after(trial);
  EXPECT_EQ(after.ask("LID?"), "CLOS");
  EXPECT_EQ(trial.bench.pull({7, DeviceKind::phantom}).error().id, "bench_no_such_device");
}

TEST(Cables, PullingInMidWorkLeavesNoAnswerBehind) {
  Trial trial;
  PhantomEnd before(trial);
  before.send("SPEC:EXP 1;READ?\n");
  trial.wait_s(0.5);
  PhantomEnd after(trial);
  EXPECT_EQ(after.ask("LID?"), "CLOS");
  EXPECT_EQ(after.receive(3.0), "");
}

TEST(Cables, RestartInMidCaptureEndsIt) {
  Trial trial;
  AdapterEnd adapter(trial);
  adapter.ask(0x10, pack().u16(1).u32(640).take());
  trial.wait_s(0.1);
  adapter.receive(0.0);
  ASSERT_TRUE(trial.bench.restart(adapter1));
  EXPECT_EQ(adapter.receive(2.0), "");
}

TEST(Spoiling, PlannedBytesAreLostChangedDoubled) {
  Trial trial;
  ASSERT_TRUE(trial.bench.spoil(phantom1, SpoiltByte{Way::from_device, 1, wire::FaultKind::lose}));
  ASSERT_TRUE(trial.bench.spoil(phantom1, SpoiltByte{Way::from_device, 5, wire::FaultKind::change, 0x20}));
  PhantomEnd phantom(trial);
  EXPECT_EQ(phantom.ask("LID?"), "COS");
  EXPECT_EQ(phantom.ask("LID?"), "cLOS");
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  EXPECT_EQ(trial.bench.bytes(phantom1, Way::from_device), 15u);
  EXPECT_EQ(trial.bench.bytes(phantom1, Way::to_device), 15u);
  EXPECT_EQ(trial.bench.spoilt(phantom1), 2u);
  ASSERT_TRUE(trial.bench.spoil(phantom1, SpoiltByte{Way::to_device, 0, wire::FaultKind::twice}));
  EXPECT_EQ(phantom.error_of("LID"), -113);
  EXPECT_EQ(trial.bench.spoilt(phantom1), 3u);
}

TEST(Spoiling, PlansOutliveThePort) {
  Trial trial;
  ASSERT_TRUE(trial.bench.spoil(phantom1, SpoiltByte{Way::from_device, 7, wire::FaultKind::lose}));
  {
    PhantomEnd phantom(trial);
    EXPECT_EQ(phantom.ask("LID?"), "CLOS");  // bytes 0 to 4
  }
  PhantomEnd phantom(trial);
  EXPECT_EQ(phantom.ask("LID?"), "CLS");
}

TEST(Spoiling, RatesSpoilAboutTheirShareOneWay) {
  Trial trial;
  ASSERT_TRUE(trial.bench.spoil(phantom1, SpoiltShare{Way::from_device, 0.01, {wire::FaultKind::change}, 3}));
  PhantomEnd phantom(trial);
  phantom.send("SPEC:READ?\n");
  EXPECT_EQ(phantom.receive(1.0).size(), 2075u);
  EXPECT_NEAR(static_cast<double>(trial.bench.spoilt(phantom1)), 20.8, 20.0);
  EXPECT_GT(trial.bench.spoilt(phantom1), 0u);
  ASSERT_TRUE(trial.bench.heal(phantom1));
  const auto spoilt = trial.bench.spoilt(phantom1);
  phantom.send("SPEC:READ?\n");
  EXPECT_EQ(phantom.receive(1.0).size(), 2075u);
  EXPECT_EQ(trial.bench.spoilt(phantom1), spoilt);
}

/// Everything that a short session says, both devices.
std::string session(const BenchOptions& options) {
  Trial trial(options);
  EXPECT_TRUE(trial.bench.seat(1, "AQ20-048-00001", "AQ-20"));
  PhantomEnd phantom(trial);
  AdapterEnd adapter(trial);
  adapter.ask(0x02, pack().u32(20000).u32(20000).take());
  std::string all = phantom.ask("SYST:BOOT?;:TEMP?;:SPEC:READ?");
  adapter.request(0x10, pack().u16(1).u32(64).take());
  return all + adapter.receive(1.0);
}

TEST(BenchTrial, SameSeedSameBytesOtherSeedOtherBytes) {
  BenchOptions options = two_nests();
  const std::string first = session(options);
  EXPECT_EQ(session(options), first);
  options.seed = 5;
  EXPECT_NE(session(options), first);
  options.seed = 4;
  options.perfect = false;
  EXPECT_NE(session(options), first);
}

struct Log : ActionObserver {
  std::vector<Action> actions;
  void done(const Action& action) override { actions.push_back(action); }
};

TEST(BenchTrial, ActionsAreReportedWithTheirDeviceTime) {
  Log log;
  BenchOptions options = Trial::perfect();
  options.speed = 10.0;
  Trial trial(options, &log);
  PhantomEnd phantom(trial);
  AdapterEnd adapter(trial);
  phantom.ask("SPEC:READ?");
  adapter.ask(0x07);
  adapter.request(0x10, pack().u16(1).u32(32).take());
  adapter.receive(1.0);
  ASSERT_EQ(log.actions.size(), 4u);
  EXPECT_EQ(log.actions[0].what, "SPEC:READ?");
  EXPECT_NEAR(log.actions[0].busy_s, 0.022 + 2086 * 10.0 / 921600, 1e-6);  // 11 bytes there, 2075 back
  EXPECT_EQ(log.actions[1].what, "ID resistance");
  EXPECT_NEAR(log.actions[1].busy_s, 0.010, 5e-4);
  EXPECT_EQ(log.actions[2].what, "start capture");
  EXPECT_EQ(log.actions[3].what, "capture");
  EXPECT_NEAR(log.actions[3].busy_s, 32 * 4 * 439e-6 + 0.0043, 2e-4);
}

TEST(BenchTrial, CanGoWhileItsCoroutinesStand) {
  asio::io_context io{1};
  wire::VirtualClock clock({0});
  auto bench = std::make_unique<Bench>(io.get_executor(), clock, two_nests());
  auto port = bench->open(adapter1);
  io.poll();
  bench.reset();
  io.restart();
  io.poll();
  SUCCEED();
}

// --- control commands (CONTROL.md)

TEST(ControlCommands, DoWhatTheySay) {
  Trial trial(two_nests());
  PhantomEnd phantom(trial);
  EXPECT_EQ(obey(trial.bench, "seat 1 AQ20-048-00001"), "ok");
  EXPECT_EQ(obey(trial.bench, "  seat\t2  AQ35-048-00001   AQ-35 \r"), "ok");
  EXPECT_EQ(phantom.ask("PROB?"), "1");
  EXPECT_EQ(obey(trial.bench, "remove 2"), "ok");
  EXPECT_EQ(obey(trial.bench, "seat 2 AQ20-048-00002 fault id_missing 1"), "ok");
  EXPECT_EQ(trial.bench.truths().at("AQ20-048-00002").probe.faults.front().fault, ProbeFault::id_missing);
  EXPECT_EQ(obey(trial.bench, "remove 2"), "ok");
  EXPECT_EQ(obey(trial.bench, "seat 2 AQ35-048-00003 AQ-35 fault red_led_weak 0.25"), "ok");
  EXPECT_EQ(trial.bench.truths().at("AQ35-048-00003").probe.faults.front().severity, 0.25);
  EXPECT_EQ(obey(trial.bench, "lid 1 open"), "ok");
  EXPECT_EQ(phantom.ask("LID?"), "OPEN");
  EXPECT_EQ(obey(trial.bench, "lid 1 closed"), "ok");
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  EXPECT_EQ(obey(trial.bench, "remove 1"), "ok");
  EXPECT_EQ(phantom.ask("PROB?"), "0");
  EXPECT_EQ(obey(trial.bench, "room 30"), "ok");
  EXPECT_EQ(phantom.ask("TEMP?").substr(0, 1), phantom.ask("TEMP?").substr(0, 1));
  EXPECT_NEAR(std::stod(phantom.ask("TEMP?")), 30.0, 0.06);
  EXPECT_EQ(obey(trial.bench, "fault nest1-phantom from lose at 0"), "ok");
  EXPECT_EQ(phantom.ask("LID?"), "LOS");
  EXPECT_EQ(obey(trial.bench, "fault nest1-phantom to any rate 0.5 seed 9"), "ok");
  EXPECT_EQ(obey(trial.bench, "heal nest1-phantom"), "ok");
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  const std::string boot = phantom.ask("SYST:BOOT?");
  EXPECT_EQ(obey(trial.bench, "restart nest1-phantom"), "ok");
  EXPECT_NE(phantom.ask("SYST:BOOT?"), boot);
  EXPECT_EQ(obey(trial.bench, "pull nest1-phantom"), "ok");
  EXPECT_THROW(trial.bench.open(phantom1), wire::PortLost);
  EXPECT_EQ(obey(trial.bench, "plug nest1-phantom"), "ok");
}

TEST(ControlCommands, SayWhatIsWrongInASentence) {
  Trial trial;
  EXPECT_EQ(obey(trial.bench, "seat 9 AQ20-048-00001"),
            "the bench has no nest 9; its nests are 1 to 1 (name one of them, or start the bench with more nests)");
  for (const char* line : {"",
                           "   ",
                           "fly",
                           "seat",
                           "seat 1",
                           "seat x AQ20-048-00001",
                           "seat 1 XX-1",
                           "seat 1 a b c",
                           "seat 1 AQ20-048-00001 fault",
                           "seat 1 AQ20-048-00001 fault shield_open",
                           "seat 1 AQ20-048-00001 fault bad_luck 1",
                           "seat 1 AQ20-048-00001 fault shield_open 0",
                           "seat 1 AQ20-048-00001 fault shield_open 1.5",
                           "seat 1 AQ20-048-00001 fault shield_open nan",
                           "seat 1 AQ20-048-00001 flaw shield_open 1",
                           "seat 1 AQ20-048-00001 fault shield_open 1 2",
                           "seat 1 AQ20-048-00001 AQ-20 fault shield_open",
                           "seat 1 AQ20-048-00001 AQ-20 fault shield_open 1 2",
                           "seat 1 XX-1 fault shield_open 1",
                           "remove",
                           "remove 1",
                           "lid 1 ajar",
                           "lid 1",
                           "room hot",
                           "room nan",
                           "room 1e9",
                           "pull",
                           "pull nest1",
                           "pull nest0-phantom",
                           "pull nest1-phantom-x",
                           "plug nest1-phantom",
                           "heal nest9-adapter",
                           "restart all",
                           "fault nest1-phantom",
                           "fault nest1-phantom up lose at 1",
                           "fault nest1-phantom to eat at 1",
                           "fault nest1-phantom to any at 1",
                           "fault nest1-phantom to lose at -1",
                           "fault nest1-phantom to lose at 1 2",
                           "fault nest1-phantom to lose by 1",
                           "fault nest1-phantom to lose rate 2",
                           "fault nest1-phantom to lose rate 0.1 seed",
                           "fault nest1-phantom to lose rate 0.1 salt 3",
                           "fault nest1-phantom to lose at 99999999999999999999"}) {
    const std::string reply = obey(trial.bench, line);
    EXPECT_NE(reply, "ok") << line;
    EXPECT_GT(reply.size(), 20u) << line << ": " << reply;
    EXPECT_EQ(reply.find('{'), std::string::npos) << reply;
    EXPECT_EQ(reply.find('\n'), std::string::npos) << reply;
  }
}

TEST(ControlCommands, SurviveRandomLines) {
  Trial trial;
  Deviates deviates(1);
  for (int i = 0; i < 2000; ++i) {
    std::string line = i % 2 == 0 ? "fault nest1-adapter " : "";
    for (int k = 0; k < 30; ++k) line.push_back(static_cast<char>(deviates.bits() & 0xFF));
    EXPECT_NE(obey(trial.bench, line), "");
  }
}

}  // namespace
}  // namespace probewright::emulated
