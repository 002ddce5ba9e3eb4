#pragma once
#include <cstddef>
#include <string_view>

namespace probewright {

/// Offset of the first byte that is not well-formed UTF-8 (RFC 3629: no overlong forms, no surrogates, nothing above
/// U+10FFFF), or npos if all is well.
std::size_t first_bad_utf8(std::string_view text);

/// Offset of the first control character (below 0x20, or 0x7F) other than tab, line feed and carriage return, or npos.
std::size_t first_control_character(std::string_view text);

/// How many characters (code points) well-formed `text` has.
std::size_t count_characters(std::string_view text);

}  // namespace probewright
