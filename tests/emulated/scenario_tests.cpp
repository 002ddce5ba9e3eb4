// What can go wrong with the bench: how it is read, and that it happens where, when and as much as was said.
#include <gtest/gtest.h>

#include <cmath>

#include "drivers/emulated/control_commands.h"
#include "tests/emulated/trial.h"

namespace probewright::emulated {
namespace {

std::vector<std::string> ids_of(const Problems& problems) {
  std::vector<std::string> ids;
  for (const Problem& problem : problems) ids.push_back(problem.where + " " + problem.id);
  return ids;
}

TEST(ScenarioFile, ReadsEveryFaultWithAllItsWords) {
  const auto scenario = read_scenario(R"(scenario: all of them
seed: 7
faults:
  - byte_lost: {device: nest1-adapter, way: from, per_byte: 1e-5, at: 2 s, until: 1 min}
  - byte_changed: {nest: 2, at: 31.5 s, count: 3}
  - byte_doubled: {}
  - bytes_paused: {device: nest1-phantom, by: 30 ms, per_byte: 0.001}
  - bytes_split: {per_reply: 0.5}
  - noise_bytes: {bytes: 40}
  - reply_late: {device: phantom, by: 800 ms}
  - reply_missing: {nest: 1, device: adapter, per_reply: 0.01}
  - restart: {nest: 1, at: 4 s}
  - restart_in_capture: {after: 200 ms}
  - cable_pulled: {device: nest2-adapter, at: 40 s, for: 5 s}
  - wrong_certificate: {device: nest1-phantom, number: PHC-1}
  - lid_opened: {nest: 1, per_minute: 0.5, for: 2 s}
  - band_drift: {nest: 1, red: -3 %, over: 10 min}
  - set_point_error: {red: 1.5 %, infrared: -1.5 %}
  - gain_error: {by: 2 %}
  - wrong_temperature: {by: -4 K}
  - mains_flicker: {level: 20 %, depth: 50 %, harmonics: [30 %, 10 %]}
  - warm_room: {to: 33 degC, at: 5 min, over: 20 min}
)",
                                      "s.yaml");
  ASSERT_TRUE(scenario) << scenario.error().front().text();
  EXPECT_EQ(scenario->name, "all of them");
  EXPECT_EQ(scenario->seed, 7u);
  const auto& faults = scenario->faults;
  ASSERT_EQ(faults.size(), all_bench_faults().size());
  for (std::size_t i = 0; i < faults.size(); ++i) EXPECT_EQ(faults[i].fault, all_bench_faults()[i]);
  EXPECT_EQ(faults[0].nest, 1);
  EXPECT_EQ(faults[0].device, DeviceKind::adapter);
  EXPECT_EQ(faults[0].way, Way::from_device);
  EXPECT_EQ(faults[0].per_byte, 1e-5);
  EXPECT_EQ(faults[0].until_s, 60.0);
  EXPECT_EQ(faults[1].count, 3);
  EXPECT_EQ(faults[1].device, std::nullopt);
  EXPECT_NEAR(faults[3].by_s, 0.03, 1e-15);
  EXPECT_EQ(faults[6].nest, std::nullopt);
  EXPECT_EQ(faults[6].device, DeviceKind::phantom);
  EXPECT_EQ(faults[10].for_s, 5.0);
  EXPECT_EQ(faults[11].certificate, "PHC-1");
  EXPECT_NEAR(faults[13].red, -0.03, 1e-15);
  EXPECT_EQ(faults[13].over_s, 600.0);
  EXPECT_EQ(faults[16].shown_K, -4.0);
  ASSERT_EQ(faults[17].harmonics.size(), 2u);
  EXPECT_NEAR(faults[17].harmonics[1], 0.1, 1e-15);
  EXPECT_EQ(faults[18].room_degC, 33.0);
}

TEST(ScenarioFile, TellsEveryFaultOfTheTextAtOnce) {
  const auto scenario = read_scenario(R"(scenario: wrong in every way
seed: -1
faults:
  - byte_lots: {nest: 1}
  - {lid_opened: {nest: 1}, restart: {nest: 1}}
  - lid_opened: {nest: 17, per_minute: 1}
  - reply_late: {device: nest1-lamp, per_byte: 0.1}
  - byte_lost: {way: sideways, per_byte: 2}
  - gain_error: {by: 2 K, nest: one}
  - cable_pulled: {nest: 1, device: nest1-adapter}
  - warm_room: {nest: 1}
more: 1
)",
                                      "s.yaml");
  ASSERT_FALSE(scenario);
  EXPECT_EQ(ids_of(scenario.error()),
            (std::vector<std::string>{
                "s.yaml:2:7 scenario_bound", "s.yaml:4:5 scenario_unknown_fault", "s.yaml:5:5 scenario_one_fault",
                "s.yaml:6:17 scenario_when", "s.yaml:6:24 scenario_bound", "s.yaml:7:17 yaml_missing_key",
                "s.yaml:7:26 scenario_device", "s.yaml:7:38 yaml_unknown_key", "s.yaml:8:22 scenario_bound",
                "s.yaml:8:42 scenario_bound", "s.yaml:9:22 unit_mismatch", "s.yaml:9:33 integer_malformed",
                "s.yaml:10:37 scenario_device", "s.yaml:11:16 yaml_missing_key", "s.yaml:11:17 yaml_unknown_key",
                "s.yaml:12:1 yaml_unknown_key"}));
  EXPECT_EQ(scenario.error()[1].text(), "s.yaml:4:5: the bench knows no fault byte_lots (known is: byte_lost)");
}

