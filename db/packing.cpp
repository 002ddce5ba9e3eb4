#include "db/packing.h"

#include <zstd.h>

namespace probewright::db {

Packed pack(std::span<const std::byte> decoded) {
  constexpr int level = 3;
  Bytes packed(ZSTD_compressBound(decoded.size()));
  const std::size_t size = ZSTD_compress(packed.data(), packed.size(), decoded.data(), decoded.size(), level);
  if (ZSTD_isError(size) || size >= decoded.size()) return {"none", Bytes(decoded.begin(), decoded.end())};
  packed.resize(size);
  return {"zstd", std::move(packed)};
}

Result<Bytes> unpack(std::string_view packing, std::span<const std::byte> stored, std::size_t decoded_size) {
  const auto damaged = [](std::string reason) {
    return Problem{"capture_damaged", "", {{"reason", std::move(reason)}}};
  };
  if (packing == "none") {
    if (stored.size() != decoded_size) return damaged("its size is not the one recorded");
    return Bytes(stored.begin(), stored.end());
  }
  if (packing != "zstd") return damaged("its packing is not known");
  if (decoded_size > largest_capture) return damaged("it claims more than 256 MiB");
  Bytes decoded(decoded_size);
  const std::size_t size = ZSTD_decompress(decoded.data(), decoded.size(), stored.data(), stored.size());
  if (ZSTD_isError(size)) return damaged(ZSTD_getErrorName(size));
  if (size != decoded_size) return damaged("its size is not the one recorded");
  return decoded;
}

}  // namespace probewright::db
