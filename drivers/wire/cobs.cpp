#include "drivers/wire/cobs.h"

namespace probewright::wire {
namespace {

constexpr std::size_t full_code = 0xFF;  // 254 bytes and no zero after them

Problem malformed(std::string_view reason) { return Problem{"cobs_malformed", "", {{"reason", std::string{reason}}}}; }

}  // namespace

Bytes cobs_encode(std::span<const std::byte> plain) {
  Bytes encoded;
  encoded.reserve(cobs_bound(plain.size()));
  std::size_t code_at = 0;
  encoded.push_back(std::byte{1});
  const auto close_group = [&] {
    encoded[code_at] = static_cast<std::byte>(encoded.size() - code_at);
    code_at = encoded.size();
    encoded.push_back(std::byte{1});
  };
  for (std::size_t i = 0; i < plain.size(); ++i) {
    if (plain[i] == std::byte{0}) {
      close_group();
      continue;
    }
    encoded.push_back(plain[i]);
    const bool full = encoded.size() - code_at == full_code;
    const bool last = i + 1 == plain.size();
    if (full && !last) close_group();
  }
  encoded[code_at] = static_cast<std::byte>(encoded.size() - code_at);
  return encoded;
}

Result<Bytes> cobs_decode(std::span<const std::byte> encoded) {
  if (encoded.empty()) return malformed("empty");
  Bytes plain;
  plain.reserve(encoded.size());
  std::size_t at = 0;
  while (at < encoded.size()) {
    const auto code = std::to_integer<std::size_t>(encoded[at]);
    if (code == 0) return malformed("zero byte inside");
    if (at + code > encoded.size()) return malformed("a group reaches beyond the end");
    for (std::size_t i = at + 1; i < at + code; ++i) {
      if (encoded[i] == std::byte{0}) return malformed("zero byte inside");
      plain.push_back(encoded[i]);
    }
    at += code;
    if (code != full_code && at < encoded.size()) plain.push_back(std::byte{0});
  }
  return plain;
}

}  // namespace probewright::wire
