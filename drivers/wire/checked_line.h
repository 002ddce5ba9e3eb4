#pragma once
#include <string>
#include <string_view>

#include "station/base/result.h"

namespace probewright::wire {

/// A checked line is `text|CCCC` and LF: four upper-case hexadecimal digits of the CRC-16/IBM-3740 over the bytes of
/// `text`, which may hold blocks with any bytes.

/// `text` as a checked line, LF included.
std::string add_checksum(std::string_view text);

/// Whether `line` (without LF) ends in a bar and four upper-case hexadecimal digits.
bool has_checksum(std::string_view line);

/// The text of a checked line, given with or without its LF. Errors: line_checksum_missing, line_checksum_wrong.
Result<std::string> strip_checksum(std::string_view line);

}  // namespace probewright::wire