TEST(ScenarioFile, TheDemonstrationsOneIsRight) {
  const auto scenario = read_scenario_file(PW_SOURCE_DIR "/configs/scenarios/rough-day.yaml");
  ASSERT_TRUE(scenario) << scenario.error().front().text();
  EXPECT_EQ(scenario->faults.size(), 11u);
  EXPECT_EQ(read_scenario_file("/nowhere/to/be.yaml").error().front().id, "file_unreadable");
}

/// A bench with `text` as its list of faults.
struct Day {
  explicit Day(const std::string& faults, BenchOptions options = Trial::perfect()) : trial(options) {
    const auto scenario = read_scenario("scenario: a day\nfaults:\n" + faults, "day");
    if (!scenario) throw std::runtime_error(scenario.error().front().text());
    trial.bench.play(*scenario).value();
  }
  Trial trial;
};

std::uint64_t count(Trial& trial, BenchFault fault) {
  const auto troubles = trial.bench.troubles();
  const auto found = troubles.find(fault);
  return found == troubles.end() ? 0 : found->second;
}

TEST(ScenarioPlay, AByteIsSpoiltAtItsMoment) {
  Day day("  - byte_lost: {device: nest1-phantom, way: from, at: 2 s}\n");
  PhantomEnd phantom(day.trial);
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  day.trial.wait_s(2.5);
  EXPECT_EQ(phantom.ask("LID?"), "LOS");
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  EXPECT_EQ(day.trial.bench.troubles(), (std::map<BenchFault, std::uint64_t>{{BenchFault::byte_lost, 1}}));
}

TEST(ScenarioPlay, RatesStandBesideEachOtherAndEnd) {
  Day day(
      "  - byte_changed: {device: nest1-phantom, way: from, per_byte: 0.01, until: 10 s}\n"
      "  - byte_doubled: {device: nest1-phantom, way: from, per_byte: 0.01, until: 10 s}\n");
  PhantomEnd phantom(day.trial);
  for (int i = 0; i < 10; ++i) {
    phantom.send("SPEC:READ?\n");
    phantom.receive(0.5);
  }
  // About 1 % of 10 blocks of 2075 bytes each: 207 +- 5 sd.
  EXPECT_NEAR(static_cast<double>(count(day.trial, BenchFault::byte_changed)), 207.0, 75.0);
  EXPECT_NEAR(static_cast<double>(count(day.trial, BenchFault::byte_doubled)), 207.0, 75.0);
  day.trial.wait_s(10.0);
  const auto before = day.trial.bench.troubles();
  phantom.send("SPEC:READ?\n");
  EXPECT_EQ(phantom.receive(0.5).size(), 2075u);
  EXPECT_EQ(day.trial.bench.troubles(), before);
}

