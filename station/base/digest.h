#pragma once
#include <array>
#include <cstddef>
#include <cstdint>
#include <string>
#include <vector>

namespace probewright {

using Bytes = std::vector<std::byte>;
/// SHA-256 (FIPS 180-4). Computed in db (OpenSSL); base only carries the value.
using Digest = std::array<std::byte, 32>;
/// Lower-case hexadecimal.
std::string to_hex(const Digest& digest);

}  // namespace probewright
