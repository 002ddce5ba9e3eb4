#pragma once
#include <cstddef>
#include <span>
#include <string>
#include <string_view>

#include "station/base/digest.h"
#include "station/base/result.h"

namespace probewright::wire {

/// IEEE 488.2 definite-length block: `#`, one digit n from 1 to 9, n digits with the number of bytes, the bytes.
/// "HELLO" is `#15HELLO`; nothing is `#10`. Source: IEEE 488.2, 7.7.6 and 8.7.9.

/// `bytes` as a block. Throws std::length_error from 10^9 bytes on: our mistake.
std::string encode_block(std::span<const std::byte> bytes);

struct Block {
  Bytes bytes;
  std::size_t length = 0;  ///< characters that the whole form took, header included
};

/// The block that `text` begins with; more may follow. Errors: block_malformed (no header; also the indefinite form
/// `#0`, which a serial line cannot end), block_short (fewer bytes than the header says).
Result<Block> decode_block(std::string_view text);

}  // namespace probewright::wire
