// Bytes from outside are arbitrary: every parser must end, keep its bounds and never crash, whatever comes. The
// sanitizers look on. Seeds are fixed, so that a failure comes again.
#include <gtest/gtest.h>

#include <cmath>

#include "drivers/wire/block.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/cobs.h"
#include "drivers/wire/frame.h"
#include "drivers/wire/line_reader.h"
#include "drivers/wire/message.h"
#include "station/base/entropy.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;
using namespace probewright::wire;

const std::vector<std::string> seeds_of_messages{
    "MOD:RATE 5;STAT ON;:LID?",     "*IDN?;*OPC?",
    "SYST:ECHO? \"a;b,\"\"c\"\"\"", "X 'it''s',#15HELLO, on , -1.5e-3 ms,#HfF",
    "-113,\"Undefined header\"",    "SPEC:EXP 20 ms;AVER 8;SHUT CLOS;READ?|1234",
};

/// `text` with a few random changes: bytes changed, lost, doubled, pieces of itself put in.
std::string mangled(std::string text, Entropy& entropy) {
  static constexpr std::string_view spice = "#\"';:,?*|\n\r \t0123456789eE+-.\0\xFF";
  for (auto changes = 1 + entropy.next() % 4; changes > 0 && !text.empty(); --changes) {
    const auto at = entropy.next() % text.size();
    switch (entropy.next() % 5) {
      case 0:
        text[at] = static_cast<char>(entropy.next() & 0xFF);
        break;
      case 1:
        text[at] = spice[entropy.next() % spice.size()];
        break;
      case 2:
        text.erase(at, 1 + entropy.next() % 3);
        break;
      case 3:
        text.insert(at, 1, text[at]);
        break;
      default:
        text.insert(at, text.substr(entropy.next() % text.size(), entropy.next() % 8));
        break;
    }
  }
  return text;
}

void read_everything(const std::string& text) {
  const auto message = parse_message(text);
  if (message.fault) EXPECT_LE(message.fault->at, text.size());
  for (const auto& unit : message.units) {
    EXPECT_FALSE(unit.header.empty());
    header_matches("SYSTem:ERRor[:NEXT]?", unit);
    for (const auto& datum : unit.data) {
      if (datum.kind == Datum::Kind::number) EXPECT_TRUE(std::isfinite(datum.number)) << text;
      if (const auto value = number_in(datum, "S")) EXPECT_FALSE(std::isnan(*value));
    }
  }
  std::size_t length = 0;
  const auto pieces = split_outside(text, ';');
  for (const auto piece : pieces) {
    length += piece.size();
    if (const auto data = parse_data(piece)) EXPECT_FALSE(data->empty());
  }
  EXPECT_EQ(length + pieces.size() - 1, text.size());
  if (const auto block = decode_block(text)) EXPECT_LE(block->length, text.size());
  if (const auto plain = strip_checksum(text)) EXPECT_EQ(strip_checksum(add_checksum(*plain)).value(), *plain);
}

TEST(RandomInput, MessagesNeverCrash) {
  SeededEntropy entropy{11};
  for (int i = 0; i < 20'000; ++i)
    read_everything(mangled(seeds_of_messages[static_cast<std::size_t>(i) % seeds_of_messages.size()], entropy));
  for (int i = 0; i < 5'000; ++i) {
    std::string text(entropy.next() % 64, '\0');
    for (char& c : text) c = static_cast<char>(entropy.next() & 0xFF);
    read_everything(text);
  }
}

TEST(RandomInput, LinesKeepTheirBoundInAnyPieces) {
  SeededEntropy entropy{12};
  for (const auto blocks : {LineReader::Blocks::none, LineReader::Blocks::inside}) {
    LineReader reader{64, blocks};
    std::uint64_t lines = 0;
    for (int i = 0; i < 20'000; ++i) {
      const std::string text = mangled(seeds_of_messages[entropy.next() % seeds_of_messages.size()] + "\n", entropy);
      reader.feed(bytes_of(text));
      while (const auto line = reader.next()) {
        ++lines;
        EXPECT_LE(line->size(), 64u);
      }
    }
    EXPECT_GT(lines, 10'000u);
    reader.feed(Bytes(64, std::byte{'\n'}));  // whatever it believes in, so many LF end it
    while (reader.next()) {
    }
    reader.feed(bytes_of("LID?\n"));
    EXPECT_EQ(reader.next(), "LID?");
  }
}

TEST(RandomInput, DamagedFramesAreDroppedAndTheNextGoodOneIsFound) {
  SeededEntropy entropy{13};
  FrameReader reader;
  std::uint64_t wrong = 0;
  const Frame mark{0x3F, 0xBEEF, Bytes(3, std::byte{0})};
  for (int i = 0; i < 20'000; ++i) {
    Frame frame{static_cast<std::uint8_t>(entropy.next()), static_cast<std::uint16_t>(entropy.next()), {}};
    frame.payload.resize(entropy.next() % 40);
    for (auto& byte : frame.payload) byte = static_cast<std::byte>(entropy.next() % 3);
    const Bytes good = encode_frame(frame);
    reader.feed(bytes_of(mangled(text_of(good), entropy)));
    reader.feed(Bytes{std::byte{0}});
    reader.feed(encode_frame(mark));
    bool found = false;
    while (const auto got = reader.next()) {
      found = *got == mark;
      if (!found && !(*got == frame)) ++wrong;  // equal: the changes undid each other
    }
    EXPECT_TRUE(found) << i;
  }
  // A check of 16 bits lets one in 65536 of heavily damaged frames through: 20000 tries, expected 0.3.
  EXPECT_LE(wrong, 3u);
  EXPECT_GT(reader.damaged(), 15'000u);
}

TEST(RandomInput, CobsNeverCrashesAndNeverGrows) {
  SeededEntropy entropy{14};
  for (int i = 0; i < 20'000; ++i) {
    Bytes bytes(entropy.next() % 600);
    const auto top = 1 + entropy.next() % 256;
    for (auto& byte : bytes) byte = static_cast<std::byte>(entropy.next() % top);
    if (const auto plain = cobs_decode(bytes)) {
      EXPECT_LT(plain->size(), bytes.size());
      EXPECT_EQ(cobs_decode(cobs_encode(*plain)).value(), *plain);
    }
  }
}

}  // namespace
