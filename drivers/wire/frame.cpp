#include "drivers/wire/frame.h"

#include <stdexcept>
#include <string>

#include "drivers/wire/cobs.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/le.h"

namespace probewright::wire {
namespace {

constexpr std::size_t longest_encoded = cobs_bound(Frame::max_payload + Frame::overhead);

}  // namespace

Bytes encode_frame(const Frame& frame) {
  if (frame.payload.size() > Frame::max_payload)
    throw std::length_error("frame payload of " + std::to_string(frame.payload.size()) + " bytes");
  LeWriter plain;
  plain.u8(frame.type).u16(frame.sequence).raw(frame.payload);
  plain.u16(crc16(plain.bytes()));
  Bytes encoded = cobs_encode(plain.bytes());
  encoded.push_back(std::byte{0});
  return encoded;
}

Result<Frame> decode_frame(std::span<const std::byte> encoded) {
  auto plain = cobs_decode(encoded);
  if (!plain) return plain.error();
  if (plain->size() < Frame::overhead || plain->size() > Frame::overhead + Frame::max_payload)
    return Problem{"frame_length", "", {{"size", std::to_string(plain->size())}}};
  const std::span<const std::byte> all{*plain};
  const auto body = all.first(all.size() - 2);
  if (crc16(body) != LeReader{all.last(2)}.u16()) return Problem{"frame_check", ""};
  LeReader fields{body};
  Frame frame;
  frame.type = fields.u8();
  frame.sequence = fields.u16();
  const auto payload = fields.raw(fields.left());
  frame.payload.assign(payload.begin(), payload.end());
  return frame;
}

void FrameReader::feed(std::span<const std::byte> bytes) {
  for (const std::byte byte : bytes) {
    if (byte == std::byte{0}) {
      finish();
    } else if (!overlong_) {
      held_.push_back(byte);
      overlong_ = held_.size() > longest_encoded;
    }
  }
}

void FrameReader::finish() {
  if (held_.empty()) return;
  if (overlong_) {
    ++damaged_;
  } else if (auto frame = decode_frame(held_)) {
    ready_.push_back(*std::move(frame));
  } else {
    ++damaged_;
  }
  held_.clear();
  overlong_ = false;
}

std::optional<Frame> FrameReader::next() {
  if (ready_.empty()) return std::nullopt;
  Frame frame = std::move(ready_.front());
  ready_.pop_front();
  return frame;
}

void FrameReader::clear() {
  held_.clear();
  overlong_ = false;
  ready_.clear();
}

}  // namespace probewright::wire
