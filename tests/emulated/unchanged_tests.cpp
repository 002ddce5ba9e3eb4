#include <cstdio>

#include "tests/emulated/trial.h"

// A change in the physics must leave healthy probes as they were, to the last byte: studies and recordings rest on it.
namespace probewright::emulated {
namespace {

/// Everything that both devices say of a probe, by every request that looks at it.
std::string all_said(const BenchOptions& options, const char* serial, const char* model) {
  Trial trial(options);
  EXPECT_TRUE(trial.bench.seat(1, serial, model));
  PhantomEnd phantom(trial);
  AdapterEnd adapter(trial);
  std::string all;
  const auto ask = [&](std::uint8_t type, Bytes payload = {}) {
    for (const std::byte byte : adapter.ask(type, std::move(payload))) all.push_back(static_cast<char>(byte));
  };
  for (std::uint8_t led = 1; led <= 2; ++led) ask(0x05, pack().u8(led).u16(5000).take());
  ask(0x06, pack().u16(5000).u16(100).u8(1).take());
  ask(0x06, pack().u16(5000).u16(100).u8(0).take());
  ask(0x07);
  ask(0x08, pack().u16(100).take());
  all += phantom.ask("LAMP:LEV 1;FLIC 100;STAT ON;STAT?");
  ask(0x06, pack().u16(5000).u16(100).u8(1).take());
  all += phantom.ask("LAMP:STAT OFF;STAT?");
  const std::uint32_t drive_uA = std::string_view(model) == "AQ-35" ? 10000 : 20000;
  ask(0x02, pack().u32(drive_uA).u32(drive_uA).take());
  for (std::uint8_t led = 1; led <= 2; ++led) ask(0x04, pack().u8(led).u32(0).take());
  for (std::uint8_t led = 1; led <= 2; ++led) ask(0x04, pack().u8(led).u32(drive_uA / 4).take());
  all += phantom.ask("SPEC:EXP 20 ms;AVER 4;READ?");
  for (std::uint16_t point = 1; point <= 3; ++point) {
    all += phantom.ask("MOD:RATE 5;STAT ON;SETP " + std::to_string(point) + ";*OPC?");
    ask(0x10, pack().u16(point).u32(352).take());
    while (const auto frame = adapter.next(1.0)) {
      for (const std::byte byte : frame->payload) all.push_back(static_cast<char>(byte));
      if (frame->type == 0x51) break;
    }
  }
  all += phantom.ask("MOD:STAT OFF;:PATH:OPAQ ON;*OPC?");
  ask(0x10, pack().u16(9).u32(64).take());
  while (const auto frame = adapter.next(1.0)) {
    for (const std::byte byte : frame->payload) all.push_back(static_cast<char>(byte));
    if (frame->type == 0x51) break;
  }
  return all;
}

struct Known {
  bool perfect;
  const char *serial, *model;
  std::size_t bytes;
  std::uint32_t crc;
};

// Source: this bench as it was when a probe could have no fault yet.
TEST(Unchanged, HealthyProbesSayWhatTheyAlwaysSaid) {
  for (const Known& known : {Known{true, "AQ20-048-00001", "AQ-20", 15939, 0xFBC41D3D},
                             Known{false, "AQ20-048-00002", "AQ-20", 15939, 0x77D4683B},
                             Known{true, "AQ35-048-00001", "AQ-35", 15939, 0x6EE3A2B5},
                             Known{false, "AQ35-048-00002", "AQ-35", 15939, 0x8DB816AD}}) {
    BenchOptions options = Trial::perfect();
    options.perfect = known.perfect;
    options.ambient_degC = known.perfect ? 25.0 : 27.5;
    const std::string all = all_said(options, known.serial, known.model);
    const std::uint32_t crc = wire::crc32(std::as_bytes(std::span{all}));
    std::printf("[  figures ] %s: %zu bytes, CRC-32 %08X\n", known.serial, all.size(), crc);
    EXPECT_EQ(all.size(), known.bytes) << known.serial;
    EXPECT_EQ(crc, known.crc) << known.serial;
  }
}

}  // namespace
}  // namespace probewright::emulated
