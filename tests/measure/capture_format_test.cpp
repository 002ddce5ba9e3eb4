#include "station/measure/capture_format.h"

#include <gtest/gtest.h>

#include <bit>
#include <limits>

#include "synthetic.h"

using namespace synthetic;

namespace {

ElectricalCapture full_electrical() {
  ElectricalCapture c;
  c.present_phantom = true, c.present_adapter = false;
  c.id_resistance_ohm = 13712.5, c.mains_pickup_nA = 0.21, c.temperature_C = 23.75;
  c.led.red = {ForwardVoltage{20.0, 19.98, 1.951, false}, ForwardVoltage{5.0, 5.01, 1.862, false}, 1.959, 1.951, 0.02};
  c.led.infrared = {ForwardVoltage{20.0, 0.0, 3.3, true}, ForwardVoltage{5.0, 0.0, 3.3, true}, std::nullopt,
                    std::nullopt, std::nullopt};
  return c;
}

PulseCapture some_pulses() {
  PulseCapture c = pulse_capture({}, 10000.0 / 8388608.0, 0.4);
  c.first_cycle = 7;
  c.red[0] = -8388608, c.dark_a[0] = 8388607, c.infrared[0] = -1;
  return c;
}

std::vector<AnyCapture> one_of_each() {
  SpectrumCapture red = spectrum_capture(nominal_red, Band::red, 0.5, 4, 3), infrared = red;
  red.pixel_was_full = true;
  infrared.band = Band::infrared;
  ElectricalCapture little;
  little.id_open = true;
  const PulseSignal signal;
  return {full_electrical(),
          little,
          DarkCapture{0.9, 0.1, 0.003, 0.002, 5.0, 0.1, 24.5},
          red,
          infrared,
          some_pulses(),
          RedAloneCapture{red},
          closed_path_capture(signal, 0.01, 10000.0 / 8388608.0),
          ambient_capture(60.0, 0.5, 100.0, 0.3, 0.1, 10000.0 / 8388608.0),
          alone_slots_capture(signal, Band::infrared, 10000.0 / 8388608.0)};
}

std::vector<std::byte> with_byte(Bytes bytes, std::size_t at, unsigned value) {
  bytes[at] = static_cast<std::byte>(value);
  return bytes;
}

std::string problem_of(std::span<const std::byte> bytes) {
  const auto capture = decode(bytes, "here");
  return capture ? "read" : capture.error().id;
}

}  // namespace

TEST(CaptureFormat, EveryKindComesBackAsItWas) {
  for (const AnyCapture& capture : one_of_each()) {
    const Bytes bytes = encode(capture);
    const auto back = decode(bytes);
    ASSERT_TRUE(back) << back.error().text();
    EXPECT_TRUE(*back == capture) << capture_kind(capture);
    EXPECT_EQ(encode(*back), bytes);
  }
}

TEST(CaptureFormat, KindsAreNamed) {
  const auto all = one_of_each();
  EXPECT_EQ(capture_kind(all[0]), "electrical");
  EXPECT_EQ(capture_kind(all[2]), "dark");
  EXPECT_EQ(capture_kind(all[3]), "red_spectrum");
  EXPECT_EQ(capture_kind(all[4]), "infrared_spectrum");
  EXPECT_EQ(capture_kind(all[5]), "pulses_0p4");
  EXPECT_EQ(capture_kind(all[6]), "red_alone_spectrum");
  EXPECT_EQ(capture_kind(all[7]), "closed_path");
  EXPECT_EQ(capture_kind(all[8]), "ambient");
  EXPECT_EQ(capture_kind(all[9]), "infrared_alone_slots");
  ElectricalCapture driven;
  driven.led.red.at_drive = ForwardVoltage{20.0, 20.0, 1.95, false};
  EXPECT_EQ(capture_kind(driven), "electrical_driven");
}

// Written out by hand from CAPTURES.md: a stranger's reader must find these bytes.
TEST(CaptureFormat, DarkCaptureByteForByte) {
  const Bytes bytes = encode(DarkCapture{1.0, -2.0, 0.0, 0.0, 5.0, 0.1, 25.0});
  ASSERT_EQ(bytes.size(), 60u);
  const std::array<unsigned, 20> front{0x50, 0x43, 2, 1, 0, 0, 0, 0, 0, 0, 0xF0, 0x3F, 0, 0, 0, 0, 0, 0, 0x00, 0xC0};
  for (std::size_t i = 0; i < front.size(); ++i) EXPECT_EQ(std::to_integer<unsigned>(bytes[i]), front[i]) << i;
}

