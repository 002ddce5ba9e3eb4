#pragma once
#include <cstddef>
#include <span>

#include "station/base/digest.h"
#include "station/base/result.h"

namespace probewright::wire {

/// Consistent overhead byte stuffing: `plain` without zero bytes, one byte longer for every started run of 254.
/// The delimiter (a zero byte) is not included. Empty input gives the one byte 0x01. Where the data end with a full
/// run of 254, no empty group follows (the form of the paper's examples).
/// Source: S. Cheshire, M. Baker, IEEE/ACM Transactions on Networking 7(2), 1999.
Bytes cobs_encode(std::span<const std::byte> plain);

/// The inverse; `encoded` stands without its delimiter. Accepts both forms where data end with a full run of 254.
/// Errors: cobs_malformed (a zero byte inside, a group that reaches beyond the end, nothing at all).
Result<Bytes> cobs_decode(std::span<const std::byte> encoded);

/// Length of the longest encoding of `plain_size` bytes, delimiter not included.
constexpr std::size_t cobs_bound(std::size_t plain_size) { return plain_size + plain_size / 254 + 1; }

}  // namespace probewright::wire
