#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>

#include "tests/emulated/trial.h"

// Source of everything here: drivers/adapter/WIRE.md, section by section.
namespace probewright::emulated {
namespace {

using Error = AdapterEnd::Error;

class AdapterWire : public ::testing::Test {
 protected:
  Trial trial;
  AdapterEnd adapter{trial};

  const Truth& seat(const std::string& serial = "AQ20-048-00001", std::string_view model = "AQ-20") {
    EXPECT_TRUE(trial.bench.seat(1, serial, model));
    return trial.bench.truths().at(serial);
  }
  void drive(std::uint32_t red_uA, std::uint32_t infrared_uA) {
    EXPECT_EQ(adapter.ask(0x02, pack().u32(red_uA).u32(infrared_uA).take()),
              pack().u32(red_uA).u32(infrared_uA).take());
  }
  double timed(std::uint8_t type, Bytes payload = {}) {
    const double start_s = trial.now_s();
    adapter.ask(type, std::move(payload));
    return trial.now_s() - start_s;
  }
};

std::string bytes_of(std::string_view hex) {
  std::string bytes;
  for (std::size_t i = 0; i + 1 < hex.size(); i += 2) {
    bytes.push_back(static_cast<char>(std::stoi(std::string(hex.substr(i, 2)), nullptr, 16)));
  }
  return bytes;
}

// --- 1 line and frames

// The bytes were made apart from this program: CRC-16/IBM-3740 and COBS bit by bit in Python.
TEST_F(AdapterWire, SpeaksByteForByte) {
  adapter.send(bytes_of("030901033c6100"));  // presence, sequence 1
  EXPECT_EQ(adapter.receive(0.1), bytes_of("038901010101010103d72d00"));
  seat();
  adapter.send(bytes_of("00030901033c6100"));  // a zero byte may come first
  EXPECT_EQ(adapter.receive(0.1), bytes_of("03890103010101010332f100"));
  adapter.send(bytes_of("03020203204e0103204e0103d80f00"));  // 20 mA each
  EXPECT_EQ(adapter.receive(0.1), bytes_of("03820203204e0103204e0103728600"));
}

TEST_F(AdapterWire, ThrowsDamageAwayInSilence) {
  adapter.send(bytes_of("030901033c6200"));     // wrong check
  adapter.send(bytes_of("0309010000000000"));   // bad COBS, empty frames
  adapter.send(bytes_of("020100"));             // too short
  adapter.send(std::string(5000, 'x') + '\0');  // too long
  EXPECT_EQ(adapter.receive(1.0), "");
  EXPECT_EQ(adapter.ask(0x09).size(), 5u);
}

TEST_F(AdapterWire, TakesFramesInPieces) {
  const std::string frame = bytes_of("030901033c6100");
  for (const char byte : frame) adapter.send({&byte, 1});
  EXPECT_EQ(adapter.receive(0.1).size(), 12u);
}

TEST_F(AdapterWire, NeverSpeaksUnasked) { EXPECT_EQ(adapter.receive(5.0), ""); }

TEST_F(AdapterWire, WorksInOrder) {
  adapter.request(0x07, {}, 7);  // 10 ms
  adapter.request(0x09, {}, 8);
  EXPECT_EQ(adapter.next()->sequence, 7);
  EXPECT_EQ(adapter.next()->sequence, 8);
}

TEST_F(AdapterWire, RefusesUnknownTypesAndLengths) {
  EXPECT_EQ(adapter.error_of(0x3F), (Error{0x3F, 1, 0}));
  EXPECT_EQ(adapter.error_of(0x0C, pack().u8(1).take()), (Error{0x0C, 1, 0}));
  EXPECT_EQ(adapter.error_of(0x01, pack().u8(1).take()), (Error{0x01, 2, 0}));
  EXPECT_EQ(adapter.error_of(0x02, pack().u32(1).take()), (Error{0x02, 2, 8}));
  EXPECT_EQ(adapter.error_of(0x03), (Error{0x03, 2, 4}));
  EXPECT_EQ(adapter.error_of(0x04), (Error{0x04, 2, 5}));
  EXPECT_EQ(adapter.error_of(0x05), (Error{0x05, 2, 3}));
  EXPECT_EQ(adapter.error_of(0x06), (Error{0x06, 2, 5}));
  EXPECT_EQ(adapter.error_of(0x08), (Error{0x08, 2, 2}));
  EXPECT_EQ(adapter.error_of(0x0A), (Error{0x0A, 2, 1}));
  EXPECT_EQ(adapter.error_of(0x10), (Error{0x10, 2, 6}));
  adapter.request(0x80);  // no request: no answer
  adapter.request(0x50);
  EXPECT_EQ(adapter.receive(0.5), "");
}

// --- 2 requests

TEST_F(AdapterWire, Hello) {
  const Bytes reply = adapter.ask(0x01);
  wire::LeReader fields{reply};
  EXPECT_EQ(fields.u8(), 1);
  EXPECT_EQ(fields.u8(), 1);  // emulated
  EXPECT_EQ(fields.u32(), 1000u);
  EXPECT_GE(fields.u32(), 1u);
  for (const char* text :
       {"Alder Quay Sensors", "ADAPTER", "AD-01", "1.0.0-emulated-x1", "ADC-2026-0101", "2027-06-30"}) {
    EXPECT_EQ(fields.short_text(), text);
  }
  EXPECT_TRUE(fields.finished());
}

TEST(AdapterSpeed, IsAnnouncedAndDividesTimes) {
  BenchOptions options = Trial::perfect();
  options.speed = 20.0;
  options.nests = 2;
  options.wrong_certificate = {{2, DeviceKind::adapter}};
  Trial trial(options);
  AdapterEnd adapter(trial, {2, DeviceKind::adapter});
  const Bytes reply = adapter.ask(0x01);
  wire::LeReader fields{reply};
  fields.raw(2);
  EXPECT_EQ(fields.u32(), 20000u);
  fields.u32();
  for (const char* text : {"Alder Quay Sensors", "ADAPTER", "AD-02", "1.0.0-emulated-x20", "ADC-2024-0902"}) {
    EXPECT_EQ(fields.short_text(), text);
  }
  const double start_s = trial.now_s();
  adapter.ask(0x06, pack().u16(5000).u16(1000).u8(0).take());
  EXPECT_NEAR(trial.now_s() - start_s, 0.050, 0.001);
}

TEST_F(AdapterWire, SetDriveHasACeiling) {
  seat();
  drive(20000, 10000);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{20000, 10000}));
  EXPECT_EQ(adapter.error_of(0x02, pack().u32(50001).u32(0).take()), (Error{0x02, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x02, pack().u32(0).u32(50001).take()), (Error{0x02, 3, 1}));
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{20000, 10000}));
  drive(50000, 50000);
  drive(0, 0);
}

