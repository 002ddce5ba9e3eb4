#pragma once
#include <span>
#include <string>
#include <string_view>

#include "station/base/digest.h"
#include "station/base/result.h"

namespace probewright::db {

/// Bytes as they lie in the ledger.
struct Packed {
  std::string packing;  ///< "zstd" (RFC 8878, one frame) or "none" where packing would not make them smaller
  Bytes stored;
};

inline constexpr std::size_t largest_capture =
    256u << 20;  ///< decoded bytes; a claim of more is refused before any memory is taken

Packed pack(std::span<const std::byte> decoded);
/// Errors: capture_damaged (not a zstd frame, or not `decoded_size` bytes, or an unknown packing).
Result<Bytes> unpack(std::string_view packing, std::span<const std::byte> stored, std::size_t decoded_size);

}  // namespace probewright::db
