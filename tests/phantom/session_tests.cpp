#include <gtest/gtest.h>

#include "drivers/phantom/driver.h"
#include "tests/phantom/phantom_bench.h"
#include "tests/wire/session_text.h"

namespace {

using namespace probewright;
namespace asio = boost::asio;

// WIRE.md shows a session with every byte. This makes the session anew, from the driver and the fake device, and
// compares line by line, so that text and program cannot part.
TEST(PhantomSession, IsTheOneThatWireMdShows) {
  PhantomBench bench;
  std::string text;
  const auto show = [&](const std::string& heading) {
    text += "# " + heading + "\n";
    for (const auto& piece : bench.traffic.pieces)
      text += trial::dump(piece.direction == wire::Direction::out ? '>' : '<', piece.bytes);
    bench.traffic.pieces.clear();
  };
  bench.connect();
  show("connecting: checksums on, a fence, the error queue, who are you, certificate, wavelengths, reset");
  bench.line.run([&] { return bench.phantom().modulate({2, 5.0}); });
  show("set point 2 at 5 Hz, on; each setting read back");
  bench.line.run([&]() -> asio::awaitable<void> { co_await bench.phantom().nest_state(); });
  show("probe and lid");
  bench.line.run([&]() -> asio::awaitable<void> {
    co_await bench.phantom().spectrum({30000, 4, phantom::Shutter::closed});
  });
  show("spectrometer: 30 ms, 4 frames, shutter closed; then a reading");
  int n = 0;
  bench.fake.spoil = [&](const std::string&, std::string line) {
    if (++n == 1) line[1] ^= 0x40;
    return line;
  };
  bench.line.run([&]() -> asio::awaitable<void> { co_await bench.phantom().temperature_degC(); });
  show("a damaged answer: fence, error queue, and the question again");
  const auto refused = bench.problem_of([&] { return bench.phantom().lamp_on(1.5, 100); });
  ASSERT_TRUE(refused);
  show("a level out of range: no answer within 0.5 s, fence, and what the error queue says");
  EXPECT_EQ(session_of(PW_SOURCE_DIR "/drivers/phantom/WIRE.md"), text) << "WIRE.md must show:\n" << text;
}

}  // namespace
