#include <gtest/gtest.h>

#include "drivers/adapter/driver.h"
#include "drivers/adapter/payloads.h"
#include "tests/adapter/adapter_bench.h"
#include "tests/wire/session_text.h"

namespace {

using namespace probewright;
namespace asio = boost::asio;

std::string hex(std::span<const std::byte> bytes) {
  constexpr std::string_view digits = "0123456789ABCDEF";
  std::string text;
  for (const std::byte byte : bytes) {
    const auto value = std::to_integer<unsigned>(byte);
    text += text.empty() ? "" : " ";
    text += digits[value >> 4];
    text += digits[value & 15u];
  }
  return text;
}

/// The frame in words: its name, and its bytes before COBS.
std::string in_words(const wire::Frame& frame) {
  std::string name;
  if (frame.type == adapter::type::block)
    name = "block";
  else if (frame.type == adapter::type::end)
    name = "end";
  else if (frame.type == adapter::type::error)
    name = "error reply";
  else if (frame.type >= 0x80)
    name = "reply to " + std::string{adapter::name_of(static_cast<std::uint8_t>(frame.type - 0x80))};
  else
    name = adapter::name_of(frame.type);
  const wire::LeWriter head = wire::LeWriter{}.u16(frame.sequence);
  std::string payload = frame.payload.empty()
                            ? "none"
                            : hex(std::span{frame.payload}.first(std::min<std::size_t>(frame.payload.size(), 18)));
  if (frame.payload.size() > 18) payload += " ... (" + std::to_string(frame.payload.size()) + " bytes)";
  const std::byte type{frame.type};
  return "# " + name + ": type " + hex({&type, 1}) + ", sequence " + hex(head.bytes()) + ", payload " + payload + "\n";
}

// WIRE.md shows a session with every byte. This makes the session anew, from the driver and the fake device, and
// compares line by line, so that text and program cannot part.
TEST(AdapterSession, IsTheOneThatWireMdShows) {
  AdapterBench bench;
  bench.connect();
  int blocks = 0;
  bench.fake.spoil = [&](const wire::Frame& frame, Bytes bytes) {
    if (frame.type == 0x50 && ++blocks == 1) bytes[200] ^= std::byte{0x10};
    return bytes;
  };
  const auto refused = bench.problem_of([&] { return bench.adapter().set_timing(50000); });
  bench.line.run([&]() -> asio::awaitable<void> {
    co_await bench.adapter().drive({20000, 20000});
    co_await bench.adapter().forward_voltage(adapter::Led::red);
    co_await bench.adapter().capture(32);
    co_await bench.adapter().drive_off();
  });
  ASSERT_TRUE(refused);
  EXPECT_EQ(refused->id, "device_refused");
  std::string text;
  for (const auto& piece : bench.traffic.pieces) {
    // A piece of one direction may hold several frames; each stands with its delimiter.
    auto rest = std::span{piece.bytes};
    while (!rest.empty()) {
      const auto zero = std::find(rest.begin() + (rest[0] == std::byte{0} ? 1 : 0), rest.end(), std::byte{0});
      ASSERT_NE(zero, rest.end());
      const auto bytes = rest.first(static_cast<std::size_t>(zero - rest.begin()) + 1);
      const auto encoded = bytes[0] == std::byte{0} ? bytes.subspan(1) : bytes;
      const auto frame = wire::decode_frame(encoded.first(encoded.size() - 1));
      text += frame ? in_words(*frame) : "# a block damaged on the line\n";
      text += trial::dump(piece.direction == wire::Direction::out ? '>' : '<', bytes);
      rest = rest.subspan(bytes.size());
    }
  }
  EXPECT_EQ(session_of(PW_SOURCE_DIR "/drivers/adapter/WIRE.md"), text) << "WIRE.md must show:\n" << text;
}

}  // namespace