TEST(ScenarioPlay, BytesPauseAndComeInPieces) {
  Day day(
      "  - bytes_paused: {device: nest1-phantom, way: from, by: 300 ms}\n"
      "  - bytes_split: {device: nest1-adapter, by: 5 ms}\n");
  PhantomEnd phantom(day.trial);
  phantom.send("SPEC:READ?\n");
  const std::string first = phantom.receive(0.1);
  EXPECT_LT(first.size(), 2075u);
  EXPECT_EQ(first.size() + phantom.receive(0.5).size(), 2075u);
  AdapterEnd adapter(day.trial);
  const double before_s = day.trial.now_s();
  EXPECT_EQ(adapter.ask(0x07).size(), 4u);
  EXPECT_GE(day.trial.now_s() - before_s, 0.020);  // 10 ms of work, and at least one cut of 5 ms each way
  EXPECT_EQ(count(day.trial, BenchFault::bytes_paused), 1u);
  EXPECT_EQ(count(day.trial, BenchFault::bytes_split), 2u);
}

TEST(ScenarioPlay, RepliesAreLateMissingAndBehindNoise) {
  Day day(
      "  - reply_late: {device: nest1-phantom, by: 800 ms}\n"
      "  - reply_missing: {device: nest1-adapter, count: 2}\n"
      "  - noise_bytes: {device: nest1-adapter, way: from, bytes: 5, at: 5 s}\n");
  PhantomEnd phantom(day.trial);
  phantom.send("LID?\n");
  EXPECT_EQ(phantom.receive(0.79), "");
  EXPECT_EQ(phantom.receive(0.1), "CLOS\n");
  EXPECT_EQ(phantom.ask("LID?", 0.1), "CLOS");
  AdapterEnd adapter(day.trial);
  adapter.request(0x02);
  EXPECT_FALSE(adapter.next(0.5));
  adapter.request(0x07);
  EXPECT_FALSE(adapter.next(0.5));
  EXPECT_EQ(adapter.ask(0x07).size(), 4u);
  day.trial.wait_s(5.0);
  adapter.request(0x07);
  EXPECT_EQ(adapter.receive(0.5).size(), 5u + 4u + wire::Frame::overhead + 2u);
  EXPECT_EQ(day.trial.bench.troubles(),
            (std::map<BenchFault, std::uint64_t>{
                {BenchFault::reply_late, 1}, {BenchFault::reply_missing, 2}, {BenchFault::noise_bytes, 1}}));
}

TEST(ScenarioPlay, DevicesStartAnewAndCablesComeOut) {
  Day day(
      "  - restart: {device: nest1-phantom, at: 2 s}\n"
      "  - restart_in_capture: {at: 3 s}\n"
      "  - cable_pulled: {device: nest1-phantom, at: 6 s, for: 2 s}\n");
  PhantomEnd phantom(day.trial);
  EXPECT_EQ(phantom.ask("SPEC:AVER 5;AVER?"), "5");
  day.trial.wait_s(2.5);
  EXPECT_EQ(phantom.ask("SPEC:AVER?"), "1");
  AdapterEnd adapter(day.trial);
  day.trial.wait_s(1.0);
  adapter.ask(0x10, pack().u16(1).u32(320).take());
  int blocks = 0;
  while (const auto frame = adapter.next(1.0)) blocks += frame->type == 0x50;
  EXPECT_EQ(blocks, 1);  // one in 56 ms; at 100 ms it started anew
  day.trial.wait_s(6.5 - day.trial.now_s());
  EXPECT_THROW(phantom.ask("LID?"), wire::PortLost);
  day.trial.wait_s(2.0);
  PhantomEnd again(day.trial);
  EXPECT_EQ(again.ask("LID?"), "CLOS");
}

