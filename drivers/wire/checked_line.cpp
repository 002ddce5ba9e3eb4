#include "drivers/wire/checked_line.h"

#include <cstdint>

#include "drivers/wire/crc.h"

namespace probewright::wire {
namespace {

constexpr std::string_view digits = "0123456789ABCDEF";
constexpr std::size_t suffix = 5;  // the bar and four digits

std::string hex4(std::uint16_t value) {
  std::string text(4, '0');
  for (std::size_t i = 0; i < 4; ++i) text[i] = digits[value >> (12 - 4 * i) & 0xFu];
  return text;
}

}  // namespace

std::string add_checksum(std::string_view text) {
  std::string line;
  line.reserve(text.size() + suffix + 1);
  line.append(text).append("|").append(hex4(crc16(text))).append("\n");
  return line;
}

bool has_checksum(std::string_view line) {
  if (line.size() < suffix || line[line.size() - suffix] != '|') return false;
  return line.substr(line.size() - 4).find_first_not_of(digits) == std::string_view::npos;
}

Result<std::string> strip_checksum(std::string_view line) {
  if (line.ends_with('\n')) line.remove_suffix(1);
  if (!has_checksum(line)) return Problem{"line_checksum_missing", ""};
  const auto text = line.substr(0, line.size() - suffix);
  const auto found = line.substr(line.size() - 4);
  const std::string computed = hex4(crc16(text));
  if (found != computed)
    return Problem{"line_checksum_wrong", "", {{"found", std::string{found}}, {"computed", computed}}};
  return std::string{text};
}

}  // namespace probewright::wire