TEST_F(AdapterWire, SetTimingOnlyInTheDark) {
  EXPECT_EQ(adapter.ask(0x03, pack().u32(100000).take()), pack().u32(100000).take());
  EXPECT_EQ(adapter.ask(0x03, pack().u32(2000000).take()), pack().u32(2000000).take());
  EXPECT_EQ(adapter.error_of(0x03, pack().u32(99999).take()), (Error{0x03, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x03, pack().u32(2000001).take()), (Error{0x03, 3, 0}));
  seat();
  drive(1, 0);
  EXPECT_EQ(adapter.error_of(0x03, pack().u32(439000).take()), (Error{0x03, 4, 0}));
  drive(0, 0);
  adapter.ask(0x03, pack().u32(439000).take());
  adapter.ask(0x10, pack().u16(1).u32(32).take());
  EXPECT_EQ(adapter.error_of(0x03, pack().u32(439000).take()), (Error{0x03, 4, 0}));
}

struct Forward {
  int led;
  std::uint32_t drive_uA, delivered_nA;
  int voltage_uV, first_uV, flags;
};
Forward forward_of(const Bytes& reply) {
  wire::LeReader fields{reply};
  Forward f{fields.u8(), fields.u32(), fields.u32(), fields.i32(), fields.i32(), fields.u8()};
  EXPECT_TRUE(fields.finished());
  return f;
}

TEST_F(AdapterWire, ForwardVoltageOfTheRunningDrive) {
  const Truth& truth = seat();
  drive(20000, 20000);
  trial.wait_s(1.0);
  adapter.ask(0x0B);  // keeps the watchdog fed
  trial.wait_s(1.9);
  adapter.ask(0x0B);
  trial.wait_s(1.9);
  const double start_s = trial.now_s();
  const Forward red = forward_of(adapter.ask(0x04, pack().u8(1).u32(0).take()));
  EXPECT_NEAR(trial.now_s() - start_s, 0.020, 0.003);
  EXPECT_EQ(red.led, 1);
  EXPECT_EQ(red.drive_uA, 0u);
  EXPECT_NEAR(red.delivered_nA, 20e6, 2000);
  EXPECT_NEAR(1e-6 * red.voltage_uV, truth.red.forward_voltage_V, 2e-4);
  EXPECT_NEAR(1e-3 * (red.first_uV - red.voltage_uV), truth.red.warmup_mV, 0.2);
  EXPECT_EQ(red.flags, 0);
  const Forward infrared = forward_of(adapter.ask(0x04, pack().u8(2).u32(0).take()));
  EXPECT_NEAR(1e-6 * infrared.voltage_uV, truth.infrared.forward_voltage_V, 2e-4);
  const Forward quarter = forward_of(adapter.ask(0x04, pack().u8(1).u32(5000).take()));
  EXPECT_NEAR(quarter.delivered_nA, 5e6, 1000);
  EXPECT_NEAR(1e-3 * (red.voltage_uV - quarter.voltage_uV), truth.red.voltage_rise_mV, 0.3);
  EXPECT_EQ(quarter.first_uV, 0);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{20000, 20000}));  // as it was
  const Forward again = forward_of(adapter.ask(0x04, pack().u8(1).u32(0).take()));
  EXPECT_NEAR(1e-3 * (again.first_uV - again.voltage_uV), truth.red.warmup_mV, 1.5);  // the change is still the first
}

