#pragma once
#include <cstddef>
#include <cstdint>
#include <deque>
#include <optional>
#include <span>

#include "station/base/digest.h"
#include "station/base/result.h"

namespace probewright::wire {

/// One frame of the adapter's line: `type u8 | sequence u16 | payload | CRC-16 u16`, COBS encoded, then a zero byte.
struct Frame {
  static constexpr std::size_t max_payload = 1024;
  static constexpr std::size_t overhead = 5;  ///< type, sequence, check
  std::uint8_t type = 0;
  std::uint16_t sequence = 0;
  Bytes payload;
  bool operator==(const Frame&) const = default;
};

/// The bytes on the line, delimiter included. Throws std::length_error for a payload above max_payload: our mistake.
Bytes encode_frame(const Frame& frame);

/// One frame from the bytes between two delimiters. Errors: cobs_malformed, frame_length, frame_check.
Result<Frame> decode_frame(std::span<const std::byte> encoded);

/// Gathers bytes that come in pieces and yields whole, valid frames in order. Damaged ones are dropped and counted;
/// two delimiters in a row are no frame and no damage. Holds at most one unfinished frame: what is longer than any
/// valid frame is dropped up to the next delimiter and counted once.
class FrameReader {
 public:
  /// Takes all of `bytes`; the frames that they complete wait for next().
  void feed(std::span<const std::byte> bytes);
  /// The oldest frame that nobody took.
  std::optional<Frame> next();
  /// How many frames were dropped as damaged since the beginning.
  std::uint64_t damaged() const { return damaged_; }
  /// Whether bytes of an unfinished frame are held.
  bool partial() const { return !held_.empty() || overlong_; }
  /// How many bytes of it are held; never more than the longest valid frame has, and one.
  std::size_t held() const { return held_.size(); }
  /// Forgets the unfinished frame and the frames that nobody took; the count stays.
  void clear();

 private:
  void finish();
  Bytes held_;
  bool overlong_ = false;
  std::deque<Frame> ready_;
  std::uint64_t damaged_ = 0;
};

}  // namespace probewright::wire
