// Checks against published values: CRC catalogue, COBS paper, IEEE 488.2 block examples.
#include <gtest/gtest.h>

#include <charconv>

#include "drivers/wire/block.h"
#include "drivers/wire/cobs.h"
#include "drivers/wire/crc.h"
#include "station/base/digest.h"
#include "tests/support/reference.h"

namespace {

using namespace probewright;
using namespace probewright::wire;

unsigned long from_hex(std::string_view text) {
  if (text.starts_with("0x")) text.remove_prefix(2);
  unsigned long value = 0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value, 16);
  EXPECT_TRUE(error == std::errc{} && end == text.data() + text.size()) << text;
  return value;
}

/// "11 22..FE 00": bytes in hexadecimal, AA..BB meaning every value from AA up to BB.
Bytes bytes_from(std::string_view text) {
  Bytes bytes;
  while (!text.empty()) {
    const auto word = text.substr(0, text.find(' '));
    text.remove_prefix(std::min(text.size(), word.size() + 1));
    const auto dots = word.find("..");
    const auto first = from_hex(word.substr(0, dots));
    const auto last = dots == std::string_view::npos ? first : from_hex(word.substr(dots + 2));
    for (auto value = first; value <= last; ++value) bytes.push_back(static_cast<std::byte>(value));
  }
  return bytes;
}

// Source: G. Cook, Catalogue of parametrised CRC algorithms.
TEST(Crc, GivesTheCheckValuesOfTheCatalogue) {
  const auto table = reference::load("crc_check_values.csv");
  const auto names = table.texts("name");
  const auto checks = table.texts("check");
  const auto empties = table.texts("crc_of_empty_message");
  int seen = 0;
  for (std::size_t i = 0; i < names.size(); ++i) {
    if (names[i].starts_with("CRC-16/IBM-3740")) {
      EXPECT_EQ(crc16("123456789"), from_hex(checks[i]));
      EXPECT_EQ(crc16(""), from_hex(empties[i]));
      ++seen;
    }
    if (names[i].starts_with("CRC-32/ISO-HDLC")) {
      EXPECT_EQ(crc32("123456789"), from_hex(checks[i]));
      EXPECT_EQ(crc32(""), from_hex(empties[i]));
      ++seen;
    }
  }
  EXPECT_EQ(seen, 2);
}

// The definition, bit by bit (polynomial division), against the tables.
TEST(Crc, AgreesWithTheDefinitionBitByBit) {
  Bytes bytes;
  for (int i = 0; i < 300; ++i) bytes.push_back(static_cast<std::byte>(i * 7 + (i >> 3)));
  unsigned slow16 = 0xFFFF;
  std::uint32_t slow32 = 0xFFFFFFFF;
  for (const std::byte byte : bytes) {
    slow16 ^= std::to_integer<unsigned>(byte) << 8;
    slow32 ^= std::to_integer<std::uint32_t>(byte);
    for (int bit = 0; bit < 8; ++bit) {
      slow16 = ((slow16 & 0x8000) ? slow16 << 1 ^ 0x1021 : slow16 << 1) & 0xFFFF;
      slow32 = (slow32 & 1) ? slow32 >> 1 ^ 0xEDB88320 : slow32 >> 1;
    }
  }
  EXPECT_EQ(crc16(bytes), slow16);
  EXPECT_EQ(crc32(bytes), ~slow32);
}

TEST(Crc, IsTheSameInPieces) {
  const std::string_view text = "123456789";
  for (std::size_t cut = 0; cut <= text.size(); ++cut) {
    EXPECT_EQ(Crc16{}.add(text.substr(0, cut)).add(text.substr(cut)).value(), 0x29B1);
    EXPECT_EQ(Crc32{}.add(text.substr(0, cut)).add(text.substr(cut)).value(), 0xCBF43926);
  }
}

