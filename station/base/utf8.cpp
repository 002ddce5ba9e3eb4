#include "station/base/utf8.h"

#include <algorithm>

namespace probewright {
namespace {

bool continues(unsigned char c) { return (c & 0xC0u) == 0x80u; }

/// Length of the well-formed sequence at the front of `rest`, 0 if there is none. Table 3-7 of the Unicode standard.
std::size_t sequence_length(std::string_view rest) {
  const auto at = [rest](std::size_t i) { return i < rest.size() ? static_cast<unsigned char>(rest[i]) : 0u; };
  const unsigned first = at(0), second = at(1);
  if (first < 0x80) return 1;
  if (first >= 0xC2 && first <= 0xDF) return continues(static_cast<unsigned char>(second)) ? 2 : 0;
  if (first >= 0xE0 && first <= 0xEF) {
    const unsigned low = first == 0xE0 ? 0xA0 : 0x80, high = first == 0xED ? 0x9F : 0xBF;
    return second >= low && second <= high && continues(static_cast<unsigned char>(at(2))) ? 3 : 0;
  }
  if (first >= 0xF0 && first <= 0xF4) {
    const unsigned low = first == 0xF0 ? 0x90 : 0x80, high = first == 0xF4 ? 0x8F : 0xBF;
    const bool tail = continues(static_cast<unsigned char>(at(2))) && continues(static_cast<unsigned char>(at(3)));
    return second >= low && second <= high && tail ? 4 : 0;
  }
  return 0;
}

}  // namespace

std::size_t first_bad_utf8(std::string_view text) {
  for (std::size_t at = 0; at < text.size();) {
    const std::size_t length = sequence_length(text.substr(at));
    if (length == 0) return at;
    at += length;
  }
  return std::string_view::npos;
}

std::size_t first_control_character(std::string_view text) {
  const auto is_control = [](char c) {
    const auto code = static_cast<unsigned char>(c);
    return (code < 0x20 && c != '\t' && c != '\n' && c != '\r') || code == 0x7F;
  };
  const auto found = std::find_if(text.begin(), text.end(), is_control);
  return found == text.end() ? std::string_view::npos : static_cast<std::size_t>(found - text.begin());
}

std::size_t count_characters(std::string_view text) {
  return static_cast<std::size_t>(
      std::count_if(text.begin(), text.end(), [](char c) { return !continues(static_cast<unsigned char>(c)); }));
}

}  // namespace probewright