TEST(ScenarioPlay, CertificatesAndLidsAreRightAgain) {
  Day day(
      "  - wrong_certificate: {device: nest1-phantom, for: 2 s}\n"
      "  - lid_opened: {nest: 1, at: 1 s, for: 1 s}\n");
  PhantomEnd phantom(day.trial);
  EXPECT_EQ(phantom.ask("CERT:NUMB?"), "\"PHC-2024-0901\"");
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  day.trial.wait_s(1.1);
  EXPECT_EQ(phantom.ask("LID?"), "OPEN");
  day.trial.wait_s(1.1);
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
  EXPECT_EQ(phantom.ask("CERT:NUMB?"), "\"PHC-2026-0101\"");
}

TEST(ScenarioPlay, ARateOfEventsIsKeptOverAnHour) {
  Day day("  - lid_opened: {nest: 1, per_minute: 2, for: 1 s}\n");
  day.trial.wait_s(3600.0);
  // 30 s pause and 1 s open: 116 in an hour, give or take 5 sd of a Poisson count.
  EXPECT_NEAR(static_cast<double>(count(day.trial, BenchFault::lid_opened)), 116.0, 55.0);
}

/// Mean light of both bands in nA, and the ratio's depth-free mean, seen by the adapter with the LEDs driven.
struct Seen {
  double red = 0.0, infrared = 0.0, red_swing = 0.0;
};
Seen seen_pulses(Trial& trial) {
  PhantomEnd phantom(trial);
  AdapterEnd adapter(trial);
  adapter.ask(0x02, pack().u32(20000).u32(20000).take());
  phantom.ask("MOD:SETP 2;RATE 5;STAT ON;*OPC?");
  trial.wait_s(1.0);
  adapter.ask(0x10, pack().u16(1).u32(352).take());
  Seen seen;
  double lowest = 1e9, highest = 0.0;
  int cycles = 0;
  while (const auto frame = adapter.next(1.0)) {
    if (frame->type != 0x50) break;
    wire::LeReader samples{frame->payload};
    samples.raw(6);
    for (int i = 0; i < 32; ++i, ++cycles) {
      const double red = samples.i24();
      samples.i24();
      seen.red += red;
      seen.infrared += samples.i24();
      samples.i24();
      lowest = std::min(lowest, red);
      highest = std::max(highest, red);
    }
  }
  const double scale = adapter_certificate::nA_per_code / cycles;
  seen.red *= scale;
  seen.infrared *= scale;
  seen.red_swing = (highest - lowest) * adapter_certificate::nA_per_code / seen.red;
  phantom.ask("MOD:STAT OFF;*OPC?");
  adapter.ask(0x02, pack().u32(0).u32(0).take());
  trial.wait_s(10.0);
  return seen;
}

TEST(ScenarioPlay, DriftsErrorsAndWarmthHaveTheSizeThatWasSaid) {
  Trial trial;
  ASSERT_TRUE(trial.bench.seat(1, "AQ20-048-00001", "AQ-20"));
  const Seen before = seen_pulses(trial);
  const auto cause = [&](const char* what) { return obey(trial.bench, std::string("cause ") + what); };
  ASSERT_EQ(cause("band_drift: {nest: 1, red: -3 %}"), "ok");
  Seen after = seen_pulses(trial);
  EXPECT_NEAR(after.red / before.red, 0.97, 1e-3);
  EXPECT_NEAR(after.infrared / before.infrared, 1.0, 1e-3);
  ASSERT_EQ(cause("gain_error: {by: 5 %}"), "ok");
  after = seen_pulses(trial);
  EXPECT_NEAR(after.red / before.red, 0.97 * 1.05, 1e-3);
  EXPECT_NEAR(after.infrared / before.infrared, 1.05, 1e-3);
  ASSERT_EQ(cause("set_point_error: {red: 20 %}"), "ok");
  EXPECT_NEAR(seen_pulses(trial).red_swing / before.red_swing, 1.2, 0.02);
  PhantomEnd phantom(trial);
  ASSERT_EQ(cause("wrong_temperature: {by: 3 K}"), "ok");
  EXPECT_NEAR(std::stod(phantom.ask("TEMP?")), 28.0, 0.1);
  ASSERT_EQ(cause("warm_room: {to: 35 degC, over: 100 s}"), "ok");
  trial.wait_s(50.5);
  EXPECT_NEAR(std::stod(phantom.ask("TEMP?")), 33.0, 0.2);
  trial.wait_s(60.0);
  EXPECT_NEAR(std::stod(phantom.ask("TEMP?")), 38.0, 0.1);
  EXPECT_EQ(obey(trial.bench, "mend"), "ok");
  EXPECT_NEAR(std::stod(phantom.ask("TEMP?")), 25.0, 0.1);
  const Seen mended = seen_pulses(trial);
  EXPECT_NEAR(mended.red / before.red, 1.0, 1e-3);
  EXPECT_NEAR(mended.red_swing / before.red_swing, 1.0, 0.02);
}

