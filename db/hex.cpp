#include "db/hex.h"

#include <algorithm>

namespace probewright::db {
namespace {

constexpr std::string_view digits = "0123456789abcdef";

}  // namespace

std::string hex(std::span<const std::byte> bytes) {
  std::string text;
  text.reserve(2 * bytes.size());
  for (const std::byte byte : bytes) {
    text += digits[std::to_integer<std::size_t>(byte >> 4)];
    text += digits[std::to_integer<std::size_t>(byte & std::byte{15})];
  }
  return text;
}

std::optional<Bytes> from_hex(std::string_view text) {
  if (text.size() % 2 != 0) return std::nullopt;
  Bytes bytes;
  for (std::size_t i = 0; i < text.size(); i += 2) {
    const auto high = digits.find(text[i]), low = digits.find(text[i + 1]);
    if (high == digits.npos || low == digits.npos) return std::nullopt;
    bytes.push_back(static_cast<std::byte>(high << 4 | low));
  }
  return bytes;
}

std::optional<Digest> digest_from_hex(std::string_view text) {
  const auto bytes = from_hex(text);
  Digest digest{};
  if (!bytes || bytes->size() != digest.size()) return std::nullopt;
  std::copy(bytes->begin(), bytes->end(), digest.begin());
  return digest;
}

}  // namespace probewright::db
