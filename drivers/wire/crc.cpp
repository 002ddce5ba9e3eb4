#include "drivers/wire/crc.h"

#include <array>

namespace probewright::wire {
namespace {

constexpr std::array<std::uint16_t, 256> table16 = [] {
  std::array<std::uint16_t, 256> table{};
  for (unsigned index = 0; index < 256; ++index) {
    unsigned crc = index << 8;
    for (int bit = 0; bit < 8; ++bit) crc = (crc & 0x8000u) ? (crc << 1) ^ 0x1021u : crc << 1;
    table[index] = static_cast<std::uint16_t>(crc);
  }
  return table;
}();

constexpr std::array<std::uint32_t, 256> table32 = [] {
  std::array<std::uint32_t, 256> table{};
  for (std::uint32_t index = 0; index < 256; ++index) {
    std::uint32_t crc = index;
    for (int bit = 0; bit < 8; ++bit) crc = (crc & 1u) ? (crc >> 1) ^ 0xEDB88320u : crc >> 1;
    table[index] = crc;
  }
  return table;
}();

}  // namespace

Crc16& Crc16::add(std::span<const std::byte> bytes) {
  unsigned crc = state_;
  for (const std::byte byte : bytes) crc = (crc << 8 & 0xFF00u) ^ table16[(crc >> 8) ^ std::to_integer<unsigned>(byte)];
  state_ = static_cast<std::uint16_t>(crc);
  return *this;
}

Crc32& Crc32::add(std::span<const std::byte> bytes) {
  std::uint32_t crc = state_;
  for (const std::byte byte : bytes) crc = (crc >> 8) ^ table32[(crc ^ std::to_integer<std::uint32_t>(byte)) & 0xFFu];
  state_ = crc;
  return *this;
}

}  // namespace probewright::wire