TEST(CaptureFormat, PulseCodesAreSigned24Bit) {
  PulseCapture c;
  c.set_point_ratio = 1.0, c.modulator_Hz = 5.0, c.cycle_s = 0.001756;
  c.red = {-2}, c.dark_a = {1}, c.infrared = {0x123456}, c.dark_b = {-8388608};
  const Bytes bytes = encode(c);
  ASSERT_EQ(bytes.size(), 4u + 6 * 8 + 8 + 12);
  const std::array<unsigned, 12> codes{0xFE, 0xFF, 0xFF, 1, 0, 0, 0x56, 0x34, 0x12, 0, 0, 0x80};
  for (std::size_t i = 0; i < codes.size(); ++i) EXPECT_EQ(std::to_integer<unsigned>(bytes[60 + i]), codes[i]) << i;
}

// The kinds by their number, and the sizes that CAPTURES.md gives.
TEST(CaptureFormat, LaterKindsByteForByte) {
  const auto all = one_of_each();
  const auto kind = [&](std::size_t i) { return std::to_integer<unsigned>(encode(all[i])[2]); };
  EXPECT_EQ(kind(3), 3u);
  EXPECT_EQ(kind(6), 5u);
  EXPECT_EQ(kind(7), 6u);
  EXPECT_EQ(kind(8), 7u);
  EXPECT_EQ(kind(9), 8u);
  EXPECT_EQ(encode(all[9]).size(), 4u + 1 + 4 * 8 + 8 + 64 * 12);
  EXPECT_EQ(problem_of(with_byte(encode(all[9]), 4, 2)), "capture_malformed");  // a third band
  Bytes spectrum = encode(all[3]), alone = encode(all[6]);                      // the same spectrum
  EXPECT_EQ(std::vector(alone.begin() + 4, alone.end()), std::vector(spectrum.begin() + 4, spectrum.end()));
  EXPECT_EQ(encode(all[7]).size(), 4u + 4 * 8 + 8 + 64 * 12);
  EXPECT_EQ(encode(all[8]).size(), 4u + 4 * 8 + 8 + 64 * 12);
  AmbientCapture ambient{0.5, 100.0, 0.001756, {-2}, {1}, {0x123456}, {-8388608}, 25.0};
  const Bytes bytes = encode(ambient);
  const std::array<unsigned, 20> back{1, 0, 0, 0, 1, 0, 0, 0, 0xFE, 0xFF, 0xFF, 1, 0, 0, 0x56, 0x34, 0x12, 0, 0, 0x80};
  ASSERT_EQ(bytes.size(), 36u + back.size());
  for (std::size_t i = 0; i < back.size(); ++i) EXPECT_EQ(std::to_integer<unsigned>(bytes[36 + i]), back[i]) << i;
  EXPECT_EQ(problem_of(with_byte(alone, 4, 1)), "capture_malformed");  // the infrared band cannot be red alone
}

TEST(CaptureFormat, EveryShorteningAndLengtheningIsRefused) {
  for (const AnyCapture& capture : one_of_each()) {
    const Bytes bytes = encode(capture);
    for (std::size_t n = 0; n < bytes.size(); ++n)
      ASSERT_EQ(problem_of(std::span{bytes}.first(n)), "capture_malformed") << capture_kind(capture) << " cut to " << n;
    Bytes longer = bytes;
    longer.push_back(std::byte{0});
    EXPECT_EQ(problem_of(longer), "capture_malformed");
  }
}

// Whatever one byte becomes: refused, or read as some capture that encodes to just these bytes again.
TEST(CaptureFormat, EveryChangedByteIsRefusedOrMeansWhatItSays) {
  for (const AnyCapture& capture : {one_of_each()[0], one_of_each()[1], one_of_each()[2]}) {
    const Bytes bytes = encode(capture);
    for (std::size_t at = 0; at < bytes.size(); ++at)
      for (unsigned value = 0; value < 256; ++value) {
        const Bytes changed = with_byte(bytes, at, value);
        if (const auto back = decode(changed)) ASSERT_EQ(encode(*back), changed) << at << " " << value;
      }
  }
}

