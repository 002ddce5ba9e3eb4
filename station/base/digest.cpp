#include "station/base/digest.h"

namespace probewright {

std::string to_hex(const Digest& digest) {
  constexpr char hex[] = "0123456789abcdef";
  std::string text;
  text.reserve(2 * digest.size());
  for (const std::byte b : digest) {
    text += hex[std::to_integer<unsigned>(b) >> 4];
    text += hex[std::to_integer<unsigned>(b) & 15u];
  }
  return text;
}

}  // namespace probewright
