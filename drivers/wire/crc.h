#pragma once
#include <cstddef>
#include <cstdint>
#include <span>
#include <string_view>

namespace probewright::wire {

/// CRC-16/IBM-3740: polynomial 0x1021, start 0xFFFF, not reflected, no final exclusive-or; "123456789" gives 0x29B1.
/// Closes every frame and every checked line. Incremental: add() in any number of pieces, value() at any time.
class Crc16 {
 public:
  Crc16& add(std::span<const std::byte> bytes);
  Crc16& add(std::string_view text) { return add(std::as_bytes(std::span{text})); }
  std::uint16_t value() const { return state_; }

 private:
  std::uint16_t state_ = 0xFFFF;
};

/// CRC-32/ISO-HDLC: reflected polynomial 0xEDB88320, start and final exclusive-or 0xFFFFFFFF; "123456789" gives
/// 0xCBF43926. Closes whole captures and blocks. Incremental as above.
class Crc32 {
 public:
  Crc32& add(std::span<const std::byte> bytes);
  Crc32& add(std::string_view text) { return add(std::as_bytes(std::span{text})); }
  std::uint32_t value() const { return ~state_; }

 private:
  std::uint32_t state_ = 0xFFFFFFFF;
};

inline std::uint16_t crc16(std::span<const std::byte> bytes) { return Crc16{}.add(bytes).value(); }
inline std::uint16_t crc16(std::string_view text) { return Crc16{}.add(text).value(); }
inline std::uint32_t crc32(std::span<const std::byte> bytes) { return Crc32{}.add(bytes).value(); }
inline std::uint32_t crc32(std::string_view text) { return Crc32{}.add(text).value(); }

}  // namespace probewright::wire
