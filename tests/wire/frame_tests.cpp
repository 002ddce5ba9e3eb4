#include "drivers/wire/frame.h"

#include <gtest/gtest.h>

#include "drivers/wire/cobs.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/le.h"
#include "station/base/entropy.h"

namespace {

using namespace probewright;
using namespace probewright::wire;

Bytes some_bytes(std::size_t size, std::uint64_t seed) {
  SeededEntropy entropy{seed};
  Bytes bytes(size);
  for (auto& byte : bytes) byte = static_cast<std::byte>(entropy.next() & 0xFF);
  return bytes;
}

std::vector<Frame> read_all(std::span<const std::byte> bytes, FrameReader& reader) {
  reader.feed(bytes);
  std::vector<Frame> frames;
  while (auto frame = reader.next()) frames.push_back(*std::move(frame));
  return frames;
}

// By hand: 0B 34 12 and the CRC-16 of these three bytes, all non-zero or stuffed after Cheshire and Baker.
TEST(Frame, IsLaidOutAsWrittenDown) {
  const Frame frame{0x0B, 0x1234, {}};
  const Bytes plain{std::byte{0x0B}, std::byte{0x34}, std::byte{0x12}};
  const std::uint16_t check = crc16(plain);
  const Bytes wanted{std::byte{6},          std::byte{0x0B}, std::byte{0x34}, std::byte{0x12}, std::byte(check & 0xFF),
                     std::byte(check >> 8), std::byte{0}};
  EXPECT_EQ(encode_frame(frame), wanted);
}

TEST(Frame, ComesBackForEveryPayloadLength) {
  for (std::size_t size = 0; size <= Frame::max_payload; ++size) {
    const Frame frame{static_cast<std::uint8_t>(size), static_cast<std::uint16_t>(size * 63), some_bytes(size, size)};
    const Bytes encoded = encode_frame(frame);
    ASSERT_EQ(encoded.back(), std::byte{0});
    const auto back = decode_frame(std::span{encoded}.first(encoded.size() - 1));
    ASSERT_TRUE(back.has_value()) << back.error().text();
    ASSERT_EQ(*back, frame);
  }
}

TEST(Frame, RefusesToSendAPayloadThatIsTooLong) {
  EXPECT_THROW(encode_frame({1, 2, Bytes(Frame::max_payload + 1)}), std::length_error);
}

TEST(Frame, RefusesOneThatIsTooShortOrTooLongThoughItsCheckIsRight) {
  for (const std::size_t size : {0u, 1u, 2u, 1028u}) {
    LeWriter plain;
    plain.raw(some_bytes(size, 5));
    plain.u16(crc16(plain.bytes()));
    EXPECT_EQ(decode_frame(cobs_encode(plain.bytes())).error().id, "frame_length") << size;
  }
}

// Every single damaged byte, in every way: lost, doubled, and changed to each other value. A zero byte cuts the frame
// in two. No damaged form may pass as a frame.
TEST(Frame, NoSingleDamagedByteIsTakenForAFrame) {
  const Frame frame{0x82, 0x00A7, some_bytes(14, 3)};
  const Bytes good = encode_frame(frame);
  for (std::size_t at = 0; at + 1 < good.size(); ++at) {
    const auto here = good.begin() + static_cast<std::ptrdiff_t>(at);
    for (unsigned value = 0; value < 256; ++value) {
      if (std::byte(value) == good[at]) continue;
      Bytes changed = good;
      changed[at] = std::byte(value);
      FrameReader reader;
      EXPECT_TRUE(read_all(changed, reader).empty()) << "byte " << at << " changed to " << value;
      EXPECT_GE(reader.damaged(), 1u);
    }
    Bytes lost{good.begin(), here};
    lost.insert(lost.end(), here + 1, good.end());
    Bytes doubled{good.begin(), here + 1};
    doubled.insert(doubled.end(), here, good.end());
    for (const Bytes& damaged : {lost, doubled}) {
      FrameReader reader;
      EXPECT_TRUE(read_all(damaged, reader).empty()) << "byte " << at << " lost or doubled";
      EXPECT_EQ(reader.damaged(), 1u);
    }
  }
}

// A CRC of 16 bits finds every error burst of up to 16 bits; here on a full-size frame, changed bytes at every place.
TEST(Frame, NoChangedByteOfALongFrameIsTaken) {
  const Bytes good = encode_frame({0x50, 9, some_bytes(390, 4)});
  for (std::size_t at = 0; at + 1 < good.size(); ++at) {
    for (const unsigned flip : {0x01u, 0x80u, 0xFFu, 0x55u}) {
      Bytes changed = good;
      changed[at] ^= std::byte(flip);
      FrameReader reader;
      ASSERT_TRUE(read_all(changed, reader).empty()) << at;
    }
  }
}

TEST(FrameReader, YieldsTheFollowingFrameAfterADamagedOne) {
  const Bytes first = encode_frame({1, 1, some_bytes(40, 1)}), second = encode_frame({2, 2, some_bytes(40, 2)});
  for (std::size_t at = 0; at + 1 < first.size(); ++at) {  // a lost delimiter takes the second frame along
    Bytes line = first;
    line.erase(line.begin() + static_cast<std::ptrdiff_t>(at));
    line.insert(line.end(), second.begin(), second.end());
    FrameReader reader;
    const auto frames = read_all(line, reader);
    ASSERT_EQ(frames.size(), 1u);
    EXPECT_EQ(frames[0].type, 2);
  }
}

TEST(FrameReader, TakesBytesInAnyPieces) {
  Bytes line{std::byte{0}, std::byte{0}};  // delimiters in a row are no frames
  for (std::uint8_t type = 1; type <= 20; ++type) {
    const Bytes frame = encode_frame({type, type, some_bytes(type * 13u, type)});
    line.insert(line.end(), frame.begin(), frame.end());
    line.push_back(std::byte{0});
  }
  for (std::size_t piece = 1; piece < 70; ++piece) {
    FrameReader reader;
    std::vector<Frame> frames;
    for (std::size_t at = 0; at < line.size(); at += piece) {
      auto some = read_all(std::span{line}.subspan(at, std::min(piece, line.size() - at)), reader);
      frames.insert(frames.end(), some.begin(), some.end());
    }
    ASSERT_EQ(frames.size(), 20u) << "pieces of " << piece;
    EXPECT_EQ(frames.back().sequence, 20);
    EXPECT_EQ(reader.damaged(), 0u);
    EXPECT_FALSE(reader.partial());
  }
}

TEST(FrameReader, DropsAnEndlessFrameOnceAndGoesOn) {
  FrameReader reader;
  for (int i = 0; i < 1000; ++i) reader.feed(Bytes(1000, std::byte{7}));
  EXPECT_TRUE(reader.partial());
  EXPECT_LE(reader.held(), cobs_bound(Frame::max_payload + Frame::overhead) + 1);
  EXPECT_TRUE(read_all(Bytes{std::byte{0}}, reader).empty());
  EXPECT_EQ(reader.damaged(), 1u);
  EXPECT_EQ(read_all(encode_frame({9, 9, {}}), reader).size(), 1u);
}

TEST(FrameReader, ForgetsOnClear) {
  FrameReader reader;
  const Bytes good = encode_frame({9, 9, some_bytes(9, 9)});
  reader.feed(good);
  reader.feed(std::span{good}.first(5));
  reader.clear();
  EXPECT_FALSE(reader.partial());
  EXPECT_FALSE(reader.next());
  EXPECT_EQ(read_all(good, reader).size(), 1u);
}

TEST(LittleEndian, ComesBackAndNeverReadsBeyondTheEnd) {
  LeWriter writer;
  writer.u8(0xFE).u16(0xFEDC).u32(0xFEDCBA98).u64(0xFEDCBA9876543210).i16(-2).i24(-8388608).i24(8388607).i24(-1);
  writer.i32(-3).short_text("phantom").raw(Bytes(2, std::byte{5}));
  const Bytes bytes = writer.bytes();
  EXPECT_EQ(bytes[1], std::byte{0xDC});  // least significant first
  for (std::size_t size = 0; size <= bytes.size(); ++size) {
    LeReader reader{std::span{bytes}.first(size)};
    const bool whole = size == bytes.size();
    const bool right = reader.u8() == 0xFE && reader.u16() == 0xFEDC && reader.u32() == 0xFEDCBA98 &&
                       reader.u64() == 0xFEDCBA9876543210 && reader.i16() == -2 && reader.i24() == -8388608 &&
                       reader.i24() == 8388607 && reader.i24() == -1 && reader.i32() == -3 &&
                       reader.short_text() == "phantom" && reader.raw(2).size() == 2;
    EXPECT_EQ(right, whole) << size;
    if (!whole) {
      EXPECT_EQ(reader.raw(1000).size(), 0u);
      EXPECT_EQ(reader.u32(), 0u);
    }
    EXPECT_EQ(reader.ok(), whole) << size;
    EXPECT_EQ(reader.finished(), whole);
  }
  EXPECT_FALSE(LeReader{bytes}.finished());
}

}  // namespace