TEST_F(AdapterWire, ForwardVoltageFlagsAndBounds) {
  EXPECT_EQ(forward_of(adapter.ask(0x04, pack().u8(1).u32(0).take())).flags, 2);      // no drive
  const Forward open = forward_of(adapter.ask(0x04, pack().u8(2).u32(5000).take()));  // no probe
  EXPECT_EQ(open.flags, 1);
  EXPECT_EQ(open.delivered_nA, 0u);
  EXPECT_EQ(open.voltage_uV, 5000000);
  EXPECT_EQ(adapter.error_of(0x04, pack().u8(0).u32(0).take()), (Error{0x04, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x04, pack().u8(3).u32(0).take()), (Error{0x04, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x04, pack().u8(1).u32(50001).take()), (Error{0x04, 3, 1}));
}

TEST_F(AdapterWire, ReverseLeakage) {
  const Truth& truth = seat();
  const Bytes reply = adapter.ask(0x05, pack().u8(1).u16(5000).take());
  wire::LeReader fields{reply};
  EXPECT_EQ(fields.u8(), 1);
  EXPECT_EQ(fields.u16(), 5000);
  EXPECT_NEAR(1e-6 * fields.u32(), truth.red.reverse_leakage_uA, 0.002);
  EXPECT_EQ(fields.u8(), 0);
  EXPECT_TRUE(fields.finished());
  EXPECT_NEAR(timed(0x05, pack().u8(2).u16(1000).take()), 0.020, 0.003);
  EXPECT_EQ(adapter.error_of(0x05, pack().u8(3).u16(0).take()), (Error{0x05, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x05, pack().u8(1).u16(5001).take()), (Error{0x05, 3, 1}));
  drive(0, 1000);
  EXPECT_EQ(adapter.error_of(0x05, pack().u8(1).u16(5000).take()), (Error{0x05, 4, 0}));
}

TEST_F(AdapterWire, ReverseLeakageOfAnAntiparallelPair) {
  seat("AQ35-048-00001", "AQ-35");
  EXPECT_EQ(adapter.ask(0x05, pack().u8(1).u16(5000).take()), pack().u8(1).u16(5000).u32(0).u8(1).take());
}

TEST_F(AdapterWire, DarkCurrentConnectedMinusOpen) {
  const Truth& truth = seat();
  const auto measured = [&](int input) {
    const Bytes reply = adapter.ask(0x06, pack().u16(5000).u16(100).u8(static_cast<std::uint8_t>(input)).take());
    wire::LeReader fields{reply};
    EXPECT_EQ(fields.u16(), 5000);
    EXPECT_EQ(fields.u16(), 100);
    EXPECT_EQ(fields.u8(), input);
    const double current_nA = 1e-3 * fields.i32(), sd_nA = 1e-3 * fields.u32();
    EXPECT_TRUE(fields.finished());
    EXPECT_GT(sd_nA, 0.002);
    EXPECT_LT(sd_nA, 0.03);
    return current_nA;
  };
  EXPECT_NEAR(measured(1) - measured(0), truth.dark_current_nA, 0.04);
  EXPECT_NEAR(timed(0x06, pack().u16(0).u16(20).u8(1).take()), 0.020, 0.003);
  EXPECT_EQ(adapter.error_of(0x06, pack().u16(5001).u16(100).u8(1).take()), (Error{0x06, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x06, pack().u16(0).u16(19).u8(1).take()), (Error{0x06, 3, 1}));
  EXPECT_EQ(adapter.error_of(0x06, pack().u16(0).u16(1001).u8(1).take()), (Error{0x06, 3, 1}));
  EXPECT_EQ(adapter.error_of(0x06, pack().u16(0).u16(100).u8(2).take()), (Error{0x06, 3, 2}));
  drive(1000, 0);
  EXPECT_EQ(adapter.error_of(0x06, pack().u16(0).u16(100).u8(1).take()), (Error{0x06, 4, 0}));
  drive(0, 0);
  adapter.ask(0x10, pack().u16(1).u32(32).take());
  EXPECT_EQ(adapter.error_of(0x06, pack().u16(0).u16(100).u8(1).take()), (Error{0x06, 4, 0}));
}

TEST_F(AdapterWire, DarkCurrentFollowsTheRoom) {
  const Truth& truth = seat();
  trial.bench.room(25.0 + truth.probe.photodiode.doubling_K);
  const auto current = [&](std::uint8_t input) {
    const Bytes reply = adapter.ask(0x06, pack().u16(5000).u16(1000).u8(input).take());
    wire::LeReader fields{reply};
    fields.raw(5);
    return 1e-3 * fields.i32();
  };
  EXPECT_NEAR(current(1) - current(0), 2.0 * truth.dark_current_nA, 0.04);
}

TEST_F(AdapterWire, IdResistance) {
  EXPECT_EQ(adapter.ask(0x07), pack().u32(0xFFFFFFFF).take());
  const Truth& truth = seat();
  const Bytes reply = adapter.ask(0x07);
  EXPECT_NEAR(1e-3 * wire::LeReader{reply}.u32(), truth.id_resistance_ohm, 5e-4 * truth.id_resistance_ohm);
  EXPECT_NEAR(timed(0x07), 0.010, 0.002);
}

TEST_F(AdapterWire, MainsPickup) {
  const Truth& truth = seat();
  const Bytes reply = adapter.ask(0x08, pack().u16(100).take());
  wire::LeReader fields{reply};
  EXPECT_EQ(fields.u16(), 100);
  EXPECT_NEAR(1e-3 * fields.u32(), truth.mains_pickup_nA, 0.05);
  EXPECT_EQ(adapter.error_of(0x08, pack().u16(19).take()), (Error{0x08, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x08, pack().u16(1001).take()), (Error{0x08, 3, 0}));
  EXPECT_NEAR(timed(0x08, pack().u16(200).take()), 0.200, 0.003);
  drive(1000, 0);
  EXPECT_EQ(adapter.error_of(0x08, pack().u16(100).take()), (Error{0x08, 4, 0}));
}

TEST_F(AdapterWire, PresenceCountsInsertions) {
  EXPECT_EQ(adapter.ask(0x09), pack().u8(0).u32(0).take());
  seat();
  EXPECT_EQ(adapter.ask(0x09), pack().u8(1).u32(1).take());
  ASSERT_TRUE(trial.bench.remove(1));
  EXPECT_EQ(adapter.ask(0x09), pack().u8(0).u32(1).take());
  ASSERT_TRUE(trial.bench.restart(adapter1));
  EXPECT_EQ(adapter.ask(0x09), pack().u8(0).u32(0).take());
}

TEST_F(AdapterWire, SelfProof) {
  const auto proof = [&](std::uint8_t what) {
    const Bytes reply = adapter.ask(0x0A, pack().u8(what).take());
    wire::LeReader fields{reply};
    EXPECT_EQ(fields.u8(), what);
    const int value = fields.i32();
    EXPECT_EQ(fields.u8(), 0);
    EXPECT_TRUE(fields.finished());
    return value;
  };
  EXPECT_NEAR(proof(1), 10000000, 3000);
  EXPECT_NEAR(proof(2), 20000000, 3000);
  EXPECT_NEAR(proof(3), 2000000, 200);
  EXPECT_EQ(adapter.error_of(0x0A, pack().u8(0).take()), (Error{0x0A, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x0A, pack().u8(4).take()), (Error{0x0A, 3, 0}));
  EXPECT_NEAR(timed(0x0A, pack().u8(1).take()), 0.020, 0.003);
  seat();
  drive(1, 1);
  EXPECT_EQ(adapter.error_of(0x0A, pack().u8(1).take()), (Error{0x0A, 4, 0}));
}

struct State {
  std::uint32_t boot, uptime_ms;
  int trips;
  std::uint32_t red_uA, infrared_uA;
  int capture, temperature_mdegC;
};
State state_of(AdapterEnd& adapter) {
  const Bytes reply = adapter.ask(0x0B);
  wire::LeReader fields{reply};
  State s{fields.u32(), fields.u32(), fields.u16(), fields.u32(), fields.u32(), fields.u16(), fields.i32()};
  EXPECT_TRUE(fields.finished());
  return s;
}

TEST_F(AdapterWire, StateTellsWhatRuns) {
  seat();
  trial.wait_s(3.0);
  drive(20000, 15000);
  adapter.ask(0x10, pack().u16(77).u32(64).take());
  const State state = state_of(adapter);
  EXPECT_NEAR(state.uptime_ms, 3000, 5);
  EXPECT_EQ(state.trips, 0);
  EXPECT_EQ(state.red_uA, 20000u);
  EXPECT_EQ(state.infrared_uA, 15000u);
  EXPECT_EQ(state.capture, 77);
  EXPECT_GT(state.temperature_mdegC, 20000);
  const std::uint32_t boot = state.boot;
  ASSERT_TRUE(trial.bench.restart(adapter1));
  adapter.receive(0.2);
  const State after = state_of(adapter);
  EXPECT_NE(after.boot, boot);
  EXPECT_EQ(after.red_uA, 0u);
  EXPECT_EQ(after.capture, 0);
  EXPECT_LT(after.uptime_ms, 300u);
}

// --- 3 captures

struct Received {
  std::vector<std::array<int, 4>> cycles;
  bool whole = false;
};

/// Takes a capture apart as section 3 says.
Received receive_capture(AdapterEnd& adapter, int number, std::uint32_t cycles) {
  Received received;
  wire::Crc32 check;
  for (std::uint32_t block = 0;; ++block) {
    const auto frame = adapter.next(3.0);
    if (!frame) return received;
    EXPECT_EQ(frame->sequence, block);
    wire::LeReader fields{frame->payload};
    EXPECT_EQ(fields.u16(), number);
    if (frame->type == 0x51) {
      EXPECT_EQ(fields.u32(), cycles);
      EXPECT_EQ(fields.u32(), check.value());
      EXPECT_TRUE(fields.finished());
      received.whole = true;
      return received;
    }
    EXPECT_EQ(frame->type, 0x50);
    EXPECT_EQ(frame->payload.size(), 390u);
    EXPECT_EQ(fields.u32(), block);
    check.add(std::span{frame->payload}.subspan(6));
    for (int i = 0; i < 32; ++i) received.cycles.push_back({fields.i24(), fields.i24(), fields.i24(), fields.i24()});
  }
}

TEST_F(AdapterWire, CaptureStreamsBlockByBlock) {
  const Truth& truth = seat();
  drive(20000, 20000);
  for (int i = 0; i < 3; ++i) {
    trial.wait_s(1.5);
    adapter.ask(0x0B);
  }
  const double start_s = trial.now_s();
  EXPECT_EQ(adapter.ask(0x10, pack().u16(9).u32(352).take()), pack().u16(9).u32(352).take());
  const Received capture = receive_capture(adapter, 9, 352);
  const double block_line_s = 400 * 10.0 / 921600;
  EXPECT_NEAR(trial.now_s() - start_s, 352 * 4 * 439e-6 + block_line_s, 0.005);
  ASSERT_TRUE(capture.whole);
  ASSERT_EQ(capture.cycles.size(), 352u);
  double red = 0.0, infrared = 0.0, noise = 0.0;
  for (const auto& cycle : capture.cycles) {
    red += (cycle[0] - 0.5 * (cycle[1] + cycle[3])) / 352.0 * 10000.0 / 8388608.0;
    infrared += (cycle[2] - 0.5 * (cycle[1] + cycle[3])) / 352.0 * 10000.0 / 8388608.0;
    noise += std::pow((cycle[1] - cycle[3]) * 10000.0 / 8388608.0, 2) / (2.0 * 352.0);
  }
  EXPECT_NEAR(red, 20.0 * truth.red.transfer_nA_per_mA, 0.02 * red);
  EXPECT_NEAR(infrared, 20.0 * truth.infrared.transfer_nA_per_mA, 0.02 * infrared);
  EXPECT_NEAR(std::sqrt(noise), 0.09, 0.08);  // the mains and what the amplifier keeps of the light are in it
  EXPECT_EQ(state_of(adapter).capture, 0);
}

TEST_F(AdapterWire, CaptureRunsBesideRequests) {
  seat();
  adapter.ask(0x10, pack().u16(3).u32(64).take());
  adapter.request(0x07, {}, 900);
  const auto reply = adapter.next(0.03);
  ASSERT_TRUE(reply);
  EXPECT_EQ(reply->sequence, 900);
  EXPECT_EQ(adapter.error_of(0x10, pack().u16(4).u32(64).take()), (Error{0x10, 4, 0}));
  EXPECT_TRUE(receive_capture(adapter, 3, 64).whole);
}

TEST_F(AdapterWire, CaptureBounds) {
  EXPECT_EQ(adapter.error_of(0x10, pack().u16(0).u32(32).take()), (Error{0x10, 3, 0}));
  EXPECT_EQ(adapter.error_of(0x10, pack().u16(1).u32(0).take()), (Error{0x10, 3, 1}));
  EXPECT_EQ(adapter.error_of(0x10, pack().u16(1).u32(33).take()), (Error{0x10, 3, 1}));
  EXPECT_EQ(adapter.error_of(0x10, pack().u16(1).u32(65568).take()), (Error{0x10, 3, 1}));
  adapter.ask(0x10, pack().u16(65535).u32(32).take());
  EXPECT_TRUE(receive_capture(adapter, 65535, 32).whole);
}

TEST_F(AdapterWire, StoppedCaptureHasNoEnd) {
  EXPECT_EQ(adapter.ask(0x11), pack().u16(0).u32(0).take());
  adapter.ask(0x10, pack().u16(5).u32(640).take());
  trial.wait_s(0.07);  // one block of 56 ms
  adapter.request(0x11, {}, 500);
  const auto block = adapter.next();
  ASSERT_TRUE(block);
  EXPECT_EQ(block->type, 0x50);
  const auto reply = adapter.next();
  ASSERT_TRUE(reply);
  EXPECT_EQ(reply->type, 0x91);
  EXPECT_EQ(reply->payload, pack().u16(5).u32(640).take());
  EXPECT_EQ(adapter.receive(2.0), "");
  adapter.ask(0x10, pack().u16(6).u32(32).take());
  EXPECT_TRUE(receive_capture(adapter, 6, 32).whole);
}

TEST_F(AdapterWire, SlotTimingSetsTheCycle) {
  adapter.ask(0x03, pack().u32(1000000).take());
  const double start_s = trial.now_s();
  adapter.ask(0x10, pack().u16(1).u32(32).take());
  EXPECT_TRUE(receive_capture(adapter, 1, 32).whole);
  EXPECT_NEAR(trial.now_s() - start_s, 0.128 + 0.005, 0.004);
}

/// AC over DC of a band at 5 Hz by plain least squares with offset, slope, sine and cosine (normal equations).
double modulation_of(const std::vector<double>& values, double per_second, double rate_Hz) {
  constexpr int terms = 4;
  double matrix[terms][terms + 1] = {};
  const double middle = 0.5 * static_cast<double>(values.size());
  for (std::size_t i = 0; i < values.size(); ++i) {
    const double angle = 2.0 * M_PI * rate_Hz * static_cast<double>(i) / per_second;
    const double basis[terms] = {1.0, (static_cast<double>(i) - middle) / middle, std::sin(angle), std::cos(angle)};
    for (int r = 0; r < terms; ++r) {
      for (int c = 0; c < terms; ++c) matrix[r][c] += basis[r] * basis[c];
      matrix[r][terms] += basis[r] * values[i];
    }
  }
  for (int pivot = 0; pivot < terms; ++pivot) {
    for (int r = 0; r < terms; ++r) {
      if (r == pivot) continue;
      const double factor = matrix[r][pivot] / matrix[pivot][pivot];
      for (int c = pivot; c <= terms; ++c) matrix[r][c] -= factor * matrix[pivot][c];
    }
  }
  const auto solution = [&](int r) { return matrix[r][terms] / matrix[r][r]; };
  return std::hypot(solution(2), solution(3)) / solution(0);
}

// The whole chain against the truth: modulator, probe, amplifier, converter, stream. A long capture, plain fit.
TEST_F(AdapterWire, RatiosInTheSamplesAreThoseOfTheTruth) {
  const Truth& truth = seat();
  PhantomEnd phantom(trial);
  drive(20000, 20000);
  for (int i = 0; i < 3; ++i) {  // the plain fit knows a slope, no warming
    trial.wait_s(1.5);
    adapter.ask(0x0B);
  }
  for (int set_point = 1; set_point <= 3; ++set_point) {
    phantom.ask("MOD:RATE 5;STAT ON;SETP " + std::to_string(set_point) + ";*OPC?");
    constexpr std::uint32_t cycles = 5696;  // 10 s
    adapter.ask(0x10, pack().u16(static_cast<std::uint16_t>(set_point)).u32(cycles).take());
    const Received capture = receive_capture(adapter, set_point, cycles);
    ASSERT_TRUE(capture.whole);
    std::vector<double> red, infrared;
    for (std::size_t i = 1; i < capture.cycles.size(); ++i) {
      const auto &before = capture.cycles[i - 1], &cycle = capture.cycles[i];
      red.push_back(cycle[0] - 0.5 * (before[3] + cycle[1]));
      infrared.push_back(cycle[2] - 0.5 * (cycle[1] + cycle[3]));
    }
    const double per_second = 1.0 / (4 * 439e-6);
    const double ratio = modulation_of(red, per_second, 5.0) / modulation_of(infrared, per_second, 5.0);
    const RatioTruth& expected = truth.ratios[static_cast<std::size_t>(set_point - 1)];
    std::printf("[  figures ] R at %.1f: %.5f, truth %.5f (%+.3f %%)\n", expected.nominal, ratio, expected.ratio,
                100.0 * (ratio / expected.ratio - 1.0));
    EXPECT_NEAR(ratio / expected.ratio, 1.0, 0.0012);
  }
}

// --- 4 watchdog

TEST_F(AdapterWire, WatchdogDarkensAfterTwoSilentSeconds) {
  seat();
  drive(20000, 20000);
  trial.wait_s(1.99);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{20000, 20000}));
  adapter.request(0x80);  // any valid frame feeds it
  adapter.receive(0.0);
  trial.wait_s(1.99);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{20000, 20000}));
  trial.wait_s(0.02);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{0, 0}));
  const State state = state_of(adapter);
  EXPECT_EQ(state.trips, 1);
  EXPECT_EQ(state.red_uA, 0u);
}