TEST(CaptureFormat, NonsenseIsRefused) {
  const Bytes dark = encode(one_of_each()[2]), pulses = encode(one_of_each()[5]), spectrum = encode(one_of_each()[3]);
  EXPECT_EQ(problem_of({}), "capture_malformed");
  EXPECT_EQ(problem_of(with_byte(dark, 0, 0x51)), "capture_malformed");  // no mark
  EXPECT_EQ(problem_of(with_byte(dark, 2, 0)), "capture_malformed");     // unknown kind
  EXPECT_EQ(problem_of(with_byte(dark, 2, 10)), "capture_malformed");
  EXPECT_EQ(problem_of(with_byte(dark, 3, 2)), "capture_malformed");                           // a later version
  EXPECT_EQ(problem_of(with_byte(with_byte(dark, 11, 0x7F), 10, 0xF0)), "capture_malformed");  // infinite
  EXPECT_EQ(problem_of(with_byte(pulses, 59, 0xFF)), "capture_malformed");  // a count of 4 thousand million cycles
  EXPECT_EQ(problem_of(with_byte(spectrum, 4, 2)), "capture_malformed");    // a third band
  EXPECT_EQ(problem_of(with_byte(with_byte(spectrum, 6, 0), 7, 0)), "capture_malformed");  // no frames
  const auto problem = decode(with_byte(dark, 3, 2), "run 12, dark").error();
  EXPECT_EQ(problem.where, "run 12, dark");
  EXPECT_NE(problem.what().find("byte 4"), std::string::npos) << problem.what();
}

TEST(CaptureFormat, OurOwnMistakesThrow) {
  PulseCapture uneven = some_pulses();
  uneven.red.pop_back();
  EXPECT_THROW(encode(uneven), std::invalid_argument);
  PulseCapture wide = some_pulses();
  wide.red[1] = 1 << 23;
  EXPECT_THROW(encode(wide), std::invalid_argument);
  RedAloneCapture alone{spectrum_capture(nominal_infrared, Band::infrared, 0.5, 4, 3)};
  EXPECT_THROW(encode(alone), std::invalid_argument);
  AmbientCapture unlit = ambient_capture(60.0, 0.5, 100.0, 0.3, 0.1, 1e-3);
  unlit.lamp_level = 0.0;
  EXPECT_THROW(encode(unlit), std::invalid_argument);
  DarkCapture dark;
  dark.open_nA = std::numeric_limits<double>::quiet_NaN();
  EXPECT_THROW(encode(dark), std::invalid_argument);
}

TEST(Captures, GatherAndTellTwice) {
  const Captures whole = healthy(25.0, 5);
  Captures gathered;
  for (const AnyCapture& capture : all_captures(whole)) EXPECT_TRUE(add_capture(gathered, capture));
  EXPECT_EQ(all_captures(gathered), all_captures(whole));
  for (const AnyCapture& capture : all_captures(whole)) {
    const auto again = add_capture(gathered, capture);
    ASSERT_FALSE(again);
    EXPECT_EQ(again.error().id, "capture_twice");
  }
  EXPECT_EQ(all_captures(gathered), all_captures(whole));
}

// What is asked of a probe before its LEDs are warm, and what after.
TEST(Captures, ElectricalCapturesAddUp) {
  const ElectricalCapture whole = full_electrical();
  ElectricalCapture before = whole, after;
  for (const Band band : {Band::red, Band::infrared}) {
    after.led.of(band).at_drive = std::exchange(before.led.of(band).at_drive, std::nullopt);
    after.led.of(band).at_quarter = std::exchange(before.led.of(band).at_quarter, std::nullopt);
  }
  after.temperature_C = whole.temperature_C;
  Captures captures;
  ASSERT_TRUE(add_capture(captures, before));
  ASSERT_TRUE(add_capture(captures, after));
  EXPECT_EQ(*captures.electrical, whole);
  EXPECT_EQ(add_capture(captures, after).error().id, "capture_twice");
  EXPECT_EQ(*captures.electrical, whole);
}