// Source: Cheshire and Baker 1999, the eleven examples.
TEST(Cobs, AgreesWithThePublishedExamples) {
  const auto table = reference::load("cobs_vectors.csv");
  const auto plains = table.texts("unencoded");
  const auto encodeds = table.texts("encoded");
  const auto sizes = table.numbers("encoded_bytes");
  ASSERT_EQ(plains.size(), 11u);
  for (std::size_t i = 0; i < plains.size(); ++i) {
    const Bytes plain = bytes_from(plains[i]), encoded = bytes_from(encodeds[i]);
    EXPECT_EQ(static_cast<double>(encoded.size()), sizes[i]);
    EXPECT_EQ(cobs_encode(plain), encoded) << "example " << i + 1;
    const auto back = cobs_decode(encoded);
    ASSERT_TRUE(back.has_value()) << "example " << i + 1;
    EXPECT_EQ(*back, plain) << "example " << i + 1;
  }
}

// The paper's own encoder writes an empty group after a full run at the end, other encoders do not: both are read.
TEST(Cobs, ReadsBothFormsAtTheEndOfAFullRun) {
  const Bytes plain = bytes_from("01..FE");
  Bytes longer = bytes_from("FF 01..FE 01");
  ASSERT_TRUE(cobs_decode(longer).has_value());
  EXPECT_EQ(*cobs_decode(longer), plain);
  const Bytes shorter = bytes_from("FF 01..FE");
  EXPECT_EQ(*cobs_decode(shorter), plain);
}

TEST(Cobs, ComesBackForEveryLengthAndHasNoZeroAndKeepsTheBound) {
  for (std::size_t size = 0; size < 1100; ++size) {
    for (const unsigned step : {0u, 1u, 85u}) {
      Bytes plain(size);
      for (std::size_t i = 0; i < size; ++i) plain[i] = static_cast<std::byte>(step == 0 ? 1 : i * step);
      const Bytes encoded = cobs_encode(plain);
      EXPECT_EQ(std::count(encoded.begin(), encoded.end(), std::byte{0}), 0);
      EXPECT_LE(encoded.size(), cobs_bound(size));
      const auto back = cobs_decode(encoded);
      ASSERT_TRUE(back.has_value());
      ASSERT_EQ(*back, plain) << size << " bytes, step " << step;
    }
  }
}

TEST(Cobs, RefusesWhatIsMalformed) {
  for (const std::string_view text : {"", "00", "02", "03 11", "02 00", "05 11 22 33", "01 00", "FF 01", "02 11 05"})
    EXPECT_EQ(cobs_decode(bytes_from(text)).error().id, "cobs_malformed") << text;
}

// Source: IEEE 488.2, 7.7.6 and 8.7.9 (examples as kept in facts of the trade: #15HELLO, #3128..., #10).
TEST(Block, AgreesWithTheExamplesOfTheStandard) {
  const std::string_view hello = "HELLO";
  EXPECT_EQ(encode_block(std::as_bytes(std::span{hello})), "#15HELLO");
  EXPECT_EQ(encode_block({}), "#10");
  const Bytes long_one(128, std::byte{'\n'});
  const std::string encoded = encode_block(long_one);
  EXPECT_EQ(encoded.substr(0, 5), "#3128");
  EXPECT_EQ(encoded.size(), 5u + 128u);
  EXPECT_EQ(decode_block(encoded)->bytes, long_one);
  const auto with_rest = decode_block("#15HELLO,7");
  ASSERT_TRUE(with_rest.has_value());
  EXPECT_EQ(with_rest->length, 8u);
  EXPECT_EQ(decode_block("#10;1")->length, 3u);
  EXPECT_EQ(decode_block("#205HELLO")->length, 9u);  // leading zeros in the length are allowed
}

TEST(Block, RefusesWhatIsMalformed) {
  for (const std::string_view text : {"", "#", "x", "15HELLO", "#A", "#2", "#21", "#1x", "#2 5HELLO", "#0HELLO"})
    EXPECT_EQ(decode_block(text).error().id, "block_malformed") << text;
  for (const std::string_view text : {"#15HELL", "#15", "#9999999999HELLO"})
    EXPECT_EQ(decode_block(text).error().id, "block_short") << text;
}

}  // namespace