TEST_F(AdapterWire, DamagedFramesDoNotFeedTheWatchdog) {
  seat();
  drive(20000, 0);
  for (int i = 0; i < 5; ++i) {
    trial.wait_s(0.5);
    adapter.send(bytes_of("030901033c6200"));
  }
  EXPECT_EQ(state_of(adapter).trips, 1);
}

TEST_F(AdapterWire, RunningCaptureFeedsTheWatchdog) {
  seat();
  drive(20000, 20000);
  adapter.ask(0x10, pack().u16(1).u32(2848).take());  // 5 s
  trial.wait_s(5.0 + 1.9);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{20000, 20000}));
  trial.wait_s(0.2);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{0, 0}));
}

TEST_F(AdapterWire, WatchdogActsWithThePulledCable) {
  seat();
  drive(20000, 20000);
  ASSERT_TRUE(trial.bench.pull(adapter1));
  trial.wait_s(2.1);
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{0, 0}));
}

TEST_F(AdapterWire, PhantomSeesThatTheWatchdogDarkened) {
  seat();
  PhantomEnd phantom(trial);
  drive(20000, 20000);
  trial.wait_s(2.5);
  const std::string answer = phantom.ask("SPEC:READ?");
  std::size_t bright = 0;
  for (std::size_t i = 6 + 16; i + 1 < 6 + 2064; i += 2) {
    const int counts = static_cast<unsigned char>(answer[i]) + 256 * static_cast<unsigned char>(answer[i + 1]);
    if (counts > 2000) ++bright;
  }
  EXPECT_EQ(bright, 0u);
}