TEST(ScenarioPlay, FlickerHasItsMeanAndItsHarmonics) {
  const Flicker flicker{0.5, 0.4, {0.5, 0.25}, 50.0};
  double sum = 0.0, fundamental = 0.0, second = 0.0, third = 0.0;
  constexpr int n = 1000;
  for (int i = 0; i < n; ++i) {  // one period of 100 Hz
    const double time_s = 0.01 * i / n, angle = 2.0 * std::numbers::pi * 100.0 * time_s;
    const double light = flicker_light(flicker, time_s, 0.0);
    sum += light / n;
    fundamental += 2.0 * light * std::sin(angle) / n;
    second += 2.0 * light * std::sin(2.0 * angle) / n;
    third += 2.0 * light * std::sin(3.0 * angle) / n;
  }
  EXPECT_NEAR(sum, 0.5, 1e-12);
  EXPECT_NEAR(fundamental, 0.2, 1e-12);
  EXPECT_NEAR(second, 0.1, 1e-12);
  EXPECT_NEAR(third, 0.05, 1e-12);
  EXPECT_NEAR(mean_flicker(flicker, 0.0, 0.0, 0.01), 0.5, 1e-12);
  // The closed form of the mean against the sum of many moments.
  double mean = 0.0;
  for (int i = 0; i < n; ++i) mean += flicker_light(flicker, 0.0037 * (i + 0.5) / n, 0.2) / n;
  EXPECT_NEAR(mean_flicker(flicker, 0.2, 0.0, 0.0037), mean, 1e-6);
}

TEST(ScenarioPlay, TheSameSeedGivesTheSameFaults) {
  const std::string rough =
      "  - byte_changed: {per_byte: 0.003}\n"
      "  - bytes_split: {per_reply: 0.3}\n"
      "  - reply_late: {per_reply: 0.1, by: 50 ms}\n"
      "  - noise_bytes: {per_reply: 0.1, way: from}\n"
      "  - lid_opened: {per_minute: 20, for: 1 s}\n";
  const auto said = [&](std::uint64_t seed) {
    BenchOptions options = Trial::perfect();
    options.seed = seed;
    Day day(rough, options);
    PhantomEnd phantom(day.trial);
    std::string all;
    for (int i = 0; i < 40; ++i) {
      phantom.send("LID?;:SPEC:READ?\n");
      all += phantom.receive(0.5);
    }
    return all;
  };
  const std::string first = said(4);
  EXPECT_EQ(said(4), first);
  EXPECT_NE(said(5), first);
}

TEST(ScenarioPlay, HandsHearWhatIsWrong) {
  Trial trial;
  EXPECT_EQ(obey(trial.bench, "cause lid_opened: {nest: 2}"),
            trial.bench.cause(*read_scenario_fault("lid_opened: {nest: 2}")).error().text());
  EXPECT_NE(obey(trial.bench, "cause lid_open: {nest: 1}").find("lid_opened"), std::string::npos);
  EXPECT_NE(obey(trial.bench, "cause"), "ok");
  EXPECT_NE(obey(trial.bench, "cause : {"), "ok");
  EXPECT_EQ(obey(trial.bench, "cause lid_opened: {nest: 1, for: 1 s}"), "ok");
  PhantomEnd phantom(trial);
  EXPECT_EQ(phantom.ask("LID?"), "OPEN");
  trial.wait_s(1.5);
  EXPECT_EQ(phantom.ask("LID?"), "CLOS");
}

}  // namespace
}  // namespace probewright::emulated
