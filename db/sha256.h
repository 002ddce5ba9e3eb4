#pragma once
#include <span>
#include <string_view>

#include "station/base/digest.h"

struct evp_md_ctx_st;

namespace probewright::db {

/// SHA-256 piece by piece. Source: FIPS 180-4, by OpenSSL (which uses the processor's own instructions).
class Sha256 {
 public:
  Sha256();
  ~Sha256();
  Sha256(Sha256&&) = delete;
  Sha256& add(std::span<const std::byte> bytes);
  Sha256& add(std::string_view bytes);
  /// The digest of all that was added; begins anew.
  Digest finish();

 private:
  evp_md_ctx_st* context_;
};

Digest sha256(std::span<const std::byte> bytes);
Digest sha256(std::string_view bytes);

}  // namespace probewright::db
