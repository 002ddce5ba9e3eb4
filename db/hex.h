#pragma once
#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "station/base/digest.h"

namespace probewright::db {

/// Lower-case hexadecimal.
std::string hex(std::span<const std::byte> bytes);
/// Bytes of lower-case hexadecimal, or nothing.
std::optional<Bytes> from_hex(std::string_view text);
/// A digest written as 64 lower-case hexadecimal digits, or nothing.
std::optional<Digest> digest_from_hex(std::string_view text);

}  // namespace probewright::db