TEST_F(AdapterWire, PullingTheProbeDarkensAtOnce) {
  seat();
  drive(20000, 20000);
  ASSERT_TRUE(trial.bench.remove(1));
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{0, 0}));
  EXPECT_EQ(state_of(adapter).trips, 0);
  seat("AQ20-048-00002");
  EXPECT_EQ(trial.bench.drive(1), (AdapterDevice::Drive{0, 0}));
}

TEST_F(AdapterWire, SurvivesRandomBytes) {
  Deviates deviates(8);
  for (int i = 0; i < 300; ++i) {
    std::string bytes;
    for (int k = 0; k < 60; ++k) bytes.push_back(static_cast<char>(deviates.bits() & 0xFF));
    adapter.send(bytes + '\0');
  }
  EXPECT_EQ(adapter.receive(0.5), "");
  EXPECT_EQ(adapter.ask(0x09).size(), 5u);
}

TEST_F(AdapterWire, EveryRequestWithRandomPayloadIsAnswered) {
  Deviates deviates(9);
  seat();
  for (int i = 0; i < 400; ++i) {
    Bytes payload(deviates.bits() % 12);
    for (std::byte& byte : payload) byte = static_cast<std::byte>(deviates.bits() & 0xFF);
    const auto type = static_cast<std::uint8_t>(1 + deviates.bits() % 0x3F);
    adapter.request(type, payload);
    std::optional<wire::Frame> reply;
    do {
      reply = adapter.next(3.0);
    } while (reply && reply->type >= 0x50 && reply->type < 0x60);
    ASSERT_TRUE(reply) << int{type};
    EXPECT_EQ(reply->sequence, adapter.sequence());
    EXPECT_TRUE(reply->type == (type | 0x80) || reply->type == 0xFF);
  }
}

}  // namespace
}  // namespace probewright::emulated
