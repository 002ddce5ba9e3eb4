#pragma once
#include <cstddef>
#include <cstdint>
#include <span>
#include <string>
#include <string_view>
#include <type_traits>

#include "station/base/digest.h"

namespace probewright::wire {

/// Appends numbers, least significant byte first.
class LeWriter {
 public:
  LeWriter& u8(std::uint8_t value) { return put(value, 1); }
  LeWriter& u16(std::uint16_t value) { return put(value, 2); }
  LeWriter& u32(std::uint32_t value) { return put(value, 4); }
  LeWriter& u64(std::uint64_t value) { return put(value, 8); }
  LeWriter& i16(std::int16_t value) { return put(static_cast<std::uint16_t>(value), 2); }
  /// The low 24 bits in two's complement; `value` must lie in -8388608 .. 8388607.
  LeWriter& i24(std::int32_t value) { return put(static_cast<std::uint32_t>(value), 3); }
  LeWriter& i32(std::int32_t value) { return put(static_cast<std::uint32_t>(value), 4); }
  LeWriter& raw(std::span<const std::byte> bytes) {
    bytes_.insert(bytes_.end(), bytes.begin(), bytes.end());
    return *this;
  }
  /// `length u8` and the bytes; text beyond 255 bytes is cut off.
  LeWriter& short_text(std::string_view text) {
    text = text.substr(0, 255);
    u8(static_cast<std::uint8_t>(text.size()));
    return raw(std::as_bytes(std::span{text}));
  }
  const Bytes& bytes() const { return bytes_; }
  Bytes take() { return std::move(bytes_); }

 private:
  LeWriter& put(std::uint64_t value, int size) {
    for (int i = 0; i < size; ++i, value >>= 8) bytes_.push_back(static_cast<std::byte>(value & 0xFFu));
    return *this;
  }
  Bytes bytes_;
};

/// Reads them back, never beyond the end: a read that does not fit gives 0 (or empty) and from then on ok() is false.
/// Check finished() once after the last field. The bytes must outlive the reader.
class LeReader {
 public:
  explicit LeReader(std::span<const std::byte> bytes) : bytes_(bytes) {}

  std::uint8_t u8() { return static_cast<std::uint8_t>(get(1)); }
  std::uint16_t u16() { return static_cast<std::uint16_t>(get(2)); }
  std::uint32_t u32() { return static_cast<std::uint32_t>(get(4)); }
  std::uint64_t u64() { return get(8); }
  std::int16_t i16() { return static_cast<std::int16_t>(u16()); }
  std::int32_t i24() {
    const auto low = static_cast<std::int32_t>(get(3));
    return low >= 0x800000 ? low - 0x1000000 : low;
  }
  std::int32_t i32() { return static_cast<std::int32_t>(u32()); }
  std::span<const std::byte> raw(std::size_t size) {
    if (!fits(size)) return {};
    const auto piece = bytes_.subspan(at_, size);
    at_ += size;
    return piece;
  }
  std::string short_text() {
    const auto piece = raw(u8());
    return {reinterpret_cast<const char*>(piece.data()), piece.size()};
  }
  std::size_t left() const { return bytes_.size() - at_; }
  /// Every read so far fitted.
  bool ok() const { return ok_; }
  /// Every read fitted and nothing is left over.
  bool finished() const { return ok_ && left() == 0; }

 private:
  bool fits(std::size_t size) {
    if (size > left()) {
      ok_ = false;
      at_ = bytes_.size();
    }
    return ok_;
  }
  std::uint64_t get(std::size_t size) {
    if (!fits(size)) return 0;
    std::uint64_t value = 0;
    for (std::size_t i = size; i > 0; --i) value = value << 8 | std::to_integer<std::uint64_t>(bytes_[at_ + i - 1]);
    at_ += size;
    return value;
  }
  std::span<const std::byte> bytes_;
  std::size_t at_ = 0;
  bool ok_ = true;
};

}  // namespace probewright::wire
