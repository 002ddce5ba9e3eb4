#include "drivers/wire/block.h"

#include <stdexcept>

#include "station/base/numbers.h"

namespace probewright::wire {
namespace {

bool is_digit(char c) { return c >= '0' && c <= '9'; }

Problem malformed(std::string_view reason) { return Problem{"block_malformed", "", {{"reason", std::string{reason}}}}; }

}  // namespace

std::string encode_block(std::span<const std::byte> bytes) {
  const std::string length = std::to_string(bytes.size());
  if (length.size() > 9) throw std::length_error("block of " + length + " bytes");
  std::string block = "#" + std::to_string(length.size()) + length;
  block.append(reinterpret_cast<const char*>(bytes.data()), bytes.size());
  return block;
}

Result<Block> decode_block(std::string_view text) {
  if (text.size() < 2 || text[0] != '#' || !is_digit(text[1])) return malformed("it does not begin with # and a digit");
  if (text[1] == '0') return malformed("its length is not given");
  const auto digits = static_cast<std::size_t>(text[1] - '0');
  if (text.size() < 2 + digits) return malformed("its header is cut off");
  std::size_t size = 0;
  for (const char c : text.substr(2, digits)) {
    if (!is_digit(c)) return malformed("its length is not a number");
    size = size * 10 + static_cast<std::size_t>(c - '0');
  }
  const auto content = text.substr(2 + digits);
  if (content.size() < size)
    return Problem{"block_short", "", {{"size", std::to_string(size)}, {"found", std::to_string(content.size())}}};
  const auto bytes = std::as_bytes(std::span{content.substr(0, size)});
  return Block{{bytes.begin(), bytes.end()}, 2 + digits + size};
}

}  // namespace probewright::wire
